import { and, eq, isNull, ne, or, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { lockBook } from '@/db/queries/book'
import { accounts, balances, books, movements } from '@/db/schema/book'
import { people } from '@/db/schema/organisations'
import { containers, fluids, machines, parties, sites, streams } from '@/db/schema/sites'
import { countAdministrators, endSessions } from '@/db/queries/people'
import { isTimeZone } from '@/shared/calendar'
import type * as contracts from '@/shared/contracts/set-up'
import { divide, multiply } from '@/shared/quantities/decimals'
import { toLitres } from '@/shared/quantities/convert'
import { openBook } from '../book/open-book'
import { evaluateSiteLimits } from '../limits/evaluate-site-limits'
import { installPack } from '../limits/install-pack'
import { hashPassword, passwordMatches } from '../people/passwords'
import { replacePersonSites } from '../people/replace-person-sites'
import { fieldProblem, problem } from '../problem'
import type { SetUpKind } from './set-up-act'

type SiteBody = z.output<typeof contracts.siteBody> & { id: string }
type StreamBody = z.output<typeof contracts.streamBody> & { id: string }
type FluidBody = z.output<typeof contracts.fluidBody> & { id: string }
type MachineBody = z.output<typeof contracts.machineBody> & { id: string }
type ContainerBody = z.output<typeof contracts.containerBody> & { id: string }
type PartyBody = z.output<typeof contracts.partyBody> & { id: string }
type PersonBody = z.output<typeof contracts.personBody> & { id: string; password?: string }

export const siteKind: SetUpKind<typeof sites, SiteBody> = {
  table: sites,
  order: sites.code,
  subjectKind: 'site',
  act: 'change-set-up',
  columns: async (tx, _, body, before) => {
    if (!isTimeZone(body.timeZone)) {
      throw fieldProblem(
        'fields-refused',
        'timeZone',
        'not-a-time-zone',
        'Name an IANA time zone, like America/Chicago',
      )
    }
    if (before !== undefined && before.timeZone !== body.timeZone) {
      // What is recorded meanwhile waits, or is seen.
      await lockBook(tx, before.id)
      if (await hasLines(tx, before.id))
        throw inUse('Its days are already cut by the old time zone. Make a new site instead.')
    }
    const { id: _id, ...columns } = body
    return columns
  },
  beforeRetire: async (tx, _, site) => {
    const living = await tx
      .select({ code: containers.code })
      .from(containers)
      .where(and(eq(containers.siteId, site.id), isNull(containers.retiredAt)))
      .limit(1)
    if (living[0] !== undefined)
      throw inUse(`Container ${living[0].code} is still in use there. Retire it first.`)
  },
  after: async (tx, context, site, what) => {
    if (what === 'create') await openBook(tx, context, site.id)
    if (what === 'create' || what === 'change')
      await installPack(tx, context, site.id, site.profile)
  },
}

export const streamKind: SetUpKind<typeof streams, StreamBody> = {
  table: streams,
  order: streams.code,
  subjectKind: 'stream',
  act: 'change-set-up',
  columns: async (tx, _, body, before) => {
    if (
      before !== undefined &&
      before.kind !== body.kind &&
      (await streamHasLines(tx, before.id))
    ) {
      throw inUse(
        'It has lines in the book, so fluid stays fluid and solid stays solid. Make a new stream.',
      )
    }
    const { id: _id, density, ...columns } = body
    return {
      ...columns,
      density: density?.kilogramsPerLitre ?? null,
      densityBasis: density?.basis ?? null,
    }
  },
  beforeRetire: async (tx, _, stream) => {
    const [container] = await tx
      .select({ code: containers.code })
      .from(containers)
      .where(and(eq(containers.streamId, stream.id), isNull(containers.retiredAt)))
      .limit(1)
    if (container !== undefined)
      throw inUse(`Container ${container.code} is for this stream. Retire or change it first.`)
    const [fluid] = await tx
      .select({ name: fluids.name })
      .from(fluids)
      .where(and(eq(fluids.streamId, stream.id), isNull(fluids.retiredAt)))
      .limit(1)
    if (fluid !== undefined)
      throw inUse(`Fluid ${fluid.name} goes to this stream. Retire or change it first.`)
  },
  after: async (tx, context) => {
    // Classes decide which rules count a stream, so every site is looked at again.
    for (const site of await tx.select({ id: sites.id }).from(sites))
      await evaluateSiteLimits(tx, context, site.id)
  },
}

export const fluidKind: SetUpKind<typeof fluids, FluidBody> = {
  table: fluids,
  order: fluids.name,
  subjectKind: 'fluid',
  act: 'change-set-up',
  columns: async (tx, _, body, before) => {
    await mustExist(tx, streams, body.streamId, 'streamId', before?.streamId)
    return { name: body.name, streamId: body.streamId }
  },
  beforeRetire: async (tx, _, fluid) => {
    const [machine] = await tx
      .select({ code: machines.code })
      .from(machines)
      .where(and(eq(machines.fluidId, fluid.id), isNull(machines.retiredAt)))
      .limit(1)
    if (machine !== undefined)
      throw inUse(`Machine ${machine.code} runs on it. Change or retire the machine first.`)
  },
}

export const machineKind: SetUpKind<typeof machines, MachineBody> = {
  table: machines,
  order: machines.code,
  subjectKind: 'machine',
  act: 'change-set-up',
  columns: async (tx, _, body, before) => {
    await mustExist(tx, sites, body.siteId, 'siteId', before?.siteId)
    await mustExist(tx, fluids, body.fluidId, 'fluidId', before?.fluidId)
    const { id: _id, reservoir, system, ...columns } = body
    return {
      ...columns,
      reservoirValue: reservoir?.value ?? null,
      reservoirUnit: reservoir?.unit ?? null,
      reservoirLitres: reservoir === null ? null : toLitres(reservoir.value, reservoir.unit),
      systemValue: system?.value ?? null,
      systemUnit: system?.unit ?? null,
      systemLitres: system === null ? null : toLitres(system.value, system.unit),
    }
  },
}

export const containerKind: SetUpKind<typeof containers, ContainerBody> = {
  table: containers,
  order: containers.code,
  subjectKind: 'container',
  act: 'change-set-up',
  columns: async (tx, _, body, before) => {
    await mustExist(tx, sites, body.siteId, 'siteId', before?.siteId)
    await mustExist(tx, streams, body.streamId, 'streamId', before?.streamId)
    // What is poured meanwhile waits, or is seen.
    if (before !== undefined) await lockBook(tx, before.siteId)
    if (
      before !== undefined &&
      before.siteId !== body.siteId &&
      (await containerHasLines(tx, before.id))
    ) {
      throw inUse('It has lines in the book of its site. Make a new container at the other site.')
    }
    if (
      before !== undefined &&
      before.streamId !== body.streamId &&
      !(await isEmpty(tx, before.id))
    ) {
      throw inUse('It is not empty in the book. A container changes its stream when it is empty.')
    }
    const { id: _id, capacity, ...columns } = body
    const capacityLitres = toLitres(capacity.value, capacity.unit)
    return {
      ...columns,
      capacityValue: capacity.value,
      capacityUnit: capacity.unit,
      capacityLitres,
      fillLineLitres: divide(multiply(capacityLitres, body.fillPercent), '100', 18),
    }
  },
  beforeRetire: async (tx, _, container) => {
    await lockBook(tx, container.siteId)
    if (!(await isEmpty(tx, container.id))) {
      throw inUse('It is not empty in the book. Ship or transfer what is in it first.')
    }
  },
  // Only a container that never held anything moves, and that counts at no site yet.
  after: async (tx, context, container) => evaluateSiteLimits(tx, context, container.siteId),
}

export function partyKind(kind: 'hauler' | 'facility'): SetUpKind<typeof parties, PartyBody> {
  return {
    table: parties,
    order: parties.name,
    subjectKind: kind,
    act: 'change-set-up',
    columns: async (_tx, _, body, before) => {
      // One table holds both kinds: a hauler's address is no facility's.
      if (before !== undefined && before.kind !== kind) throw problem('not-found')
      const { id: _id, ...columns } = body
      return { ...columns, kind }
    },
    beforeRetire: async (_tx, _, party) => {
      if (party.kind !== kind) throw problem('not-found')
    },
  }
}

export const personKind: SetUpKind<typeof people, PersonBody> = {
  table: people,
  order: people.name,
  subjectKind: 'person',
  act: 'change-people',
  columns: async (tx, _, body, before) => {
    if (before !== undefined && before.role === 'administrator' && body.role !== 'administrator') {
      await keepAnAdministrator(tx, before.id)
    }
    for (const siteId of body.siteIds) await mustExist(tx, sites, siteId, 'siteIds', siteId)
    const { id: _id, siteIds: _siteIds, password, ...columns } = body
    return password === undefined
      ? columns
      : { ...columns, passwordHash: await hashPassword(password) }
  },
  beforeRetire: async (tx, _, person) => {
    if (person.role === 'administrator') await keepAnAdministrator(tx, person.id)
  },
  after: async (tx, context, person, what, body) => {
    if (body !== undefined) await replacePersonSites(tx, context, person.id, body.siteIds)
    if (what === 'retire') await endSessions(tx, person.id, context.clock())
  },
  isMadeWith: async (person, body) => passwordMatches(body.password ?? '', person.passwordHash),
}

async function keepAnAdministrator(tx: Transaction, except: string): Promise<void> {
  if ((await countAdministrators(tx, except)) === 0) throw problem('last-administrator')
}

function inUse(what: string) {
  return problem('still-in-use', { facts: { what } })
}

/**
 * A named record exists and is in use; what a record named before it may keep.
 * @throws Problem fields-refused naming the field
 */
async function mustExist(
  tx: Transaction,
  table: typeof sites | typeof streams | typeof fluids,
  id: string,
  field: string,
  kept?: string,
): Promise<void> {
  const [found] = await tx
    .select({ retiredAt: table.retiredAt })
    .from(table)
    .where(eq(table.id, id))
    .limit(1)
  if (found === undefined)
    throw fieldProblem('fields-refused', field, 'unknown', 'There is no such record')
  if (found.retiredAt !== null && id !== kept)
    throw fieldProblem('fields-refused', field, 'retired', 'This record is retired')
}

async function hasLines(tx: Transaction, siteId: string): Promise<boolean> {
  const [book] = await tx
    .select({ last: books.lastLineNo })
    .from(books)
    .where(eq(books.siteId, siteId))
  return (book?.last ?? 0) > 0
}

async function streamHasLines(tx: Transaction, streamId: string): Promise<boolean> {
  const found = await tx
    .select({ id: movements.id })
    .from(movements)
    .where(eq(movements.streamId, streamId))
    .limit(1)
  return found.length > 0
}

async function containerHasLines(tx: Transaction, containerId: string): Promise<boolean> {
  const found = await tx
    .select({ id: balances.accountId })
    .from(balances)
    .innerJoin(accounts, eq(accounts.id, balances.accountId))
    .where(eq(accounts.containerId, containerId))
    .limit(1)
  return found.length > 0
}

/** Nothing stands in the container in any stream: by litres, kilograms and pieces. */
async function isEmpty(tx: Transaction, containerId: string): Promise<boolean> {
  const found = await tx
    .select({ one: sql`1` })
    .from(balances)
    .innerJoin(accounts, eq(accounts.id, balances.accountId))
    .where(
      and(
        eq(accounts.containerId, containerId),
        or(ne(balances.litres, '0'), ne(balances.kilograms, '0'), ne(balances.pieces, 0)),
      ),
    )
    .limit(1)
  return found.length === 0
}
