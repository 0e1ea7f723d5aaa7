import { eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { personSites } from '@/db/schema/organisations'
import type { ActContext } from '../act-context'

/** The sites a person works at, as a whole: what is not named is taken away. */
export async function replacePersonSites(
  tx: Transaction,
  context: Pick<ActContext, 'person'>,
  personId: string,
  siteIds: readonly string[],
): Promise<void> {
  await tx.delete(personSites).where(eq(personSites.personId, personId))
  const rows = [...new Set(siteIds)].map((siteId) => ({
    organisationId: context.person.organisationId,
    personId,
    siteId,
  }))
  if (rows.length > 0) await tx.insert(personSites).values(rows)
}
