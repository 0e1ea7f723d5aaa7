import { stringify } from 'csv-stringify/sync'
import type { Transaction } from '@/db/client'
import { listNamedMovements } from '@/db/queries/totals'
import { withOffset } from '@/shared/calendar'
import type { Totals, TotalsQuery } from '@/shared/contracts/books'
import { isDecimal, multiply, normalise } from '@/shared/quantities/decimals'
import type { ActContext } from '../act-context'
import { getSite, sitesSeen } from '../sites-seen'
import { readTotalsOf } from './totals'

/** UTF-8 with its mark, one header row, and no cell that a spreadsheet would take for a formula. */
function csvOf(header: string[], rows: (string | number)[][]): string {
  return stringify([header, ...rows.map((row) => row.map(guarded))], { bom: true })
}

/** What a spreadsheet takes for the start of a formula, in both widths, and what it skips before one. */
const formulaStart = /^[=+\-@\t\r\n\uff1d\uff0b\uff0d\uff20]/

/** A figure below zero starts with a minus as well, and stays a figure. */
function guarded(cell: string | number): string | number {
  return typeof cell === 'string' && formulaStart.test(cell) && !isDecimal(cell) ? `'${cell}` : cell
}

/** The table on screen, group after group, month by month: shown figures first, exact ones behind. */
export async function totalsCsv(
  tx: Transaction,
  context: ActContext,
  query: TotalsQuery,
): Promise<string> {
  const totals = await readTotalsOf(tx, context, query)
  const header = [
    'year',
    'site',
    'grouped_by',
    'group',
    'stream',
    'row',
    'unit',
    'in',
    'out',
    'adjusted',
    'closing',
    'density_kg_per_l',
    'exact_unit',
    'in_exact',
    'out_exact',
    'adjusted_exact',
    'closing_exact',
  ]
  const rows = totals.groups.flatMap((group) => rowsOf(totals, group))
  return csvOf(
    header,
    totals.allFluids === null
      ? rows
      : [
          ...rows,
          ...rowsOf(totals, {
            ...totals.allFluids,
            label: 'All fluids',
            streamName: '',
            densityUsed: null,
          }),
        ],
  )
}

type AnyGroup = Pick<
  Totals['groups'][number],
  | 'label'
  | 'streamName'
  | 'kind'
  | 'unit'
  | 'opening'
  | 'months'
  | 'total'
  | 'closing'
  | 'densityUsed'
>

function rowsOf(totals: Totals, group: AnyGroup): string[][] {
  const exactUnit = group.kind === 'fluid' ? 'L' : group.unit
  const start = [
    String(totals.year),
    totals.site?.name ?? 'all',
    totals.by,
    group.label,
    group.streamName,
  ]
  const shown = (figure: { shown: string | null }) => figure.shown ?? ''
  const row = (
    name: string,
    figures: Record<'in' | 'out' | 'adjusted', { shown: string | null; exact: string }> | null,
    closing: { shown: string | null; exact: string },
  ) => [
    ...start,
    name,
    group.unit,
    figures === null ? '' : shown(figures.in),
    figures === null ? '' : shown(figures.out),
    figures === null ? '' : shown(figures.adjusted),
    shown(closing),
    group.densityUsed ?? '',
    exactUnit,
    figures?.in.exact ?? '',
    figures?.out.exact ?? '',
    figures?.adjusted.exact ?? '',
    closing.exact,
  ]
  return [
    row('opening', null, group.opening),
    ...group.months.map((month) => row(month.month, month, month.closing)),
    row('year', group.total, group.closing),
  ]
}

/** Every line of a year: what a stranger needs to add the totals up again. */
export async function linesCsv(
  tx: Transaction,
  context: ActContext,
  query: { year: number; siteId?: string | undefined },
): Promise<string> {
  if (query.siteId !== undefined) await getSite(tx, context, query.siteId)
  const rows = await listNamedMovements(tx, {
    siteIds: sitesSeen(context, query.siteId),
    from: `${query.year}-01-01`,
    until: `${query.year + 1}-01-01`,
  })
  const header = [
    'site',
    'line_no',
    'occurred_on',
    'occurred_at',
    'recorded_at',
    'recorded_by',
    'reason',
    'counts_as',
    'reverses_line',
    'stream',
    'from',
    'to',
    'volume_ml',
    'mass_kg',
    'pieces',
    'entered',
    'entered_unit',
    'method',
    'spread_percent',
    'estimate',
    'drain',
    'pickup',
    'note',
    'sha256',
  ]
  return csvOf(
    header,
    rows.map((row) => [
      row.siteCode,
      row.lineNo,
      row.occurredOn,
      withOffset(row.occurredAt, row.timeZone),
      withOffset(row.recordedAt, row.timeZone),
      row.recordedBy,
      row.reason,
      row.countsAs,
      row.reversesLine ?? '',
      row.streamName,
      row.from,
      row.to,
      multiply(row.litres, '1000'),
      normalise(row.kilograms),
      row.pieces,
      row.enteredValue,
      row.enteredUnit,
      row.method,
      row.spreadPercent ?? '',
      row.isEstimate ? 'yes' : 'no',
      row.drainNumber ?? '',
      row.pickupNumber ?? '',
      row.note,
      row.hash,
    ]),
  )
}
