import { inArray } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import type { MovementRow } from '@/db/queries/book'
import { accounts } from '@/db/schema/book'

/** Ids of the containers that lines touch, on either side. */
export async function containersOfMovements(
  tx: Transaction,
  rows: readonly MovementRow[],
): Promise<string[]> {
  const ids = [...new Set(rows.flatMap((row) => [row.fromAccountId, row.toAccountId]))]
  if (ids.length === 0) return []
  const found = await tx
    .select({ containerId: accounts.containerId })
    .from(accounts)
    .where(inArray(accounts.id, ids))
  return found.flatMap(({ containerId }) => containerId ?? [])
}
