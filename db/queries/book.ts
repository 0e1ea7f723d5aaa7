import { and, asc, eq, gt, inArray } from 'drizzle-orm'
import type { Transaction } from '../client'
import { accounts, balances, books, movements } from '../schema/book'
import { sites } from '../schema/sites'

export type MovementRow = typeof movements.$inferSelect

/** Locks a site's book until the end of the transaction and says where it stands; undefined where none is open. */
export async function lockBook(tx: Transaction, siteId: string) {
  const [head] = await tx
    .select({
      lastLineNo: books.lastLineNo,
      lastHash: books.lastHash,
      organisationId: books.organisationId,
      timeZone: sites.timeZone,
    })
    .from(books)
    .innerJoin(sites, eq(sites.id, books.siteId))
    .where(eq(books.siteId, siteId))
    .for('update', { of: books })
  return head
}

export async function insertMovements(tx: Transaction, rows: MovementRow[]): Promise<void> {
  await tx.insert(movements).values(rows)
}

/** Balances of accounts, all their streams. */
export async function listBalances(tx: Transaction, accountIds: readonly string[]) {
  if (accountIds.length === 0) return []
  return tx
    .select()
    .from(balances)
    .where(inArray(balances.accountId, [...accountIds]))
}

/** Lines that are neither reversals nor reversed: what a drain, pickup or transfer stands for now. */
export async function listStandingMovements(
  tx: Transaction,
  of: { drainId: string } | { pickupId: string },
): Promise<MovementRow[]> {
  const rows = await tx
    .select()
    .from(movements)
    .where(
      'drainId' in of ? eq(movements.drainId, of.drainId) : eq(movements.pickupId, of.pickupId),
    )
    .orderBy(asc(movements.lineNo))
  const reversed = new Set(rows.map(({ reverses }) => reverses))
  return rows.filter((row) => row.reverses === null && !reversed.has(row.id))
}

/** A site's lines after one, in order, at most `limit`. */
export async function listMovementsAfter(
  tx: Transaction,
  siteId: string,
  lineNo: number,
  limit: number,
) {
  return tx
    .select()
    .from(movements)
    .where(and(eq(movements.siteId, siteId), gt(movements.lineNo, lineNo)))
    .orderBy(asc(movements.lineNo))
    .limit(limit)
}

export type AccountPlace =
  | { kind: 'container'; containerId: string }
  | { kind: 'machine'; machineId: string }
  | { kind: 'hauler' | 'facility'; partyId: string }
  | { kind: 'adjustment' }
  | { kind: 'outside'; place: 'unlisted-machine' | 'floor' | 'opening' }

/** Accounts of a site at the given places that exist already. */
export async function listAccounts(tx: Transaction, siteId: string) {
  return tx.select().from(accounts).where(eq(accounts.siteId, siteId))
}
