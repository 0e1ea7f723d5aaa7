import { and, asc, eq, lte } from 'drizzle-orm'
import type { Logger } from 'pino'
import type { Database, Transaction } from '@/db/client'
import { asService } from '@/db/tenancy'
import { documents } from '@/db/schema/pickups'
import { outbox } from '@/db/schema/trail'

/** Sends one message; throws when it could not be handed over. */
export type SendMail = (message: {
  to: { name: string; address: string }
  subject: string
  text: string
  attachment: { filename: string; content: Uint8Array } | null
}) => Promise<void>

export type MailTools = { db: Database; clock: () => Date; log: Logger }

const mostAttempts = 8
const minute = 60_000
/** A message taken by a process that then died is due again after this; longer than any mail server may take. */
const lease = 15 * minute

/**
 * Sends what is due. A message is taken in one transaction and its fate written in another, with none open while the
 * mail server is spoken to: the embedded database has one connection, and a slow server must not hold it. A process
 * that dies in between sends again: better twice than never. A refused message is tried again later and later, eight
 * times over two and a half days. Without `send` (no mail server is set) messages stay in the local mailbox.
 * @param isStopping looked at between messages
 * @returns how many messages were looked at
 */
export async function sendOutbox(
  tools: MailTools,
  send: SendMail | null,
  isStopping: () => boolean = () => false,
): Promise<number> {
  if (send === null) return keepAll(tools)
  let looked = 0
  while (!isStopping() && (await sendNext(tools, send))) looked += 1
  return looked
}

async function keepAll({ db }: MailTools): Promise<number> {
  return asService(db, async (tx) => {
    const kept = await tx
      .update(outbox)
      .set({ state: 'kept' })
      .where(eq(outbox.state, 'waiting'))
      .returning({ id: outbox.id })
    return kept.length
  })
}

async function sendNext({ db, clock, log }: MailTools, send: SendMail): Promise<boolean> {
  const taken = await asService(db, (tx) => takeNext(tx, clock()))
  if (taken === undefined) return false
  const { message, bytes, attempts } = taken
  let refusal: string | undefined
  try {
    await send({
      to: { name: message.toName, address: message.toAddress },
      subject: message.subject,
      text: message.body,
      attachment:
        bytes === undefined
          ? null
          : { filename: message.attachmentName ?? 'document.pdf', content: bytes },
    })
  } catch (error) {
    refusal = (error instanceof Error ? error.message : String(error)).slice(0, 500)
    log.warn({ message: message.id, attempts }, 'mail was not taken')
  }
  const now = clock()
  await asService(db, (tx) =>
    tx
      .update(outbox)
      .set(
        refusal === undefined
          ? { state: 'sent', sentAt: now, lastError: '' }
          : {
              state: attempts >= mostAttempts ? 'failed' : 'waiting',
              lastError: refusal,
              nextAttemptAt: new Date(now.getTime() + minute * 4 ** Math.min(attempts, 5)),
            },
      )
      // Whoever took it after us, because we were slower than the lease, writes what became of it.
      .where(and(eq(outbox.id, message.id), eq(outbox.attempts, attempts))),
  )
  return true
}

/** Takes the oldest message that is due; other processes pass over the one being taken. */
async function takeNext(tx: Transaction, now: Date) {
  const [message] = await tx
    .select()
    .from(outbox)
    .where(and(eq(outbox.state, 'waiting'), lte(outbox.nextAttemptAt, now)))
    .orderBy(asc(outbox.createdAt))
    .limit(1)
    .for('update', { skipLocked: true })
  if (message === undefined) return undefined
  const attempts = message.attempts + 1
  await tx
    .update(outbox)
    .set({ attempts, nextAttemptAt: new Date(now.getTime() + lease) })
    .where(eq(outbox.id, message.id))
  const [document] =
    message.documentId === null
      ? []
      : await tx
          .select({ bytes: documents.bytes })
          .from(documents)
          .where(eq(documents.id, message.documentId))
  return { message, bytes: document?.bytes, attempts }
}
