import { sendOutbox, type MailTools, type SendMail } from './send-outbox'

/**
 * Looks at the outbox every few seconds until stopped; a round that fails is logged and the next one comes. Stopping
 * waits for the message that is on its way, not for those behind it.
 */
export function runMailJob(
  tools: MailTools,
  send: SendMail | null,
  everyMilliseconds = 5_000,
): { stop: () => Promise<void> } {
  let round: Promise<unknown> = Promise.resolve()
  let isBusy = false
  let isStopping = false
  const timer = setInterval(() => {
    if (isBusy) return
    isBusy = true
    round = sendOutbox(tools, send, () => isStopping)
      .catch((error: unknown) => tools.log.error({ err: error }, 'the outbox could not be read'))
      .finally(() => {
        isBusy = false
      })
  }, everyMilliseconds)
  return {
    stop: async () => {
      isStopping = true
      clearInterval(timer)
      await round
    },
  }
}
