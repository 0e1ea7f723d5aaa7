import { isNull } from 'drizzle-orm'
import type { Database } from '@/db/client'
import { sites } from '@/db/schema/sites'
import { asService } from '@/db/tenancy'
import type { ActContext } from '../act-context'
import { evaluateSiteLimits } from './evaluate-site-limits'

type Tools = Pick<ActContext, 'newId' | 'clock' | 'log'> & { db: Database }

/** Measures every site once: days pass without anybody's act. One transaction a site; one that fails is logged. */
export async function evaluateEverySite({ db, log, ...tools }: Tools): Promise<void> {
  const living = await asService(db, (tx) =>
    tx.select({ id: sites.id }).from(sites).where(isNull(sites.retiredAt)),
  )
  for (const { id } of living) {
    await asService(db, (tx) => evaluateSiteLimits(tx, tools, id)).catch((error: unknown) =>
      log.error({ err: error, site: id }, 'the limits of a site could not be measured'),
    )
  }
}

/** Measures every site now and then until stopped. */
export function runLimitsJob(
  tools: Tools,
  everyMilliseconds = 15 * 60_000,
): { stop: () => Promise<void> } {
  let round: Promise<void> = Promise.resolve()
  const timer = setInterval(() => {
    round = round.then(() => evaluateEverySite(tools)).catch(() => undefined)
  }, everyMilliseconds)
  return {
    stop: async () => {
      clearInterval(timer)
      await round
    },
  }
}
