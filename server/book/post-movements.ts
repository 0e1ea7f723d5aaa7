import type { Transaction } from '@/db/client'
import { insertMovements, listBalances, lockBook, type MovementRow } from '@/db/queries/book'
import { localDay } from '@/shared/calendar'
import { add, compare, negate, subtract } from '@/shared/quantities/decimals'
import type { ActContext } from '../act-context'
import { hashOfMovement } from './canonical-movement'

/** A line to be: where from, where to, how much. Litres and kilograms are exact decimal strings. */
export type MovementDraft = Pick<
  MovementRow,
  | 'streamId'
  | 'fromAccountId'
  | 'toAccountId'
  | 'litres'
  | 'kilograms'
  | 'pieces'
  | 'enteredValue'
  | 'enteredUnit'
  | 'method'
  | 'spreadPercent'
  | 'isEstimate'
  | 'reason'
  | 'occurredAt'
> &
  Partial<
    Pick<
      MovementRow,
      | 'countsAs'
      | 'reverses'
      | 'drainId'
      | 'drainRevision'
      | 'pickupId'
      | 'pickupLineId'
      | 'transferId'
      | 'note'
      | 'occurredOn'
    >
  >

type Moved = { litres: string; kilograms: string; pieces: number }

/**
 * The only writer of the book. Locks the site's book (so its writers take turns, whatever they touch), numbers and
 * hashes the lines, inserts them, and sees that the balances moved by exactly what was posted.
 */
export async function postMovements(
  tx: Transaction,
  context: ActContext,
  siteId: string,
  drafts: readonly MovementDraft[],
): Promise<MovementRow[]> {
  if (drafts.length === 0) return []
  const head = await lockBook(tx, siteId)
  if (head === undefined) throw new Error(`no book is open for site ${siteId}`)
  const recordedAt = context.clock()
  let previousHash = head.lastHash
  const rows = drafts.map((draft, index) => {
    const unhashed = {
      countsAs: draft.reason,
      reverses: null,
      drainId: null,
      drainRevision: null,
      pickupId: null,
      pickupLineId: null,
      transferId: null,
      note: '',
      occurredOn: localDay(draft.occurredAt, head.timeZone),
      ...draft,
      id: context.newId(),
      organisationId: head.organisationId,
      siteId,
      lineNo: head.lastLineNo + index + 1,
      recordedAt,
      recordedBy: context.person.id,
      previousHash,
    }
    const row = { ...unhashed, hash: hashOfMovement(unhashed) }
    previousHash = row.hash
    return row
  })
  const touched = [...new Set(rows.flatMap((row) => [row.fromAccountId, row.toAccountId]))]
  const before = keyed(await listBalances(tx, touched))
  await insertMovements(tx, rows)
  demandMoved(before, keyed(await listBalances(tx, touched)), rows)
  return rows
}

function keyed(found: (Moved & { accountId: string; streamId: string })[]): Map<string, Moved> {
  return new Map(found.map((row) => [`${row.accountId} ${row.streamId}`, row]))
}

/** Post-condition: each balance is what it was plus what came in minus what went out, to the last digit. */
function demandMoved(
  before: Map<string, Moved>,
  after: Map<string, Moved>,
  rows: MovementRow[],
): void {
  const nothing: Moved = { litres: '0', kilograms: '0', pieces: 0 }
  const expected = new Map(before)
  for (const row of rows) {
    for (const [accountId, sign] of [
      [row.fromAccountId, -1],
      [row.toAccountId, 1],
    ] as const) {
      const key = `${accountId} ${row.streamId}`
      const held = expected.get(key) ?? nothing
      expected.set(key, {
        litres: add(held.litres, sign === 1 ? row.litres : negate(row.litres)),
        kilograms: add(held.kilograms, sign === 1 ? row.kilograms : negate(row.kilograms)),
        pieces: held.pieces + sign * row.pieces,
      })
    }
  }
  for (const [key, wanted] of expected) {
    const found = after.get(key) ?? nothing
    const isRight =
      compare(found.litres, wanted.litres) === 0 &&
      compare(found.kilograms, wanted.kilograms) === 0 &&
      found.pieces === wanted.pieces
    if (!isRight) {
      throw new Error(
        `balance ${key} is off by ${subtract(found.litres, wanted.litres)} L after posting`,
      )
    }
  }
}
