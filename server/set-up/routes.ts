import { Router } from 'express'
import { asc, desc, eq, inArray, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { endSessions, listPeople } from '@/db/queries/people'
import { ofSites } from '@/db/queries/sites'
import { organisations, people } from '@/db/schema/organisations'
import { containers, fluids, machines, parties, permits, sites, streams } from '@/db/schema/sites'
import type { Contract } from '@/shared/contracts/contract'
import * as contracts from '@/shared/contracts/set-up'
import type { ActContext } from '../act-context'
import type { AppServices } from '../app-services'
import { listAudit } from '../audit/list-audit'
import { writeAudit } from '../audit/write-audit'
import { serve } from '../http/route'
import { hashPassword } from '../people/passwords'
import { problem } from '../problem'
import { sitesSeen } from '../sites-seen'
import { addPermit } from './add-permit'
import { retirePermit } from './retire-permit'
import * as kinds from './set-up-kinds'
import {
  changeRecord,
  createRecord,
  isCreatedSo,
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

  serve(router, services, contracts.addPermit, async (tx, context, { params, body, repeated }) => {
    const party = await presentedParty(tx, params.id)
    const same = party.permits.find(({ id }) => id === body.id)
    const isSame =
      same !== undefined &&
      same.number === body.number &&
      same.startsOn === body.startsOn &&
      same.endsOn === body.endsOn &&
      same.note === body.note
    if (isSame) repeated()
    else await addPermit(tx, context, party.id, body)
    return presentedParty(tx, party.id)
  })
  serve(router, services, contracts.retirePermit, async (tx, context, { params }) =>
    presentedParty(tx, await retirePermit(tx, context, params.id)),
  )

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

  serve(router, services, contracts.listAudit, (tx, context, { query }) =>
    listAudit(tx, context, query),
  )
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
    serve(router, services, six.create, async (tx, context, { body, repeated }) => {
      const given = body as Body
      if (await isCreatedSo(tx, kind, given)) repeated()
      else await createRecord(tx, context, kind, given)
      return one(tx, context, given.id)
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
