import type { Transaction } from '@/db/client'
import { countDrains, sumByMonth, type Side, type TotalsRow } from '@/db/queries/totals'
import { streams } from '@/db/schema/sites'
import { monthsOf } from '@/shared/calendar'
import type { Figure, Totals, TotalsGroup, TotalsQuery } from '@/shared/contracts/books'
import { filterStreamCode } from '@/shared/default-streams'
import { convert } from '@/shared/quantities/convert'
import {
  add,
  compare,
  divide,
  isPositive,
  multiply,
  normalise,
  roundHalfEven,
  subtract,
  sum,
} from '@/shared/quantities/decimals'
import type { ActContext } from '../act-context'
import { getSite, sitesSeen } from '../sites-seen'

type Stream = Pick<typeof streams.$inferSelect, 'id' | 'name' | 'code' | 'kind' | 'density'>
type Unit = TotalsGroup['unit']

/**
 * A year by month. Every figure is summed exactly, then converted and rounded once; opening + in - out + adjusted =
 * closing holds to the last digit of the exact figures.
 * @throws Problem not-found for a site that may not be seen
 */
export async function readTotalsOf(
  tx: Transaction,
  context: ActContext,
  query: TotalsQuery,
): Promise<Totals> {
  const site = query.siteId === undefined ? undefined : await getSite(tx, context, query.siteId)
  const siteIds = sitesSeen(context, query.siteId)
  const filter = {
    by: query.by,
    siteIds,
    streamId: query.streamId,
    until: `${query.year + 1}-01-01`,
  }
  const rows = await sumByMonth(tx, filter, `${query.year}-01-01`)
  const all = await tx.select().from(streams)
  const groups = groupsOf(rows, all, query)
  const allFluids = allFluidsOf(groups, query)
  const counted = await countDrains(tx, siteIds, query.year)
  return {
    year: query.year,
    by: query.by,
    unit: query.unit,
    site: site === undefined ? null : { id: site.id, name: site.name },
    groups,
    allFluids,
    drainCounts: monthsOf(query.year).map((month) => {
      const found = counted.find((row) => row.month === month)
      return {
        month,
        count: found?.count ?? 0,
        filters: found?.filters ?? 0,
        absorbentKilograms: normalise(found?.absorbentKilograms ?? '0'),
      }
    }),
    roundingShows:
      groups.some(roundingShows) ||
      (allFluids !== null && (roundingShows(allFluids) || sumsMiss(groups, allFluids))),
    asOf: context.clock().toISOString(),
  }
}

/** One group for each holder and stream that has lines. */
function groupsOf(rows: TotalsRow[], all: Stream[], query: TotalsQuery): TotalsGroup[] {
  const keys = [...new Set(rows.map(({ holderId, streamId }) => `${holderId} ${streamId}`))]
  const groups = keys.flatMap((key) => {
    const own = rows.filter(({ holderId, streamId }) => `${holderId} ${streamId}` === key)
    const [first] = own
    const stream = all.find(({ id }) => id === first?.streamId)
    if (first === undefined || stream === undefined) return []
    const unit = unitOf(stream, query.unit)
    const show = shower(unit, stream)
    const value = (row: TotalsRow) =>
      unit === 'pieces' ? String(row.pieces) : stream.kind === 'fluid' ? row.litres : row.kilograms
    return [
      {
        id: query.by === 'stream' ? first.streamId : `${first.holderId}.${first.streamId}`,
        label: first.label,
        streamId: stream.id,
        streamName: stream.name,
        kind: stream.kind,
        unit,
        decimals: decimalsOf(unit, stream.kind),
        densityUsed:
          unit === 'kg' && stream.kind === 'fluid' && stream.density !== null
            ? normalise(stream.density)
            : null,
        ...yearOf(
          query.year,
          own.map((row) => ({
            month: row.month,
            side: row.side,
            value: value(row),
            lineCount: row.lineCount,
          })),
          show,
        ),
        estimatePercent: shareOfEstimates(own),
      },
    ]
  })
  const mineral = all.find(({ code }) => code === 'mineral')?.id
  return groups.sort((a, b) => inOrder(a, b, mineral))
}

/** Fluids first, grouped by stream the mineral one ahead; then by name. */
function inOrder(a: TotalsGroup, b: TotalsGroup, mineral: string | undefined): number {
  if (a.kind !== b.kind) return a.kind === 'fluid' ? -1 : 1
  if ((a.id === mineral) !== (b.id === mineral)) return a.id === mineral ? -1 : 1
  return a.label.localeCompare(b.label, 'en') || a.streamName.localeCompare(b.streamName, 'en')
}

type Cell = { month: string; side: Side; value: string; lineCount: number }

function yearOf(year: number, cells: readonly Cell[], show: (exact: string) => string | null) {
  const figureOf = (exact: string, lineCount: number): Figure => ({
    exact: normalise(exact),
    shown: show(exact),
    lineCount,
  })
  const pick = (month: string, side: Side) => {
    const own = cells.filter((cell) => cell.month === month && cell.side === side)
    return figureOf(
      sum(own.map(({ value }) => value)),
      own.reduce((total, { lineCount }) => total + lineCount, 0),
    )
  }
  const before = (['in', 'out', 'adjusted'] as const).map((side) => pick('before', side))
  const [beforeIn, beforeOut, beforeAdjusted] = before
  let standing = add(
    subtract(beforeIn?.exact ?? '0', beforeOut?.exact ?? '0'),
    beforeAdjusted?.exact ?? '0',
  )
  let lines = before.reduce((total, { lineCount }) => total + lineCount, 0)
  const opening = figureOf(standing, lines)
  const months = monthsOf(year).map((month) => {
    const moved = {
      in: pick(month, 'in'),
      out: pick(month, 'out'),
      adjusted: pick(month, 'adjusted'),
    }
    standing = add(subtract(add(standing, moved.in.exact), moved.out.exact), moved.adjusted.exact)
    lines += moved.in.lineCount + moved.out.lineCount + moved.adjusted.lineCount
    return { month, ...moved, closing: figureOf(standing, lines) }
  })
  const totalOf = (side: Side) =>
    figureOf(
      sum(months.map((month) => month[side].exact)),
      months.reduce((total, month) => total + month[side].lineCount, 0),
    )
  return {
    opening,
    months,
    total: { in: totalOf('in'), out: totalOf('out'), adjusted: totalOf('adjusted') },
    closing: figureOf(standing, lines),
  }
}

/** All fluid groups of the table added up, where there is more than one. */
function allFluidsOf(groups: readonly TotalsGroup[], query: TotalsQuery): Totals['allFluids'] {
  const fluids = groups.filter(({ kind }) => kind === 'fluid')
  if (fluids.length < 2) return null
  // Kilograms of different densities are added as kilograms, so each group is converted before the sum.
  const inKilograms = query.unit === 'kg'
  if (inKilograms && fluids.some(({ densityUsed }) => densityUsed === null)) return null
  const weigh = (group: TotalsGroup, exact: string) =>
    inKilograms ? multiply(exact, group.densityUsed ?? '0') : exact
  const cells = fluids.flatMap((group) => [
    {
      month: 'before',
      side: 'in' as const,
      value: weigh(group, group.opening.exact),
      lineCount: group.opening.lineCount,
    },
    ...group.months.flatMap((month) =>
      (['in', 'out', 'adjusted'] as const).map((side) => ({
        month: month.month,
        side,
        value: weigh(group, month[side].exact),
        lineCount: month[side].lineCount,
      })),
    ),
  ])
  const show = inKilograms ? (exact: string) => roundHalfEven(exact, 0) : shower(query.unit, null)
  const estimates = fluids.map((group) =>
    divide(multiply(group.total.in.exact, group.estimatePercent ?? '0'), '100', 18),
  )
  const everything = sum(fluids.map(({ total }) => total.in.exact))
  return {
    id: 'all-fluids',
    label: '',
    kind: 'fluid',
    unit: query.unit,
    decimals: decimalsOf(query.unit, 'fluid'),
    ...yearOf(query.year, cells, show),
    estimatePercent: isPositive(everything)
      ? roundHalfEven(divide(multiply(sum(estimates), '100'), everything, 6), 1)
      : null,
  }
}

function unitOf(stream: Stream, asked: TotalsQuery['unit']): Unit {
  if (stream.kind === 'fluid') return asked
  return stream.code === filterStreamCode ? 'pieces' : 'kg'
}

export function decimalsOf(unit: Unit, kind: 'fluid' | 'solid'): number {
  if (unit === 'pieces') return 0
  return unit === 'kg' && kind === 'fluid' ? 0 : 1
}

/** Shows an exact base figure in a unit: converted exactly, rounded once; null where no density is on record. */
function shower(
  unit: Unit,
  stream: Pick<Stream, 'kind' | 'density'> | null,
): (exact: string) => string | null {
  switch (unit) {
    case 'pieces':
      return (exact) => roundHalfEven(exact, 0)
    case 'L':
      return (exact) => roundHalfEven(exact, 1)
    case 'gal_us':
      return (exact) => roundHalfEven(convert(exact, 'L', 'gal_us'), 1)
    case 'kg': {
      if (stream?.kind === 'solid') return (exact) => roundHalfEven(exact, 1)
      const density = stream?.density ?? null
      return (exact) => (density === null ? null : roundHalfEven(multiply(exact, density), 0))
    }
  }
}

function shareOfEstimates(rows: readonly TotalsRow[]): string | null {
  const own = rows.filter(({ side, month }) => side === 'in' && month !== 'before')
  const all = sum(own.map(({ litres }) => litres))
  if (!isPositive(all)) return null
  const estimated = sum(own.map(({ estimatedLitres }) => estimatedLitres))
  return roundHalfEven(divide(multiply(estimated, '100'), all, 6), 1)
}

/** Do the shown months miss the shown total, because each figure is rounded once? */
function roundingShows(group: Pick<TotalsGroup, 'total' | 'months'>): boolean {
  return (['in', 'out', 'adjusted'] as const).some((side) => {
    const total = group.total[side].shown
    if (total === null) return false
    return compare(sum(group.months.map((month) => month[side].shown ?? '0')), total) !== 0
  })
}

/** Do the shown totals of the fluids miss the shown total of all of them? */
function sumsMiss(
  groups: readonly TotalsGroup[],
  allFluids: NonNullable<Totals['allFluids']>,
): boolean {
  const fluids = groups.filter(({ kind }) => kind === 'fluid')
  return (['in', 'out', 'adjusted'] as const).some((side) => {
    const total = allFluids.total[side].shown
    return (
      total !== null &&
      compare(sum(fluids.map((group) => group.total[side].shown ?? '0')), total) !== 0
    )
  })
}
