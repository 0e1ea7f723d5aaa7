import { and, asc, eq, inArray, isNull, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { accounts, balances, movements } from '../schema/book'
import { drains, marks } from '../schema/drains'
import { people } from '../schema/organisations'
import { pickupLines, pickups } from '../schema/pickups'
import { containers, holds, machines, parties, sites, streams } from '../schema/sites'
import { alias } from 'drizzle-orm/pg-core'
import { ofSites } from './sites'

const openStages = ['planned', 'ready', 'at-the-gate'] as const

/** Containers with their stream, site, open hold, contents and open marks, in one query. */
export async function listContainersWithContents(
  tx: Transaction,
  filter: {
    siteIds: readonly string[] | null
    ids?: readonly string[]
    code?: string
    streamId?: string | undefined
    isRetired?: boolean
  },
) {
  const contents = tx
    .select({
      containerId: accounts.containerId,
      litres: sql<string>`sum(${balances.litres})`.as('litres'),
      kilograms: sql<string>`sum(${balances.kilograms})`.as('kilograms'),
      pieces: sql<number>`sum(${balances.pieces})::int`.as('pieces'),
    })
    .from(accounts)
    .innerJoin(balances, eq(balances.accountId, accounts.id))
    .where(eq(accounts.kind, 'container'))
    .groupBy(accounts.containerId)
    .as('contents')
  return tx
    .select({
      container: containers,
      siteCode: sites.code,
      timeZone: sites.timeZone,
      stream: streams,
      hold: holds,
      heldByName: people.name,
      litres: sql<string>`coalesce(${contents.litres}, 0)::text`,
      kilograms: sql<string>`coalesce(${contents.kilograms}, 0)::text`,
      pieces: sql<number>`coalesce(${contents.pieces}, 0)::int`,
      openMarks: sql<number>`(select count(*)::int from ${marks}
        where ${marks.containerId} = ${containers.id} and ${marks.reviewedAt} is null)`,
    })
    .from(containers)
    .innerJoin(sites, eq(sites.id, containers.siteId))
    .innerJoin(streams, eq(streams.id, containers.streamId))
    .leftJoin(contents, eq(contents.containerId, containers.id))
    .leftJoin(holds, and(eq(holds.containerId, containers.id), isNull(holds.releasedAt)))
    .leftJoin(people, eq(people.id, holds.heldBy))
    .where(
      and(
        ofSites(containers.siteId, filter.siteIds),
        filter.ids === undefined ? undefined : inArray(containers.id, [...filter.ids]),
        filter.code === undefined ? undefined : eq(containers.code, filter.code),
        filter.streamId === undefined ? undefined : eq(containers.streamId, filter.streamId),
        filter.isRetired === undefined
          ? undefined
          : filter.isRetired
            ? sql`${containers.retiredAt} is not null`
            : isNull(containers.retiredAt),
      ),
    )
    .orderBy(asc(sites.code), asc(containers.code))
}

/**
 * First day something was poured in since each container last stood empty (or below), and whether an estimate came in
 * since. Lines that were corrected and their mirrors never happened: a struck drain filled nothing, a voided shipment
 * emptied nothing. A container that holds nothing now has no row.
 */
export async function listFillings(tx: Transaction, containerIds: readonly string[]) {
  if (containerIds.length === 0) return []
  const result = await tx.execute(sql`
    with own as (
      select a.id, a.container_id from ${accounts} a
      join ${balances} b on b.account_id = a.id
      where a.container_id = any(${sql.param(`{${containerIds.join(',')}}`)}::uuid[])
      group by a.id, a.container_id
      having sum(b.litres + b.kilograms + b.pieces) > 0
    ), sides as (
      select own.container_id, m.id, m.line_no, m.occurred_on, m.is_estimate, true as is_in,
        m.litres + m.kilograms + m.pieces as moved
      from own join ${movements} m on m.to_account_id = own.id where m.reverses is null
      union all
      select own.container_id, m.id, m.line_no, m.occurred_on, m.is_estimate, false,
        -(m.litres + m.kilograms + m.pieces)
      from own join ${movements} m on m.from_account_id = own.id where m.reverses is null
    ), moves as (
      select sides.*, sum(moved) over (partition by container_id order by line_no) as standing
      from sides
      where not exists (select 1 from ${movements} mirror where mirror.reverses = sides.id)
    ), emptied as (
      select container_id, max(line_no) filter (where standing <= 0) as line_no from moves group by container_id
    )
    select moves.container_id as "containerId",
      min(moves.occurred_on) filter (where is_in)::text as "firstFilledOn",
      bool_or(is_in and is_estimate) as "hasEstimates"
    from moves join emptied on emptied.container_id = moves.container_id
    where moves.line_no > coalesce(emptied.line_no, 0)
    group by moves.container_id`)
  return (
    result as unknown as {
      rows: { containerId: string; firstFilledOn: string | null; hasEstimates: boolean | null }[]
    }
  ).rows
}

/** Containers that stand on an open plan or manifest. */
export async function listOpenPickupsOfContainers(
  tx: Transaction,
  containerIds: readonly string[],
) {
  if (containerIds.length === 0) return []
  return tx
    .select({ containerId: pickupLines.containerId, id: pickups.id, number: pickups.number })
    .from(pickupLines)
    .innerJoin(pickups, eq(pickups.id, pickupLines.pickupId))
    .where(
      and(
        inArray(pickupLines.containerId, [...containerIds]),
        eq(pickupLines.removed, false),
        inArray(pickups.stage, [...openStages]),
      ),
    )
}

/** Newest lines of a container with what is on the other side and what stood in it after each. */
export async function listContainerLines(tx: Transaction, containerId: string, limit: number) {
  const other = alias(accounts, 'other')
  const otherContainer = alias(containers, 'other_container')
  const own = tx
    .select({ id: accounts.id })
    .from(accounts)
    .where(eq(accounts.containerId, containerId))
    .as('own')
  return tx
    .select({
      movement: movements,
      isIn: sql<boolean>`${movements.toAccountId} = ${own.id}`,
      isReversed: sql<boolean>`exists (select 1 from ${movements} mirror where mirror.reverses = ${movements.id})`,
      otherKind: other.kind,
      otherPlace: other.place,
      otherCode: sql<
        string | null
      >`coalesce(${otherContainer.code}, ${machines.code}, ${parties.name})`,
      streamName: streams.name,
      drainNumber: drains.number,
      pickupNumber: pickups.number,
      litresAfter: sql<string>`sum(case when ${movements.toAccountId} = ${own.id} then ${movements.litres}
        else -${movements.litres} end) over (order by ${movements.lineNo})`,
    })
    .from(own)
    .innerJoin(
      movements,
      sql`${movements.fromAccountId} = ${own.id} or ${movements.toAccountId} = ${own.id}`,
    )
    .innerJoin(
      other,
      sql`${other.id} = case when ${movements.toAccountId} = ${own.id} then ${movements.fromAccountId} else ${movements.toAccountId} end`,
    )
    .innerJoin(streams, eq(streams.id, movements.streamId))
    .leftJoin(otherContainer, eq(otherContainer.id, other.containerId))
    .leftJoin(machines, eq(machines.id, other.machineId))
    .leftJoin(parties, eq(parties.id, other.partyId))
    .leftJoin(drains, eq(drains.id, movements.drainId))
    .leftJoin(pickups, eq(pickups.id, movements.pickupId))
    .orderBy(sql`${movements.lineNo} desc`)
    .limit(limit)
}

/** Every hold of a container, newest first. */
export async function listHolds(tx: Transaction, containerId: string) {
  const releaser = alias(people, 'releaser')
  return tx
    .select({ hold: holds, heldByName: people.name, releasedByName: releaser.name })
    .from(holds)
    .innerJoin(people, eq(people.id, holds.heldBy))
    .leftJoin(releaser, eq(releaser.id, holds.releasedBy))
    .where(eq(holds.containerId, containerId))
    .orderBy(sql`${holds.heldAt} desc`)
}
