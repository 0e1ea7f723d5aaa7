import { randomUUID } from 'node:crypto'
import type { Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { join } from 'node:path'
import type { Express } from 'express'
import { pino } from 'pino'
import { openDatabase } from '@/db/client'
import { migrateDatabase } from '@/db/migrate'
import packageJson from '@/package.json'
import type { AppServices, DemoInfo } from './app-services'
import { readConfig, type Config } from './config'
import { createApp } from './create-app'
import { errorForLog } from './error-for-log'
import { openDemo } from './demo/open-demo'
import { usualRates } from './http/rate-limits'
import { runLimitsJob } from './limits/run-limits-job'
import { runMailJob } from './mail/run-mail-job'
import type { SendMail } from './mail/send-outbox'
import { smtpSender } from './mail/smtp'
import { secretKey } from './people/tokens'

/** How long requests that are being answered may take to end after a stop was asked for. */
const lastAnswersMs = 10_000

/** Opens the database, serves the product and stops in order: requests first, then the database. */
async function main(): Promise<void> {
  const config = readConfig(process.env)
  const opened = await openDatabase({ url: config.databaseUrl, folder: config.dataFolder })
  try {
    await migrateDatabase(opened)
    const services: AppServices = {
      db: opened.db,
      databaseKind: opened.kind,
      clock: () => new Date(),
      newId: randomUUID,
      log: pino({ level: config.logLevel, serializers: { err: errorForLog } }, pino.destination(2)),
      publicUrl: config.publicUrl,
      secret: secretKey(config.secret),
      demo: null,
      keepsMail: config.smtpUrl === undefined,
      version: packageJson.version,
    }
    if (config.wantsDemo) services.demo = await openDemo(opened.db, services)
    const app = createApp(services, {
      webFolder: join(process.cwd(), 'dist/web'),
      proxies: config.proxies,
      rates: usualRates,
    })
    const server = await listen(app, config)
    const mail = runMailJob(services, mailSender(config))
    const limits = runLimitsJob(services)
    stopOnSignal(async () => {
      await closed(server)
      await mail.stop()
      await limits.stop()
      await opened.close()
    })
    announce(server, config, services.demo)
  } catch (error) {
    await opened.close()
    throw error
  }
}

/** Null without a mail server: then mail stays in the local mailbox. */
function mailSender({ smtpUrl, mailFrom }: Config): SendMail | null {
  return smtpUrl === undefined ? null : smtpSender(smtpUrl, mailFrom)
}

/** @throws Error in one line when the address cannot be had */
function listen(app: Express, { host, port }: Config): Promise<Server> {
  return new Promise((done, failed) => {
    // Express hands a failure to the callback as well: without looking, a taken port would count as listening.
    const server = app.listen(port, host, (error?: Error) => {
      if (error === undefined) return done(server)
      const { code } = error as NodeJS.ErrnoException
      failed(
        code === 'EADDRINUSE'
          ? new Error(`Port ${port} on ${host} is already in use. Set PORT to another one.`)
          : error,
      )
    })
  })
}

function closed(server: Server): Promise<void> {
  return new Promise((done) => {
    const impatience = setTimeout(() => server.closeAllConnections(), lastAnswersMs)
    server.close(() => {
      clearTimeout(impatience)
      done()
    })
    server.closeIdleConnections()
  })
}

/** The first signal stops in order, a second one at once: what was acknowledged is in the database either way. */
function stopOnSignal(stop: () => Promise<void>): void {
  let isStopping = false
  const onSignal = () => {
    if (isStopping) process.exit(1)
    isStopping = true
    stop().then(
      () => process.exit(0),
      (error: unknown) => fail(error),
    )
  }
  process.on('SIGINT', onSignal)
  process.on('SIGTERM', onSignal)
}

function announce(server: Server, config: Config, demo: DemoInfo | null): void {
  const { port } = server.address() as AddressInfo
  const shown = config.host.includes(':') ? `[${config.host}]` : config.host
  process.stdout.write(`Ebbmark is open at http://${shown}:${port}\n`)
  if (demo === null) return
  process.stdout.write(`Demo company: sign in with the password "${demo.password}" as\n`)
  const widest = Math.max(...demo.people.map(({ email }) => email.length))
  for (const { email, name, does } of demo.people) {
    process.stdout.write(`  ${email.padEnd(widest)}  ${name}: ${does}\n`)
  }
}

function fail(error: unknown): void {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`)
  process.exit(1)
}

main().catch(fail)
