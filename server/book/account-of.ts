import { and, eq, isNull } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { lockBook, type AccountPlace } from '@/db/queries/book'
import { accounts } from '@/db/schema/book'
import type { ActContext } from '../act-context'

/**
 * The account of a place at a site, opened when it is first needed. Two that open it at once get the same one: they
 * take turns in the site's book, so that they cannot wait for each other either.
 */
export async function accountOf(
  tx: Transaction,
  context: ActContext,
  siteId: string,
  place: AccountPlace,
): Promise<string> {
  const columns = {
    kind: place.kind,
    containerId: 'containerId' in place ? place.containerId : null,
    machineId: 'machineId' in place ? place.machineId : null,
    partyId: 'partyId' in place ? place.partyId : null,
    place: 'place' in place ? place.place : null,
  }
  const find = () =>
    tx
      .select({ id: accounts.id })
      .from(accounts)
      .where(
        and(
          eq(accounts.siteId, siteId),
          eq(accounts.kind, columns.kind),
          columns.containerId === null
            ? isNull(accounts.containerId)
            : eq(accounts.containerId, columns.containerId),
          columns.machineId === null
            ? isNull(accounts.machineId)
            : eq(accounts.machineId, columns.machineId),
          columns.partyId === null
            ? isNull(accounts.partyId)
            : eq(accounts.partyId, columns.partyId),
          columns.place === null ? isNull(accounts.place) : eq(accounts.place, columns.place),
        ),
      )
      .limit(1)
  const [found] = await find()
  if (found !== undefined) return found.id
  await lockBook(tx, siteId)
  await tx
    .insert(accounts)
    .values({
      id: context.newId(),
      organisationId: context.person.organisationId,
      siteId,
      ...columns,
    })
    .onConflictDoNothing()
  const [opened] = await find()
  if (opened === undefined) throw new Error('an account could not be opened')
  return opened.id
}
