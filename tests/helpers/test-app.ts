import { randomBytes, randomUUID } from 'node:crypto'
import type { Express } from 'express'
import { pino } from 'pino'
import type { OpenedDatabase } from '@/db/client'
import type { AppServices } from '@/server/app-services'
import { createApp } from '@/server/create-app'
import { secretKey } from '@/server/people/tokens'
import { testDatabase } from './database'

export type TestApp = {
  app: Express
  services: AppServices
  opened: OpenedDatabase
  /** What the product takes for the present; a test moves it. */
  clock: { now: Date }
  close: () => Promise<void>
}

/**
 * The whole product on a database of this test file's own, as `createApp` makes it: without the web app, with a clock
 * that stands still and with rates that no test reaches.
 */
export async function testApp(
  given: { now?: string; services?: Partial<AppServices>; opened?: OpenedDatabase } = {},
): Promise<TestApp> {
  const opened = given.opened ?? (await testDatabase())
  const clock = { now: new Date(given.now ?? '2025-03-10T18:00:00Z') }
  const services: AppServices = {
    db: opened.db,
    databaseKind: opened.kind,
    clock: () => clock.now,
    newId: randomUUID,
    log: pino({ level: 'silent' }),
    publicUrl: 'https://ebbmark.example.org',
    secret: secretKey(randomBytes(32)),
    demo: null,
    keepsMail: true,
    version: '0.0.0-test',
    ...given.services,
  }
  const app = createApp(services, {
    webFolder: null,
    proxies: 0,
    rates: { perMinute: 100_000, guessesPerMinute: 100_000 },
  })
  return { app, services, opened, clock, close: () => opened.close() }
}
