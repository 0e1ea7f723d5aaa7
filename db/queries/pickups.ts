import { and, asc, desc, eq, gte, inArray, lt, ne, not, or, sql, type SQL } from 'drizzle-orm'
import { alias, type AnyPgColumn } from 'drizzle-orm/pg-core'
import type { PickupStage } from '@/shared/pickup-stages'
import type { Transaction } from '../client'
import { accounts, balances } from '../schema/book'
import { organisations, people } from '../schema/organisations'
import { documents, pickupLines, pickups, signatures } from '../schema/pickups'
import { containers, holds, parties, permits, sites, streams } from '../schema/sites'
import { audit } from '../schema/trail'
import { ofSites } from './sites'

export type PickupRecord = typeof pickups.$inferSelect
export type PickupLineRecord = typeof pickupLines.$inferSelect
export type PartyRecord = typeof parties.$inferSelect
export type PermitRecord = typeof permits.$inferSelect

/** A pickup with its site and names, by id or number. */
export async function findPickup(tx: Transaction, by: { id: string } | { number: string }) {
  const [found] = await pickupsWithNames(tx)
    .where('id' in by ? eq(pickups.id, by.id) : eq(pickups.number, by.number))
    .limit(1)
  return found
}

/** Pickups of sites, newest first; of one stage as it is shown at an instant. */
export async function listPickupRecords(
  tx: Transaction,
  filter: {
    siteIds: readonly string[] | null
    shown?: { stage: PickupStage; at: Date } | undefined
    before?: { at: Date; id: string } | undefined
    limit: number
  },
) {
  return pickupsWithNames(tx)
    .where(
      and(
        ofSites(pickups.siteId, filter.siteIds),
        filter.shown && isShownAs(filter.shown.stage, filter.shown.at),
        filter.before === undefined
          ? undefined
          : or(
              lt(pickups.createdAt, filter.before.at),
              and(eq(pickups.createdAt, filter.before.at), lt(pickups.id, filter.before.id)),
            ),
      ),
    )
    .orderBy(desc(pickups.createdAt), desc(pickups.id))
    .limit(filter.limit)
}

/** `shownStage` of shared/pickup-stages.ts as a condition: a site's own day decides whether a return is due. */
function isShownAs(stage: PickupStage, at: Date): SQL | undefined {
  if (stage !== 'signed-out' && stage !== 'return-due') return eq(pickups.stage, stage)
  const isDue = sql`(${pickups.receivedAt} is null and ${pickups.returnDueOn} is not null
    and ${pickups.returnDueOn} < (${at.toISOString()}::timestamptz at time zone ${sites.timeZone})::date)`
  return and(eq(pickups.stage, 'signed-out'), stage === 'return-due' ? isDue : not(isDue))
}

function pickupsWithNames(tx: Transaction) {
  const hauler = alias(parties, 'hauler')
  const facility = alias(parties, 'facility')
  const nameOf = (column: AnyPgColumn) =>
    sql<string | null>`(select ${people.name} from ${people} where ${people.id} = ${column})`
  return tx
    .select({
      pickup: pickups,
      site: sites,
      hauler,
      facility,
      createdByName: nameOf(pickups.createdBy),
      issuedByName: nameOf(pickups.issuedBy),
      receivedByName: nameOf(pickups.receivedBy),
      settledByName: nameOf(pickups.settledBy),
      voidedByName: nameOf(pickups.voidedBy),
    })
    .from(pickups)
    .innerJoin(sites, eq(sites.id, pickups.siteId))
    .leftJoin(hauler, eq(hauler.id, pickups.haulerId))
    .leftJoin(facility, eq(facility.id, pickups.facilityId))
    .$dynamic()
}

/** Lines of pickups with container, stream, its open hold and what the book holds in the container now. */
export async function listPickupLines(tx: Transaction, pickupIds: readonly string[]) {
  if (pickupIds.length === 0) return []
  return tx
    .select({
      line: pickupLines,
      container: containers,
      stream: streams,
      holdReason: sql<string | null>`(select ${holds.reason} from ${holds}
        where ${holds.containerId} = ${containers.id} and ${holds.releasedAt} is null limit 1)`,
      bookLitres: held(balances.litres),
      bookKilograms: held(balances.kilograms),
      bookPieces: sql<number>`coalesce((select sum(${balances.pieces}) from ${balances}
        join ${accounts} on ${accounts.id} = ${balances.accountId}
        where ${accounts.containerId} = ${containers.id} and ${balances.streamId} = ${pickupLines.streamId}), 0)::int`,
      elsewhere: sql<
        string | null
      >`(select coalesce(p2.number, to_char(p2.planned_on, 'YYYY-MM-DD')) from ${pickupLines} l2
        join ${pickups} p2 on p2.id = l2.pickup_id
        where l2.container_id = ${containers.id} and not l2.removed and l2.pickup_id <> ${pickupLines.pickupId}
          and p2.stage in ('ready', 'at-the-gate') limit 1)`,
    })
    .from(pickupLines)
    .innerJoin(containers, eq(containers.id, pickupLines.containerId))
    .innerJoin(streams, eq(streams.id, pickupLines.streamId))
    .where(and(inArray(pickupLines.pickupId, [...pickupIds]), eq(pickupLines.removed, false)))
    .orderBy(asc(pickupLines.pickupId), asc(pickupLines.position))
}

function held(column: typeof balances.litres | typeof balances.kilograms) {
  return sql<string>`coalesce((select sum(${column}) from ${balances}
    join ${accounts} on ${accounts.id} = ${balances.accountId}
    where ${accounts.containerId} = ${containers.id} and ${balances.streamId} = ${pickupLines.streamId}), 0)::text`
}

/** What the book holds in containers, in their own stream. */
export async function listContentsToShip(tx: Transaction, containerIds: readonly string[]) {
  return tx
    .select({
      container: containers,
      stream: streams,
      litres: sql<string>`coalesce(sum(${balances.litres}), 0)::text`,
      kilograms: sql<string>`coalesce(sum(${balances.kilograms}), 0)::text`,
      pieces: sql<number>`coalesce(sum(${balances.pieces}), 0)::int`,
    })
    .from(containers)
    .innerJoin(streams, eq(streams.id, containers.streamId))
    .leftJoin(accounts, eq(accounts.containerId, containers.id))
    .leftJoin(
      balances,
      and(eq(balances.accountId, accounts.id), eq(balances.streamId, containers.streamId)),
    )
    .where(inArray(containers.id, [...containerIds]))
    .groupBy(containers.id, streams.id)
}

export async function listSignatures(tx: Transaction, pickupId: string) {
  return tx
    .select()
    .from(signatures)
    .where(eq(signatures.pickupId, pickupId))
    .orderBy(asc(signatures.signedAt))
}

/** Documents without their bytes, newest first. */
export async function listDocuments(tx: Transaction, pickupId: string) {
  return tx
    .select({
      id: documents.id,
      kind: documents.kind,
      revision: documents.revision,
      sha256: documents.sha256,
      pages: documents.pages,
      byteCount: sql<number>`length(${documents.bytes})`,
      madeAt: documents.madeAt,
    })
    .from(documents)
    .where(eq(documents.pickupId, pickupId))
    .orderBy(desc(documents.revision))
}

export async function listPartyPermits(tx: Transaction, partyId: string): Promise<PermitRecord[]> {
  return tx
    .select()
    .from(permits)
    .where(and(eq(permits.partyId, partyId), sql`${permits.retiredAt} is null`))
    .orderBy(desc(permits.endsOn))
}

/** Haulers in use with a permit current on a day, except one. */
export async function listHaulersWithPermit(tx: Transaction, day: string, except: string) {
  return tx
    .selectDistinct({ id: parties.id, name: parties.name })
    .from(parties)
    .innerJoin(permits, eq(permits.partyId, parties.id))
    .where(
      and(
        eq(parties.kind, 'hauler'),
        ne(parties.id, except),
        sql`${parties.retiredAt} is null and ${permits.retiredAt} is null`,
        sql`${permits.startsOn} <= ${day} and ${permits.endsOn} >= ${day}`,
      ),
    )
    .orderBy(parties.name)
}

export async function listAuditOf(tx: Transaction, subjectId: string) {
  return tx
    .select({ entry: audit, by: people.name })
    .from(audit)
    .leftJoin(people, eq(people.id, audit.personId))
    .where(eq(audit.subjectId, subjectId))
    .orderBy(asc(audit.at), asc(audit.id))
}

export async function findOrganisation(tx: Transaction) {
  const [found] = await tx.select().from(organisations).limit(1)
  return found
}

/**
 * A document of any organisation by the hash of its bytes, the hash of its facts, or the first 16 characters of that
 * hash (the code printed on it): what a stranger with the paper asks.
 */
export async function findDocumentByHash(tx: Transaction, hash: string) {
  const [found] = await tx
    .select({
      document: {
        id: documents.id,
        kind: documents.kind,
        revision: documents.revision,
        madeAt: documents.madeAt,
      },
      pickup: pickups,
      timeZone: sites.timeZone,
      organisation: organisations.name,
      newest: sql<number>`(select max(d2.revision) from ${documents} d2 where d2.pickup_id = ${pickups.id})`,
    })
    .from(documents)
    .innerJoin(pickups, eq(pickups.id, documents.pickupId))
    .innerJoin(sites, eq(sites.id, pickups.siteId))
    .innerJoin(organisations, eq(organisations.id, documents.organisationId))
    .where(
      hash.length === 64
        ? or(eq(documents.sha256, hash), eq(documents.factsSha256, hash))
        : // A range, which the index answers in any collation; 'g' follows every hexadecimal digit.
          and(gte(documents.factsSha256, hash), lt(documents.factsSha256, `${hash}g`)),
    )
    .limit(1)
  return found
}
