import { eq, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { sites } from '../schema/sites'

export type SiteRow = typeof sites.$inferSelect

/** One site of the organisation, or undefined. */
export async function findSite(tx: Transaction, id: string): Promise<SiteRow | undefined> {
  const [found] = await tx.select().from(sites).where(eq(sites.id, id)).limit(1)
  return found
}

/** The caller's sites by id; `null` sees every site. */
export function ofSites(column: Parameters<typeof eq>[0], siteIds: readonly string[] | null) {
  if (siteIds === null) return undefined
  return sql`${column} = any(${sql.param(`{${siteIds.join(',')}}`)}::uuid[])`
}
