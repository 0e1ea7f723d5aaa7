import {
  and,
  asc,
  desc,
  eq,
  gt,
  gte,
  inArray,
  isNull,
  lt,
  lte,
  ne,
  or,
  sql,
  type SQL,
} from 'drizzle-orm'
import type { Transaction } from '../client'
import { accounts, balances, movements, numberSeries } from '../schema/book'
import { drainRevisions, drains, marks } from '../schema/drains'
import { people } from '../schema/organisations'
import { containers, fluids, holds, machines, sites, streams } from '../schema/sites'
import { ofSites } from './sites'

export type DrainRecord = typeof drains.$inferSelect
export type MarkRecord = typeof marks.$inferSelect

/** The next number of a series: the row lock makes it gapless, because a refused act gives its number back. */
export async function takeNumber(
  tx: Transaction,
  series: { organisationId: string; scopeId: string; kind: 'drain' | 'pickup'; year: number },
): Promise<number> {
  const [taken] = await tx
    .insert(numberSeries)
    .values({ ...series, last: 1 })
    .onConflictDoUpdate({
      target: [numberSeries.scopeId, numberSeries.kind, numberSeries.year],
      set: { last: sql`${numberSeries.last} + 1` },
    })
    .returning({ last: numberSeries.last })
  return taken?.last ?? 1
}

/** Containers with what stands in them and their open hold, for a drain or transfer. */
export async function listContainersOfLegs(tx: Transaction, ids: readonly string[]) {
  if (ids.length === 0) return []
  return tx
    .select({
      container: containers,
      streamName: streams.name,
      hold: { id: holds.id, reason: holds.reason },
      /** All streams together: what is physically in it. */
      litres: sql<string>`coalesce((
        select sum(${balances.litres}) from ${balances}
        join ${accounts} on ${accounts.id} = ${balances.accountId}
        where ${accounts.containerId} = ${containers.id}), 0)::text`,
    })
    .from(containers)
    .innerJoin(streams, eq(streams.id, containers.streamId))
    .leftJoin(holds, and(eq(holds.containerId, containers.id), isNull(holds.releasedAt)))
    .where(inArray(containers.id, [...ids]))
}

export async function findMachine(tx: Transaction, id: string) {
  const [found] = await tx
    .select({ machine: machines, fluid: fluids })
    .from(machines)
    .innerJoin(fluids, eq(fluids.id, machines.fluidId))
    .where(eq(machines.id, id))
    .limit(1)
  return found
}

export async function listStreams(tx: Transaction) {
  return tx.select().from(streams)
}

export async function findFluid(tx: Transaction, id: string) {
  const [found] = await tx.select().from(fluids).where(eq(fluids.id, id)).limit(1)
  return found
}

/** The site's open bin of each stream: where spent parts go when no container is named. */
export async function listBins(tx: Transaction, siteId: string) {
  return tx
    .select({ id: containers.id, code: containers.code, streamId: containers.streamId })
    .from(containers)
    .where(
      and(eq(containers.siteId, siteId), eq(containers.type, 'bin'), isNull(containers.retiredAt)),
    )
    .orderBy(asc(containers.code))
}

export async function findDrain(tx: Transaction, by: { id: string } | { number: string }) {
  const [found] = await tx
    .select()
    .from(drains)
    .where('id' in by ? eq(drains.id, by.id) : eq(drains.number, by.number))
    .limit(1)
  return found
}

export async function listRevisions(tx: Transaction, drainIds: readonly string[]) {
  if (drainIds.length === 0) return []
  return tx
    .select({ revision: drainRevisions, by: people.name })
    .from(drainRevisions)
    .innerJoin(people, eq(people.id, drainRevisions.madeBy))
    .where(inArray(drainRevisions.drainId, [...drainIds]))
    .orderBy(asc(drainRevisions.drainId), asc(drainRevisions.revision))
}

/** Standing drains of a machine around an instant, with the containers they were poured into. */
export async function listDrainsAround(
  tx: Transaction,
  machineId: string,
  from: Date,
  to: Date,
  except: string,
) {
  return tx
    .select({
      id: drains.id,
      number: drains.number,
      machineId: drains.machineId,
      litres: drains.litres,
      occurredAt: drains.occurredAt,
      by: people.name,
      containerIds: sql<string[]>`array(
        select distinct ${accounts.containerId}::text from ${movements}
        join ${accounts} on ${accounts.id} = ${movements.toAccountId}
        where ${movements.drainId} = ${drains.id} and ${movements.litres} > 0
          and ${accounts.containerId} is not null)`,
    })
    .from(drains)
    .innerJoin(people, eq(people.id, drains.recordedBy))
    .where(
      and(
        eq(drains.machineId, machineId),
        eq(drains.state, 'standing'),
        ne(drains.id, except),
        gte(drains.occurredAt, from),
        lte(drains.occurredAt, to),
      ),
    )
}

/** Drains in the order of their ids, after one, each with its newest revision (null where it has none). */
export async function listDrainsWithNewestFacts(
  tx: Transaction,
  after: string | undefined,
  limit: number,
) {
  const newest = tx
    .selectDistinctOn([drainRevisions.drainId], {
      drainId: drainRevisions.drainId,
      revision: drainRevisions.revision,
      facts: drainRevisions.facts,
    })
    .from(drainRevisions)
    .orderBy(drainRevisions.drainId, desc(drainRevisions.revision))
    .as('newest')
  return tx
    .select({ drain: drains, revision: newest.revision, facts: newest.facts })
    .from(drains)
    .leftJoin(newest, eq(newest.drainId, drains.id))
    .where(after === undefined ? undefined : gt(drains.id, after))
    .orderBy(asc(drains.id))
    .limit(limit)
}

/** Litres that stand for a drain in each container it was poured into, by container; empty for a drain not saved. */
export async function listPouredByDrain(tx: Transaction, drainId: string) {
  const rows = await tx
    .select({
      containerId: accounts.containerId,
      litres: sql<string>`sum(case when ${movements.toAccountId} = ${accounts.id} then ${movements.litres}
        else -${movements.litres} end)::text`,
    })
    .from(movements)
    .innerJoin(
      accounts,
      sql`${accounts.id} in (${movements.fromAccountId}, ${movements.toAccountId})`,
    )
    .where(and(eq(movements.drainId, drainId), eq(accounts.kind, 'container')))
    .groupBy(accounts.containerId)
  return new Map(
    rows.flatMap(({ containerId, litres }) =>
      containerId === null ? [] : [[containerId, litres] as const],
    ),
  )
}

export type DrainFilter = {
  siteIds: readonly string[] | null
  machineId?: string | undefined
  containerId?: string | undefined
  from?: string | undefined
  to?: string | undefined
  state?: 'standing' | 'struck' | 'needs-a-look' | undefined
  search?: string | undefined
  before?: { at: Date; id: string } | undefined
  limit: number
}

/** Drains with what a row shows, newest first. */
export async function listDrainRecords(tx: Transaction, filter: DrainFilter) {
  return drainsWithNames(tx)
    .where(and(...conditions(filter)))
    .orderBy(desc(drains.occurredAt), desc(drains.id))
    .limit(filter.limit)
}

export async function findDrainWithNames(tx: Transaction, id: string) {
  const [found] = await drainsWithNames(tx).where(eq(drains.id, id)).limit(1)
  return found
}

function drainsWithNames(tx: Transaction) {
  return tx
    .select({
      drain: drains,
      machineCode: machines.code,
      machineName: sql<
        string | null
      >`nullif(trim(${machines.make} || ' ' || ${machines.model}), '')`,
      machineKind: machines.kind,
      stream: { id: streams.id, code: streams.code, name: streams.name },
      timeZone: sites.timeZone,
      recordedByName: people.name,
      needsLook: sql<boolean>`exists (select 1 from ${marks}
        where ${marks.drainId} = ${drains.id} and ${marks.reviewedAt} is null)`,
    })
    .from(drains)
    .innerJoin(streams, eq(streams.id, drains.streamId))
    .innerJoin(sites, eq(sites.id, drains.siteId))
    .innerJoin(people, eq(people.id, drains.recordedBy))
    .leftJoin(machines, eq(machines.id, drains.machineId))
    .$dynamic()
}

function conditions(filter: DrainFilter): (SQL | undefined)[] {
  const { before, state, search } = filter
  const word =
    search === undefined || search === '' ? undefined : `%${search.replace(/[\\%_]/g, '\\$&')}%`
  return [
    ofSites(drains.siteId, filter.siteIds),
    filter.machineId === undefined ? undefined : eq(drains.machineId, filter.machineId),
    filter.from === undefined ? undefined : gte(drains.occurredOn, filter.from),
    filter.to === undefined ? undefined : lte(drains.occurredOn, filter.to),
    state === 'standing' || state === 'struck' ? eq(drains.state, state) : undefined,
    state === 'needs-a-look'
      ? sql`exists (select 1 from ${marks} where ${marks.drainId} = ${drains.id} and ${marks.reviewedAt} is null)`
      : undefined,
    filter.containerId === undefined
      ? undefined
      : sql`exists (select 1 from ${movements} join ${accounts} on ${accounts.id} = ${movements.toAccountId}
          where ${movements.drainId} = ${drains.id} and ${accounts.containerId} = ${filter.containerId})`,
    word === undefined
      ? undefined
      : sql`(${drains.number} ilike ${word} or ${machines.code} ilike ${word} or ${drains.machineText} ilike ${word}
          or ${people.name} ilike ${word})`,
    before === undefined
      ? undefined
      : or(
          lt(drains.occurredAt, before.at),
          and(eq(drains.occurredAt, before.at), lt(drains.id, before.id)),
        ),
  ]
}

/** Open and closed marks, of drains or containers or a whole list of sites. */
export async function listMarkRecords(
  tx: Transaction,
  of: {
    drainId?: string
    containerId?: string
    siteIds?: readonly string[] | null
    id?: string
    isOpen?: boolean
    before?: { at: Date; id: string } | undefined
    limit?: number
  },
) {
  const reviewer = sql<
    string | null
  >`(select ${people.name} from ${people} where ${people.id} = ${marks.reviewedBy})`
  return tx
    .select({ mark: marks, drainNumber: drains.number, containerCode: containers.code, reviewer })
    .from(marks)
    .leftJoin(drains, eq(drains.id, marks.drainId))
    .leftJoin(containers, eq(containers.id, marks.containerId))
    .where(
      and(
        of.id === undefined ? undefined : eq(marks.id, of.id),
        of.drainId === undefined ? undefined : eq(marks.drainId, of.drainId),
        of.containerId === undefined ? undefined : eq(marks.containerId, of.containerId),
        of.siteIds === undefined ? undefined : ofSites(marks.siteId, of.siteIds),
        of.isOpen === undefined
          ? undefined
          : of.isOpen
            ? isNull(marks.reviewedAt)
            : sql`${marks.reviewedAt} is not null`,
        of.before === undefined
          ? undefined
          : or(
              lt(marks.raisedAt, of.before.at),
              and(eq(marks.raisedAt, of.before.at), lt(marks.id, of.before.id)),
            ),
      ),
    )
    .orderBy(desc(marks.raisedAt), desc(marks.id))
    .limit(of.limit ?? 200)
}
