import type { AddressInfo } from 'node:net'
import type * as smtpServer from 'smtp-server'

export type ReceivedMail = { to: string; text: string }

/** A mail server on a loopback port that keeps what it gets. */
export async function listenForMail(): Promise<{
  url: string
  received: ReceivedMail[]
  close: () => Promise<void>
}> {
  const { SMTPServer } = globalThis.requireOutside?.('smtp-server') as typeof smtpServer
  const received: ReceivedMail[] = []
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS'],
    onData(stream, session, done) {
      const parts: Buffer[] = []
      stream.on('data', (part: Buffer) => parts.push(part))
      stream.on('end', () => {
        const to = session.envelope.rcptTo.map(({ address }) => address).join(', ')
        received.push({ to, text: Buffer.concat(parts).toString() })
        done()
      })
    },
  })
  await new Promise<void>((listening) => server.listen(0, '127.0.0.1', () => listening()))
  const { port } = server.server.address() as AddressInfo
  return {
    url: `smtp://127.0.0.1:${port}`,
    received,
    close: () => new Promise((closed) => server.close(() => closed())),
  }
}
