import { and, eq, isNull, sql } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { listFillings } from '@/db/queries/containers'
import { accounts, balances, movements } from '@/db/schema/book'
import { containers, sites, streams } from '@/db/schema/sites'
import { localDay } from '@/shared/calendar'
import { add, multiply } from '@/shared/quantities/decimals'
import type { VolumeUnit } from '@/shared/quantities/units'
import type { RuleDefinition } from '@/shared/rules/definition'
import type { SiteFacts } from '@/shared/rules/evaluate-rule'

/**
 * What rules measure at a site now. Only what the rules at hand look at is read: days and months cost a query each.
 * @param wanted the rules that will be evaluated
 */
export async function gatherSiteFacts(
  tx: Transaction,
  siteId: string,
  now: Date,
  wanted: readonly RuleDefinition[],
): Promise<SiteFacts> {
  const rows = await tx
    .select({
      container: containers,
      stream: streams,
      timeZone: sites.timeZone,
      litres: sql<string>`coalesce(sum(${balances.litres}), 0)::text`,
      kilograms: sql<string>`coalesce(sum(${balances.kilograms}), 0)::text`,
      everHeld: sql<boolean>`count(${balances.accountId}) > 0`,
    })
    .from(containers)
    .innerJoin(sites, eq(sites.id, containers.siteId))
    .innerJoin(streams, eq(streams.id, containers.streamId))
    .leftJoin(accounts, eq(accounts.containerId, containers.id))
    .leftJoin(balances, eq(balances.accountId, accounts.id))
    .where(and(eq(containers.siteId, siteId), isNull(containers.retiredAt)))
    .groupBy(containers.id, streams.id, sites.timeZone)
    .orderBy(containers.code)
  const measures = new Set(wanted.map(({ measure }) => measure))
  const fillings = measures.has('days-since-first-fill')
    ? new Map(
        (
          await listFillings(
            tx,
            rows.map(({ container }) => container.id),
          )
        ).map((row) => [row.containerId, row]),
      )
    : new Map<string, { firstFilledOn: string | null }>()
  return {
    today: rows[0] === undefined ? '1970-01-01' : localDay(now, rows[0].timeZone),
    containers: rows.map(({ container, stream, litres, kilograms, everHeld }) => ({
      id: container.id,
      code: container.code,
      streamId: stream.id,
      ruleClasses: stream.ruleClasses,
      capacity: { value: container.capacityValue, unit: container.capacityUnit as VolumeUnit },
      litres,
      ...massOf(stream, litres, kilograms),
      firstFilledOn: fillings.get(container.id)?.firstFilledOn ?? null,
      everHeld,
      isVehicle: container.type === 'van',
    })),
    generated: measures.has('generated-mass-per-calendar-month')
      ? await listGenerated(tx, siteId, wanted)
      : [],
  }
}

/** Weighed kilograms of a solid; litres x density of a fluid; null where no density is on record. */
function massOf(
  stream: { kind: 'fluid' | 'solid'; density: string | null },
  litres: string,
  kilograms: string,
): { kilograms: string | null; densityUsed: string | null } {
  if (stream.kind === 'solid') return { kilograms, densityUsed: null }
  if (stream.density === null) return { kilograms: null, densityUsed: null }
  return {
    kilograms: add(kilograms, multiply(litres, stream.density)),
    densityUsed: stream.density,
  }
}

/**
 * Mass generated per month and stream: drains by their local day, whatever was corrected since; transfers and
 * shipments generate nothing. Only streams in classes that a monthly rule counts are summed.
 */
async function listGenerated(tx: Transaction, siteId: string, wanted: readonly RuleDefinition[]) {
  const monthly = wanted.filter(({ measure }) => measure === 'generated-mass-per-calendar-month')
  const all = await tx.select().from(streams)
  const counted = all.filter((stream) =>
    monthly.some(
      (rule) =>
        rule.streams.streamIds.includes(stream.id) ||
        rule.streams.classes.some((name) => stream.ruleClasses.includes(name)) ||
        (rule.streams.streamIds.length === 0 && rule.streams.classes.length === 0),
    ),
  )
  if (counted.length === 0) return []
  const sign = sql`case when ${movements.reverses} is null then 1 else -1 end`
  const rows = await tx
    .select({
      streamId: movements.streamId,
      month: sql<string>`to_char(${movements.occurredOn}, 'YYYY-MM')`,
      litres: sql<string>`sum(${sign} * ${movements.litres})::text`,
      kilograms: sql<string>`sum(${sign} * ${movements.kilograms})::text`,
    })
    .from(movements)
    .where(
      and(
        eq(movements.siteId, siteId),
        eq(movements.countsAs, 'drain'),
        sql`${movements.streamId} = any(${sql.param(`{${counted.map(({ id }) => id).join(',')}}`)}::uuid[])`,
      ),
    )
    .groupBy(movements.streamId, sql`to_char(${movements.occurredOn}, 'YYYY-MM')`)
  return rows.flatMap((row) => {
    const stream = counted.find(({ id }) => id === row.streamId)
    if (stream === undefined) return []
    return [
      {
        month: row.month,
        streamId: stream.id,
        streamName: stream.name,
        ruleClasses: stream.ruleClasses,
        ...massOf(stream, row.litres, row.kilograms),
      },
    ]
  })
}
