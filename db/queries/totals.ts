import { sql, type SQL } from 'drizzle-orm'
import type { Transaction } from '../client'

export type Grouping = 'stream' | 'container' | 'hauler' | 'facility'
export type Side = 'in' | 'out' | 'adjusted'

export type TotalsFilter = {
  by: Grouping
  siteIds: readonly string[] | null
  streamId?: string | undefined
  /** Leaves filters and other solids out. */
  fluidsOnly?: boolean
  /** First day not counted. */
  until: string
}

export type TotalsRow = {
  holderId: string
  label: string
  streamId: string
  /** `before` for everything earlier than the year. */
  month: string
  side: Side
  litres: string
  kilograms: string
  pieces: number
  lineCount: number
  estimatedLitres: string
}

/**
 * Every line as it touches the accounts of a grouping: which side it counts on, and what it adds to the balance
 * (`signed`). A reversal counts on the side of its target with the opposite sign, so corrected totals are right in
 * the month the fluid was drained. Lines between two accounts of the same group cancel: grouped by stream, transfers
 * between containers are left out.
 */
function classified(filter: TotalsFilter): SQL {
  const holders: Record<Grouping, SQL> = {
    stream: sql`a.kind = 'container' or (a.kind = 'outside' and a.place = 'floor')`,
    container: sql`a.kind = 'container' or (a.kind = 'outside' and a.place = 'floor')`,
    hauler: sql`a.kind = 'hauler'`,
    facility: sql`a.kind = 'facility'`,
  }
  const counted = filter.by === 'stream' ? sql`m.counts_as <> 'transfer'` : sql`true`
  const ofSite =
    filter.siteIds === null
      ? sql`true`
      : sql`a.site_id = any(${sql.param(`{${filter.siteIds.join(',')}}`)}::uuid[])`
  const ofStream = filter.streamId === undefined ? sql`true` : sql`m.stream_id = ${filter.streamId}`
  const ofKind = filter.fluidsOnly
    ? sql`m.stream_id in (select id from streams where kind = 'fluid')`
    : sql`true`
  const inward: SQL =
    filter.by === 'facility'
      ? sql`'receipt'`
      : filter.by === 'hauler'
        ? sql`'shipment'`
        : sql`'drain', 'opening'`
  return sql`
    select a.id as account_id, a.container_id, a.party_id, m.id as movement_id, m.stream_id, m.occurred_on, m.line_no,
      m.site_id, m.is_estimate, m.sign * m.litres as litres, m.sign * m.kilograms as kilograms, m.sign * m.pieces as pieces,
      case
        when m.counts_as in (${inward}) then 'in'
        when m.counts_as = 'adjustment' then 'adjusted'
        when m.counts_as = 'transfer' and (m.sign = 1) = (m.reverses is null) then 'in'
        else 'out'
      end as side
    from (
      select *, to_account_id as account_id, 1 as sign from movements
      union all
      select *, from_account_id as account_id, -1 as sign from movements
    ) m
    join accounts a on a.id = m.account_id and (${holders[filter.by]})
    where ${counted} and ${ofSite} and ${ofStream} and ${ofKind} and m.occurred_on < ${filter.until}`
}

/** Sums by holder, stream, month and side. For `stream` the holder is the stream itself. */
export async function sumByMonth(
  tx: Transaction,
  filter: TotalsFilter,
  yearStart: string,
): Promise<TotalsRow[]> {
  const holder = holderOf(filter.by)
  const month = sql`case when c.occurred_on < ${yearStart} then 'before' else to_char(c.occurred_on, 'YYYY-MM') end`
  const out = sql`case when c.side = 'out' then -1 else 1 end`
  const result = await tx.execute(sql`
    select ${holder.id} as "holderId", ${holder.label} as "label", c.stream_id as "streamId", ${month} as "month", c.side as "side",
      sum(${out} * c.litres)::text as "litres", sum(${out} * c.kilograms)::text as "kilograms",
      sum(${out} * c.pieces)::int as "pieces", count(*)::int as "lineCount",
      coalesce(sum(c.litres) filter (where c.is_estimate and c.side = 'in'), 0)::text as "estimatedLitres"
    from (${classified(filter)}) c ${holder.join}
    group by 1, 2, 3, 4, 5 order by 2, 3, 4`)
  return (result as unknown as { rows: TotalsRow[] }).rows
}

function holderOf(by: Grouping): { id: SQL; label: SQL; join: SQL } {
  switch (by) {
    case 'stream':
      return {
        id: sql`c.stream_id::text`,
        label: sql`s.name`,
        join: sql`join streams s on s.id = c.stream_id`,
      }
    case 'container':
      return {
        id: sql`coalesce(c.container_id, c.account_id)::text`,
        label: sql`coalesce(k.code, '')`,
        join: sql`left join containers k on k.id = c.container_id`,
      }
    case 'hauler':
    case 'facility':
      return {
        id: sql`c.party_id::text`,
        label: sql`p.name`,
        join: sql`join parties p on p.id = c.party_id`,
      }
  }
}

export type LineFilter = TotalsFilter & {
  /** First day counted, or none. */
  from: string | undefined
  side: Side | 'any'
  holderId: string | undefined
  /** Movement that the page before ended with. */
  after?: string | undefined
  limit: number
}

export type BookLineRow = {
  movementId: string
  counted: string
  countedKilograms: string
  countedPieces: number
}

const sideSign = sql`case when c.side = 'out' then -1 else 1 end`

function lineConditions(filter: LineFilter): SQL {
  const holder = holderOf(filter.by)
  return sql`from (${classified(filter)}) c ${holder.join}
    where ${filter.from === undefined ? sql`true` : sql`c.occurred_on >= ${filter.from}`}
      and ${filter.side === 'any' ? sql`true` : sql`c.side = ${filter.side}`}
      and ${filter.holderId === undefined ? sql`true` : sql`${holder.id} = ${filter.holderId}`}`
}

/** The lines behind a figure, oldest first, with what each adds to it. */
export async function listLinesOfFigure(
  tx: Transaction,
  filter: LineFilter,
): Promise<BookLineRow[]> {
  // An opening or closing figure is a balance: everything counts with its own sign.
  const sign = filter.side === 'any' ? sql`1` : sideSign
  const after =
    filter.after === undefined
      ? sql`true`
      : sql`(c.occurred_on, c.site_id, c.line_no) >
          (select last.occurred_on, last.site_id, last.line_no from movements last where last.id = ${filter.after})`
  const result = await tx.execute(sql`
    select c.movement_id as "movementId", sum(${sign} * c.litres)::text as "counted",
      sum(${sign} * c.kilograms)::text as "countedKilograms", sum(${sign} * c.pieces)::int as "countedPieces"
    ${lineConditions(filter)} and ${after}
    group by c.movement_id, c.occurred_on, c.site_id, c.line_no
    order by c.occurred_on, c.site_id, c.line_no limit ${filter.limit}`)
  return (result as unknown as { rows: BookLineRow[] }).rows
}

export async function sumOfFigure(tx: Transaction, filter: LineFilter) {
  const sign = filter.side === 'any' ? sql`1` : sideSign
  const result = await tx.execute(sql`
    select coalesce(sum(${sign} * c.litres), 0)::text as litres, coalesce(sum(${sign} * c.kilograms), 0)::text as kilograms,
      coalesce(sum(${sign} * c.pieces), 0)::int as pieces, count(distinct c.movement_id)::int as "lineCount"
    ${lineConditions(filter)}`)
  const [row] = (
    result as unknown as {
      rows: { litres: string; kilograms: string; pieces: number; lineCount: number }[]
    }
  ).rows
  return row ?? { litres: '0', kilograms: '0', pieces: 0, lineCount: 0 }
}

/** Standing drains per month, with the filters and absorbents that came with them. */
export async function countDrains(
  tx: Transaction,
  siteIds: readonly string[] | null,
  year: number,
) {
  const ofSite =
    siteIds === null
      ? sql`true`
      : sql`d.site_id = any(${sql.param(`{${siteIds.join(',')}}`)}::uuid[])`
  const result = await tx.execute(sql`
    select to_char(d.occurred_on, 'YYYY-MM') as month, count(*)::int as count,
      coalesce(sum(parts.pieces), 0)::int as filters, coalesce(sum(parts.kilograms), 0)::text as "absorbentKilograms"
    from drains d
    left join lateral (
      select sum(case when m.reverses is null then m.pieces else -m.pieces end) as pieces,
        sum(case when m.reverses is null then m.kilograms else -m.kilograms end) as kilograms
      from movements m where m.drain_id = d.id
    ) parts on true
    where d.state = 'standing' and ${ofSite}
      and d.occurred_on >= make_date(${year}, 1, 1) and d.occurred_on < make_date(${year + 1}, 1, 1)
    group by 1 order by 1`)
  return (
    result as unknown as {
      rows: { month: string; count: number; filters: number; absorbentKilograms: string }[]
    }
  ).rows
}

/** Movements with the names a reader needs, in the order of the ids given or of the book. */
export async function listNamedMovements(
  tx: Transaction,
  of:
    { ids: readonly string[] } | { siteIds: readonly string[] | null; from: string; until: string },
) {
  const which =
    'ids' in of
      ? sql`m.id = any(${sql.param(`{${of.ids.join(',')}}`)}::uuid[])`
      : sql`m.occurred_on >= ${of.from} and m.occurred_on < ${of.until} and ${
          of.siteIds === null
            ? sql`true`
            : sql`m.site_id = any(${sql.param(`{${of.siteIds.join(',')}}`)}::uuid[])`
        }`
  const name = (alias: SQL) => sql`(select coalesce(k.code, mc.code, p.name, acc.place, acc.kind)
    from accounts acc left join containers k on k.id = acc.container_id left join machines mc on mc.id = acc.machine_id
    left join parties p on p.id = acc.party_id where acc.id = ${alias})`
  const result = await tx.execute(sql`
    select m.id, m.site_id as "siteId", st.code as "siteCode", st.time_zone as "timeZone", m.line_no::int as "lineNo",
      to_char(m.occurred_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as "occurredAt",
      m.occurred_on::text as "occurredOn",
      to_char(m.recorded_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as "recordedAt",
      pe.name as "recordedBy", m.reason, m.counts_as as "countsAs", m.stream_id as "streamId", s.name as "streamName",
      ${name(sql`m.from_account_id`)} as "from", ${name(sql`m.to_account_id`)} as "to",
      m.litres::text, m.kilograms::text, m.pieces, m.entered_value as "enteredValue", m.entered_unit as "enteredUnit",
      m.method, m.spread_percent as "spreadPercent", m.is_estimate as "isEstimate", m.note,
      m.drain_id as "drainId", d.number as "drainNumber", m.pickup_id as "pickupId", pk.number as "pickupNumber",
      target.line_no::int as "reversesLine", exists (select 1 from movements x where x.reverses = m.id) as "isReversed",
      m.hash
    from movements m
    join sites st on st.id = m.site_id join streams s on s.id = m.stream_id join people pe on pe.id = m.recorded_by
    left join drains d on d.id = m.drain_id left join pickups pk on pk.id = m.pickup_id
    left join movements target on target.id = m.reverses
    where ${which} order by m.occurred_on, m.site_id, m.line_no`)
  return (result as unknown as { rows: NamedMovement[] }).rows
}

export type NamedMovement = {
  id: string
  siteId: string
  siteCode: string
  timeZone: string
  lineNo: number
  occurredAt: string
  occurredOn: string
  recordedAt: string
  recordedBy: string
  reason: string
  countsAs: string
  streamId: string
  streamName: string
  from: string
  to: string
  litres: string
  kilograms: string
  pieces: number
  enteredValue: string
  enteredUnit: string
  method: string
  spreadPercent: string | null
  isEstimate: boolean
  note: string
  drainId: string | null
  drainNumber: string | null
  pickupId: string | null
  pickupNumber: string | null
  reversesLine: number | null
  isReversed: boolean
  hash: string
}

/** Years in which something happened at the sites, newest first. */
export async function listYearsWithLines(
  tx: Transaction,
  siteIds: readonly string[] | null,
): Promise<number[]> {
  const ofSite =
    siteIds === null
      ? sql`true`
      : sql`site_id = any(${sql.param(`{${siteIds.join(',')}}`)}::uuid[])`
  const result = await tx.execute(sql`
    select distinct extract(year from occurred_on)::int as year from movements where ${ofSite} order by 1 desc`)
  return (result as unknown as { rows: { year: number }[] }).rows.map(({ year }) => year)
}
