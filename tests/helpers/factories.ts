import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import request, { type Test } from 'supertest'
import type { Transaction } from '@/db/client'
import { people, sessions } from '@/db/schema/organisations'
import { streams as streamTable } from '@/db/schema/sites'
import { asMember, asService } from '@/db/tenancy'
import type { ActContext } from '@/server/act-context'
import { getActingPerson } from '@/server/people/get-acting-person'
import { replacePersonSites } from '@/server/people/replace-person-sites'
import { makeOrganisation } from '@/server/people/set-up-organisation'
import { accessToken } from '@/server/people/tokens'
import { createRecord } from '@/server/set-up/set-up-act'
import {
  containerKind,
  fluidKind,
  machineKind,
  partyKind,
  siteKind,
} from '@/server/set-up/set-up-kinds'
import type { Role } from '@/shared/policies'
import type { TestApp } from './test-app'

/** Someone who is signed in: asks the API with their own token, or runs an act as themselves. */
export type Member = {
  id: string
  organisationId: string
  email: string
  /** The Authorization header of a request now. */
  bearer: () => string
  get: (path: string) => Test
  post: (path: string, body?: object) => Test
  put: (path: string, body: object, version: string) => Test
  /** One transaction with the context a request of theirs would have. */
  acts: <T>(work: (tx: Transaction, context: ActContext) => Promise<T>) => Promise<T>
}

export type TestOrganisation = {
  id: string
  administrator: Member
  /** Ids by code: mineral, ester, water, filters, absorbents. */
  streams: Record<string, string>
}

export type TestSite = { id: string; code: string; organisation: TestOrganisation }

/** Everybody's password in the tests, and its hash: hashing takes longer than most tests. */
export const knownPassword = 'an invented password'
const knownHash =
  '$argon2id$v=19$m=19456,t=2,p=1$Euk18hRByi2q8uR6+x+mKA$zA59P3MDG+3hluu81cBADBbeQ84YhywGgcKil/7RA6Y'

let made = 0
/** A short code that no other record of this test file has. */
export function nextCode(prefix: string): string {
  made += 1
  return `${prefix}-${made}`
}

/** An organisation with its first administrator and its streams. */
export async function anOrganisation(test: TestApp): Promise<TestOrganisation> {
  const organisationId = randomUUID()
  const personId = randomUUID()
  const email = `${personId}@works.example.org`
  const found = await asService(test.opened.db, async (tx) => {
    await makeOrganisation(tx, test.services, {
      organisationId,
      personId,
      organisationName: `Invented Works ${organisationId.slice(0, 4)}`,
      phone: '555-0100',
      name: 'Ada Invented',
      email,
      passwordHash: knownHash,
      isDemo: false,
    })
    return tx.select().from(streamTable).where(eq(streamTable.organisationId, organisationId))
  })
  return {
    id: organisationId,
    administrator: await signedIn(test, { id: personId, organisationId, email }),
    streams: Object.fromEntries(found.map(({ code, id }) => [code, id])),
  }
}

/** A session as sign-in opens one, without the password's work. */
async function signedIn(
  test: TestApp,
  person: { id: string; organisationId: string; email: string },
): Promise<Member> {
  const sessionId = randomUUID()
  const { db } = test.opened
  await asService(db, (tx) =>
    tx.insert(sessions).values({
      id: sessionId,
      organisationId: person.organisationId,
      personId: person.id,
      tokenHash: sessionId,
      rotatedAt: new Date(),
      createdAt: new Date(),
      expiresAt: new Date(Date.now() + 86_400_000),
      device: 'test',
    }),
  )
  const claims = { personId: person.id, organisationId: person.organisationId, sessionId }
  // A fresh token for every request: a test moves the clock as it likes.
  const bearer = () => `Bearer ${accessToken(test.services.secret, claims, test.services.clock())}`
  return {
    ...person,
    bearer,
    get: (path) => request(test.app).get(`/api${path}`).set('Authorization', bearer()),
    post: (path, body) =>
      request(test.app).post(`/api${path}`).set('Authorization', bearer()).send(body),
    put: (path, body, version) =>
      request(test.app)
        .put(`/api${path}`)
        .set('Authorization', bearer())
        .set('If-Match', `"${version}"`)
        .send(body),
    acts: (work) =>
      asMember(db, claims, async (tx) =>
        work(tx, { ...test.services, person: await getActingPerson(tx, claims) }),
      ),
  }
}

/** A person with a role and sites, signed in. */
export async function signInAs(
  test: TestApp,
  organisation: TestOrganisation,
  role: Role,
  siteIds: readonly string[] = [],
): Promise<Member> {
  const id = randomUUID()
  const email = `${id}@works.example.org`
  await organisation.administrator.acts(async (tx, context) => {
    // Not through the act, which hashes.
    await tx.insert(people).values({
      id,
      organisationId: organisation.id,
      name: `Invented ${role} ${id.slice(0, 4)}`,
      email,
      role,
      passwordHash: knownHash,
      version: randomUUID(),
      createdAt: context.clock(),
    })
    await replacePersonSites(tx, context, id, siteIds)
  })
  return signedIn(test, { id, organisationId: organisation.id, email })
}

/** A site with its open book and the rules of its profile; of a fresh organisation unless one is given. */
export async function aSite(
  test: TestApp,
  given: {
    organisation?: TestOrganisation
    code?: string
    timeZone?: string
    profile?: 'us-federal-baseline' | 'england'
  } = {},
): Promise<TestSite> {
  const organisation = given.organisation ?? (await anOrganisation(test))
  const id = randomUUID()
  const code = given.code ?? nextCode('S')
  await organisation.administrator.acts((tx, context) =>
    createRecord(tx, context, siteKind, {
      id,
      code,
      name: `Yard ${code}`,
      address: '1 Invented Road',
      phone: '555-0101',
      identificationNumber: 'XX0000000000',
      timeZone: given.timeZone ?? 'America/Chicago',
      profile: given.profile ?? 'us-federal-baseline',
      volumeUnit: 'gal_us',
      massUnit: 'lb_avdp',
    }),
  )
  return { id, code, organisation }
}

/** A container of a site: a 55 gal drum for used mineral fluid, filled to 90 %, unless told otherwise. */
export async function aContainer(
  site: TestSite,
  given: {
    code?: string
    stream?: string
    type?: 'drum' | 'tote' | 'tank' | 'pail' | 'bin' | 'van'
    capacity?: { value: string; unit: 'gal_us' | 'L' }
    fillPercent?: string
  } = {},
): Promise<{ id: string; code: string }> {
  const id = randomUUID()
  const code = given.code ?? nextCode('C')
  await site.organisation.administrator.acts((tx, context) =>
    createRecord(tx, context, containerKind, {
      id,
      siteId: site.id,
      code,
      type: given.type ?? 'drum',
      description: '',
      streamId: streamOf(site, given.stream ?? 'mineral'),
      capacity: given.capacity ?? { value: '55', unit: 'gal_us' },
      fillPercent: given.fillPercent ?? '90',
      tareKilograms: null,
      place: '',
    }),
  )
  return { id, code }
}

/** A machine of a site, with its fluid; it holds 40 gal in the reservoir and 60 gal in the system. */
export async function aMachine(
  site: TestSite,
  given: {
    code?: string
    stream?: string
    reservoir?: { value: string; unit: 'gal_us' | 'L' } | null
    system?: { value: string; unit: 'gal_us' | 'L' } | null
  } = {},
): Promise<{ id: string; code: string; fluidId: string }> {
  const id = randomUUID()
  const fluidId = randomUUID()
  const code = given.code ?? nextCode('M')
  await site.organisation.administrator.acts(async (tx, context) => {
    await createRecord(tx, context, fluidKind, {
      id: fluidId,
      name: nextCode('Fluid'),
      streamId: streamOf(site, given.stream ?? 'mineral'),
    })
    await createRecord(tx, context, machineKind, {
      id,
      siteId: site.id,
      code,
      make: 'Invented',
      model: 'Digger',
      kind: 'excavator',
      serial: '',
      fluidId,
      reservoir: given.reservoir === undefined ? { value: '40', unit: 'gal_us' } : given.reservoir,
      system: given.system === undefined ? { value: '60', unit: 'gal_us' } : given.system,
    })
  })
  return { id, code, fluidId }
}

/** A hauler or facility of the organisation. */
export async function aParty(
  organisation: TestOrganisation,
  kind: 'hauler' | 'facility',
): Promise<{ id: string; name: string }> {
  const id = randomUUID()
  const name = `Invented ${kind} ${nextCode('P')}`
  await organisation.administrator.acts((tx, context) =>
    createRecord(tx, context, partyKind(kind), {
      id,
      name,
      identificationNumber: 'XX0000000001',
      address: '2 Invented Road',
      email: `${id}@${kind}.example.org`,
      phone: '555-0102',
      contactName: 'Dee Invented',
    }),
  )
  return { id, name }
}

export function streamOf(site: TestSite, code: string): string {
  const id = site.organisation.streams[code]
  if (id === undefined) throw new Error(`no stream is called ${code}`)
  return id
}

/** The body of a drain of 10 gal from a machine into a container; `more` is laid over it. */
export function drainBody(
  site: TestSite,
  of: { machine: { id: string }; container: { id: string } },
  more: Record<string, unknown> = {},
) {
  return {
    id: randomUUID(),
    siteId: site.id,
    machine: { kind: 'listed', machineId: of.machine.id } as
      { kind: 'listed'; machineId: string } | { kind: 'unlisted'; description: string },
    streamId: streamOf(site, 'mineral'),
    occurredAt: '2025-03-10T15:00:00Z',
    volume: { value: '10', unit: 'gal_us' },
    method: 'marked-pail',
    legs: [{ containerId: of.container.id }],
    ...more,
  }
}
