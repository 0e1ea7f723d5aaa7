import { Router } from 'express'
import { and, asc, desc, eq, inArray, isNull, lt, or, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { endSessions, listPeople } from '@/db/queries/people'
import { ofSites } from '@/db/queries/sites'
import { organisations, people } from '@/db/schema/organisations'
import { containers, fluids, machines, parties, permits, sites, streams } from '@/db/schema/sites'
import { audit } from '@/db/schema/trail'
import type { Contract } from '@/shared/contracts/contract'
import * as contracts from '@/shared/contracts/set-up'
import type { ActContext } from '../act-context'
import type { AppServices } from '../app-services'
import { writeAudit } from '../audit/write-audit'
import { readCursor, writeCursor } from '../http/cursor'
import { serve } from '../http/route'
import { hashPassword } from '../people/passwords'
import { problem } from '../problem'
import { sitesSeen } from '../sites-seen'
import { addPermit } from './add-permit'
import * as kinds from './set-up-kinds'
import {
  changeRecord,
  createRecord,
  setRetired,
  type SetUpKind,
  type SetUpTable,
} from './set-up-act'
import * as present from './present-set-up'

type AnyContractSet = {
  list: Contract
  read: Contract
  create: Contract
  change: Contract
  retire: Contract
  restore: Contract
}

/** Sites, streams, fluids, machines, containers, haulers, facilities and people: one way for all kinds. */
export function setUpRoutes(services: AppServices): Router {
  const router = Router()
  const six = serveSix(router, services)

  six(contracts.siteContracts, kinds.siteKind, listSites)
  six(contracts.streamContracts, kinds.streamKind, listStreams)
  six(contracts.fluidContracts, kinds.fluidKind, async (tx) =>
    (await tx.select().from(fluids).orderBy(asc(fluids.name))).map(present.presentFluid),
  )
  six(contracts.machineContracts, kinds.machineKind, listMachines)
  six(contracts.containerSetUpContracts, kinds.containerKind, listContainerRecords)
  six(contracts.haulerContracts, kinds.partyKind('hauler'), (tx) => listParties(tx, 'hauler'))
  six(contracts.facilityContracts, kinds.partyKind('facility'), (tx) => listParties(tx, 'facility'))
  six(contracts.personContracts, kinds.personKind, async (tx) =>
    (await listPeople(tx)).map((row) => ({
      ...row,
      retiredAt: row.retiredAt?.toISOString() ?? null,
    })),
  )

  serve(router, services, contracts.setPassword, async (tx, context, { params, body }) => {
    const changed = await tx
      .update(people)
      .set({ passwordHash: await hashPassword(body.password) })
      .where(eq(people.id, params.id))
      .returning({ id: people.id })
    if (changed.length === 0) throw problem('not-found')
    await endSessions(tx, params.id, context.clock())
    await writeAudit(tx, context, {
      act: 'change-people',
      subjectKind: 'person',
      subjectId: params.id,
      details: { what: 'password' },
    })
    return undefined
  })

  serve(router, services, contracts.addPermit, async (tx, context, { params, body }) => {
    const party = await presentedParty(tx, params.id)
    await addPermit(tx, context, party.id, body)
    return presentedParty(tx, party.id)
  })
  serve(router, services, contracts.retirePermit, async (tx, context, { params }) => {
    const [permit] = await tx
      .update(permits)
      .set({ retiredAt: context.clock() })
      .where(and(eq(permits.id, params.id), isNull(permits.retiredAt)))
      .returning()
    const [found] = permit
      ? [permit]
      : await tx.select().from(permits).where(eq(permits.id, params.id))
    if (found === undefined) throw problem('not-found')
    await writeAudit(tx, context, {
      act: 'change-set-up',
      subjectKind: 'party',
      subjectId: found.partyId,
      details: { what: 'retire-permit', number: found.number },
    })
    return presentedParty(tx, found.partyId)
  })

  serve(router, services, contracts.readCatalogue, async (tx, context) => {
    const [organisation] = await tx
      .select({ id: organisations.id, name: organisations.name })
      .from(organisations)
    if (organisation === undefined) throw problem('not-found')
    const inUse = <T extends { retiredAt?: string | null }>(rows: T[]) =>
      rows.filter((row) => row.retiredAt == null)
    return {
      organisation,
      sites: await listSites(tx, context),
      streams: inUse(await listStreams(tx)),
      fluids: inUse(
        (await tx.select().from(fluids).orderBy(asc(fluids.name))).map(present.presentFluid),
      ),
      machines: inUse(await listMachines(tx, context)),
      haulers: inUse(await listParties(tx, 'hauler')),
      facilities: inUse(await listParties(tx, 'facility')),
    }
  })

  serve(router, services, contracts.listAudit, async (tx, _, { query }) => {
    const after = readCursor(query.cursor)
    const rows = await tx
      .select({ entry: audit, name: people.name })
      .from(audit)
      .leftJoin(people, eq(people.id, audit.personId))
      .where(
        and(
          query.subjectId === undefined ? undefined : eq(audit.subjectId, query.subjectId),
          after === undefined
            ? undefined
            : or(
                lt(audit.at, new Date(after.at)),
                and(eq(audit.at, new Date(after.at)), lt(audit.id, after.id)),
              ),
        ),
      )
      .orderBy(desc(audit.at), desc(audit.id))
      .limit(query.limit + 1)
    const shown = rows.slice(0, query.limit)
    const last = shown.at(-1)
    return {
      rows: shown.map(({ entry, name }) => ({
        ...entry,
        at: entry.at.toISOString(),
        by: entry.personId === null || name === null ? null : { id: entry.personId, name },
      })),
      next:
        rows.length > query.limit && last
          ? writeCursor({ at: last.entry.at.toISOString(), id: last.entry.id })
          : null,
    }
  })
  return router
}

/** list, read, create, change, retire and restore of one kind. */
function serveSix(router: Router, services: AppServices) {
  return <T extends SetUpTable, Body extends { id: string }>(
    six: AnyContractSet,
    kind: SetUpKind<T, Body>,
    list: (tx: Transaction, context: ActContext) => Promise<{ id: string }[]>,
  ) => {
    const one = async (tx: Transaction, context: ActContext, id: string) => {
      const found = (await list(tx, context)).find((row) => row.id === id)
      if (found === undefined) throw problem('not-found')
      return found
    }
    serve(router, services, six.list, async (tx, context) => ({ rows: await list(tx, context) }))
    serve(router, services, six.read, (tx, context, { params }) => one(tx, context, idOf(params)))
    serve(router, services, six.create, async (tx, context, { body }) => {
      const row = await createRecord(tx, context, kind, body as Body)
      return one(tx, context, row.id)
    })
    serve(router, services, six.change, async (tx, context, { params, body, ifMatch }) => {
      const id = idOf(params)
      await one(tx, context, id)
      await changeRecord(tx, context, kind, id, ifMatch ?? '', body as Body)
      return one(tx, context, id)
    })
    for (const [contract, isRetired] of [
      [six.retire, true],
      [six.restore, false],
    ] as const) {
      serve(router, services, contract, async (tx, context, { params }) => {
        const id = idOf(params)
        await one(tx, context, id)
        await setRetired(tx, context, kind as unknown as SetUpKind<T, never>, id, isRetired)
        return one(tx, context, id)
      })
    }
  }
}

/** The six contracts all take `:id`; their generic type no longer says so. */
function idOf(params: unknown): string {
  return (params as z.output<typeof contracts.siteContracts.read.params>).id
}

async function listSites(tx: Transaction, context: ActContext) {
  const rows = await tx
    .select()
    .from(sites)
    .where(ofSites(sites.id, sitesSeen(context)))
    .orderBy(asc(sites.code))
  return rows.map(present.presentSite)
}

async function listStreams(tx: Transaction) {
  // As they were made: fluids first, then solids, each by code.
  const rows = await tx
    .select()
    .from(streams)
    .orderBy(asc(streams.kind), sql`${streams.code} <> 'mineral'`, asc(streams.code))
  return rows.map(present.presentStream)
}

async function listMachines(tx: Transaction, context: ActContext) {
  const rows = await tx
    .select({ machine: machines, fluid: fluids })
    .from(machines)
    .innerJoin(fluids, eq(fluids.id, machines.fluidId))
    .where(ofSites(machines.siteId, sitesSeen(context)))
    .orderBy(asc(machines.code))
  return rows.map(({ machine, fluid }) => present.presentMachine(machine, fluid))
}

async function listContainerRecords(tx: Transaction, context: ActContext) {
  const rows = await tx
    .select()
    .from(containers)
    .where(ofSites(containers.siteId, sitesSeen(context)))
    .orderBy(asc(containers.code))
  return rows.map(present.presentContainerRecord)
}

async function listParties(tx: Transaction, kind: 'hauler' | 'facility') {
  const rows = await tx
    .select()
    .from(parties)
    .where(eq(parties.kind, kind))
    .orderBy(asc(parties.name))
  const papers =
    rows.length === 0
      ? []
      : await tx
          .select()
          .from(permits)
          .where(
            inArray(
              permits.partyId,
              rows.map(({ id }) => id),
            ),
          )
          .orderBy(desc(permits.endsOn))
  return rows.map((row) => present.presentParty(row, papers))
}

async function presentedParty(tx: Transaction, id: string) {
  const [row] = await tx.select().from(parties).where(eq(parties.id, id))
  if (row === undefined) throw problem('not-found')
  const papers = await tx
    .select()
    .from(permits)
    .where(eq(permits.partyId, id))
    .orderBy(desc(permits.endsOn))
  return present.presentParty(row, papers)
}
