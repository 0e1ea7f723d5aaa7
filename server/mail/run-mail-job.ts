import type { Logger } from 'pino'
import type { Database } from '@/db/client'
import { sendOutbox, type SendMail } from './send-outbox'

/** Looks at the outbox every few seconds until stopped; a round that fails is logged and the next one comes. */
export function runMailJob(
  tools: { db: Database; clock: () => Date; log: Logger },
  send: SendMail | null,
  everyMilliseconds = 5_000,
): { stop: () => Promise<void> } {
  let round: Promise<unknown> = Promise.resolve()
  let isBusy = false
  const timer = setInterval(() => {
    if (isBusy) return
    isBusy = true
    round = sendOutbox(tools, send)
      .catch((error: unknown) => tools.log.error({ err: error }, 'the outbox could not be read'))
      .finally(() => {
        isBusy = false
      })
  }, everyMilliseconds)
  return {
    stop: async () => {
      clearInterval(timer)
      await round
    },
  }
}
