import { seesEverySite } from '@/shared/policies'
import type { Transaction } from '@/db/client'
import { findSite, type SiteRow } from '@/db/queries/sites'
import type { ActContext } from './act-context'
import { problem } from './problem'

/** Ids of the sites a person may see; null for the whole organisation. */
export function sitesSeen(context: ActContext, only?: string): string[] | null {
  if (seesEverySite(context.person)) return only === undefined ? null : [only]
  const own = context.person.siteIds
  return only === undefined ? own : own.filter((id) => id === only)
}

/**
 * A site the person may see.
 * @throws Problem not-found
 */
export async function getSite(
  tx: Transaction,
  context: ActContext,
  siteId: string,
): Promise<SiteRow> {
  const seen = sitesSeen(context, siteId)
  if (seen !== null && !seen.includes(siteId)) throw problem('not-found')
  const site = await findSite(tx, siteId)
  if (site === undefined) throw problem('not-found')
  return site
}
