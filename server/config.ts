import { randomBytes } from 'node:crypto'
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { z } from 'zod'

const environment = z.object({
  PORT: z.coerce.number().int().min(0).max(65535).default(8080),
  HOST: z.string().min(1).default('127.0.0.1'),
  /** Address of the product as people reach it: goes into QR codes and mail. */
  EBBMARK_URL: z.url().optional(),
  EBBMARK_DATA: z.string().min(1).default('.data'),
  DATABASE_URL: z.string().min(1).optional(),
  EBBMARK_DEMO: z.enum(['0', '1']).default('1'),
  EBBMARK_SECRET: z.string().min(32).optional(),
  SMTP_URL: z.string().min(1).optional(),
  MAIL_FROM: z.string().min(1).default('Ebbmark <register@book.example.org>'),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
  /** How many proxies in front may say who the caller is (X-Forwarded-For). */
  EBBMARK_PROXIES: z.coerce.number().int().min(0).max(5).default(0),
})

export type Config = {
  port: number
  host: string
  publicUrl: string
  dataFolder: string
  databaseUrl: string | undefined
  wantsDemo: boolean
  secret: Buffer
  smtpUrl: string | undefined
  mailFrom: string
  logLevel: string
  proxies: number
}

/**
 * The environment, read once.
 * @throws Error naming the variable and what it should be
 */
export function readConfig(env: NodeJS.ProcessEnv): Config {
  const read = environment.safeParse(env)
  if (!read.success) {
    const wrong = read.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`)
    throw new Error(`Settings that cannot be used: ${wrong.join('; ')}`)
  }
  const set = read.data
  return {
    port: set.PORT,
    host: set.HOST,
    publicUrl: (set.EBBMARK_URL ?? `http://${set.HOST}:${set.PORT}`).replace(/\/+$/, ''),
    dataFolder: set.EBBMARK_DATA,
    databaseUrl: set.DATABASE_URL,
    wantsDemo: set.EBBMARK_DEMO === '1',
    secret:
      set.EBBMARK_SECRET === undefined
        ? keptSecret(set.EBBMARK_DATA)
        : Buffer.from(set.EBBMARK_SECRET),
    smtpUrl: set.SMTP_URL,
    mailFrom: set.MAIL_FROM,
    logLevel: set.LOG_LEVEL,
    proxies: set.EBBMARK_PROXIES,
  }
}

/** A random secret made on the first start and kept beside the data, readable by its owner only. */
function keptSecret(folder: string): Buffer {
  const path = join(folder, 'secret')
  mkdirSync(folder, { recursive: true, mode: 0o700 })
  try {
    writeFileSync(path, randomBytes(48).toString('base64'), { mode: 0o600, flag: 'wx' })
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error
  }
  return Buffer.from(readFileSync(path, 'utf8').trim(), 'base64')
}
