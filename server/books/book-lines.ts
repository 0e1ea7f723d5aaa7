import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import {
  listLinesOfFigure,
  listNamedMovements,
  sumOfFigure,
  type LineFilter,
  type NamedMovement,
} from '@/db/queries/totals'
import { streams } from '@/db/schema/sites'
import { eq } from 'drizzle-orm'
import { formatMonth } from '@/shared/calendar'
import type { bookLine, linesQuery, listBookLines } from '@/shared/contracts/books'
import { filterStreamCode } from '@/shared/default-streams'
import { normalise } from '@/shared/quantities/decimals'
import { isUnit } from '@/shared/quantities/units'
import type { ActContext } from '../act-context'
import { readCursor, writeCursor } from '../http/cursor'
import { getSite, sitesSeen } from '../sites-seen'

type Query = z.output<typeof linesQuery>

/** The lines one figure sums, oldest first; the sum is over all of them, whatever page is shown. */
export async function listBookLinesOf(
  tx: Transaction,
  context: ActContext,
  query: Query,
): Promise<z.input<typeof listBookLines.reply>> {
  if (query.siteId !== undefined) await getSite(tx, context, query.siteId)
  const { holderId, streamId } = groupOf(query)
  const cursor = readCursor(query.cursor)
  const filter: LineFilter = {
    by: query.by,
    siteIds: sitesSeen(context, query.siteId),
    streamId,
    holderId,
    // A figure of all fluids counts no filters.
    fluidsOnly: streamId === undefined,
    ...spanOf(query),
    side: query.side === 'opening' || query.side === 'closing' ? 'any' : query.side,
    after: cursor?.id,
    limit: query.limit + 1,
  }
  const found = await listLinesOfFigure(tx, filter)
  const shown = found.slice(0, query.limit)
  const total = await sumOfFigure(tx, filter)
  const names = new Map(
    (await listNamedMovements(tx, { ids: shown.map(({ movementId }) => movementId) })).map(
      (row) => [row.id, row],
    ),
  )
  const base = await baseOf(tx, streamId)
  const rows = shown.flatMap((line) => {
    const named = names.get(line.movementId)
    const counted = {
      litres: line.counted,
      kilograms: line.countedKilograms,
      pieces: String(line.countedPieces),
    }[base]
    return named === undefined ? [] : [presentLine(named, counted)]
  })
  const last = rows.at(-1)
  return {
    rows,
    next:
      found.length > query.limit && last !== undefined
        ? writeCursor({ at: last.occurredAt, id: last.movementId })
        : null,
    sum: normalise(
      { litres: total.litres, kilograms: total.kilograms, pieces: String(total.pieces) }[base],
    ),
    lineCount: total.lineCount,
    title: query.month === undefined ? String(query.year) : formatMonth(query.month),
  }
}

/** A group id is a stream, or a holder and a stream with a dot between. */
function groupOf(query: Query): { holderId: string | undefined; streamId: string | undefined } {
  if (query.groupId === undefined || query.groupId === 'all-fluids')
    return { holderId: undefined, streamId: query.streamId }
  const [holderId, streamId] = query.groupId.split('.')
  if (query.by === 'stream') return { holderId: undefined, streamId: holderId }
  return { holderId, streamId: streamId ?? query.streamId }
}

/** First day counted and first day not counted. */
function spanOf({ year, month, side }: Query): { from: string | undefined; until: string } {
  const afterMonth = (of: string) => {
    const [y = 0, m = 0] = of.split('-').map(Number)
    return m === 12 ? `${y + 1}-01-01` : `${y}-${String(m + 1).padStart(2, '0')}-01`
  }
  if (side === 'opening') return { from: undefined, until: `${month ?? `${year}-01`}-01` }
  const until = month === undefined ? `${year + 1}-01-01` : afterMonth(month)
  if (side === 'closing') return { from: undefined, until }
  return { from: `${month ?? `${year}-01`}-01`, until }
}

async function baseOf(
  tx: Transaction,
  streamId: string | undefined,
): Promise<'litres' | 'kilograms' | 'pieces'> {
  if (streamId === undefined) return 'litres'
  const [stream] = await tx.select().from(streams).where(eq(streams.id, streamId))
  if (stream === undefined || stream.kind === 'fluid') return 'litres'
  return stream.code === filterStreamCode ? 'pieces' : 'kilograms'
}

function presentLine(row: NamedMovement, counted: string): z.input<typeof bookLine> {
  return {
    movementId: row.id,
    siteId: row.siteId,
    siteCode: row.siteCode,
    lineNo: row.lineNo,
    occurredAt: row.occurredAt,
    occurredOn: row.occurredOn,
    recordedAt: row.recordedAt,
    recordedBy: row.recordedBy,
    reason: row.reason,
    countsAs: row.countsAs,
    isReversal: row.reversesLine !== null,
    isReversed: row.isReversed,
    stream: { id: row.streamId, name: row.streamName },
    from: row.from,
    to: row.to,
    litres: normalise(row.litres),
    kilograms: normalise(row.kilograms),
    pieces: row.pieces,
    counted: normalise(counted),
    entered: isUnit(row.enteredUnit) ? { value: row.enteredValue, unit: row.enteredUnit } : null,
    method: row.method,
    isEstimate: row.isEstimate,
    drain:
      row.drainId === null || row.drainNumber === null
        ? null
        : { id: row.drainId, number: row.drainNumber },
    pickup: row.pickupId === null ? null : { id: row.pickupId, number: row.pickupNumber },
    note: row.note,
  }
}
