import { randomUUID } from 'node:crypto'
import request from 'supertest'
import { permits } from '@/db/schema/sites'
import type { Pickup } from '@/shared/contracts/pickups'
import {
  aContainer,
  aMachine,
  aParty,
  aSite,
  drainBody,
  signInAs,
  type Member,
  type TestOrganisation,
  type TestSite,
} from './factories'
import type { TestApp } from './test-app'

export type Place = { id: string; code: string }
export type PickupYard = {
  test: TestApp
  site: TestSite
  officer: Member
  hauler: { id: string; name: string }
  facility: { id: string; name: string }
}

/** A site with an officer, a hauler whose permit is current in 2025, and a facility. */
export async function aPickupYard(
  test: TestApp,
  given: {
    organisation?: TestOrganisation
    profile?: 'us-federal-baseline' | 'england'
    timeZone?: string
  } = {},
): Promise<PickupYard> {
  const site = await aSite(test, given)
  const { organisation } = site
  return {
    test,
    site,
    officer: await signInAs(test, organisation, 'officer', [site.id]),
    hauler: await aHauler(organisation),
    facility: await aParty(organisation, 'facility'),
  }
}

/** A hauler with one permit. */
export async function aHauler(
  organisation: TestOrganisation,
  permit = { number: 'INV-0001', startsOn: '2025-01-01', endsOn: '2025-12-31' },
) {
  const hauler = await aParty(organisation, 'hauler')
  await organisation.administrator.acts((tx, context) =>
    tx.insert(permits).values({
      id: randomUUID(),
      organisationId: organisation.id,
      partyId: hauler.id,
      note: '',
      createdAt: context.clock(),
      ...permit,
    }),
  )
  return hauler
}

/** A drum of a stream of fluid with so much in it. */
export async function aFilledDrum(
  yard: PickupYard,
  volume: { value: string; unit: string },
  stream = 'mineral',
): Promise<Place> {
  const container = await aContainer(yard.site, { stream })
  await pour(yard, container, { volume, streamId: yard.site.organisation.streams[stream] })
  return container
}

/** A bin with so many filters, counted and not weighed. */
export async function aBinOfFilters(yard: PickupYard, count: number): Promise<Place> {
  const bin = await aContainer(yard.site, { stream: 'filters', type: 'bin' })
  const filters = [{ count, size: 'small', state: 'drained', containerId: bin.id }]
  await pour(yard, await aContainer(yard.site), { filters })
  return bin
}

/** A bin with oily absorbents, weighed. */
export async function aBinOfAbsorbents(yard: PickupYard, kilograms: string): Promise<Place> {
  const bin = await aContainer(yard.site, { stream: 'absorbents', type: 'bin' })
  const absorbents = { mass: { value: kilograms, unit: 'kg' }, containerId: bin.id }
  await pour(yard, await aContainer(yard.site), { absorbents })
  return bin
}

async function pour(yard: PickupYard, container: Place, more: object): Promise<void> {
  const machine = await aMachine(yard.site, { reservoir: null, system: null })
  const body = drainBody(yard.site, { machine, container }, { ...more })
  expectDone(await yard.officer.post('/drains', body))
}

export function planBody(yard: PickupYard, containers: readonly Place[], more: object = {}) {
  return {
    id: randomUUID(),
    siteId: yard.site.id,
    haulerId: yard.hauler.id as string | null,
    facilityId: yard.facility.id as string | null,
    plannedOn: '2025-03-11',
    lines: containers.map(({ id }) => ({ id: randomUUID(), containerId: id })),
    ...more,
  }
}

export async function planned(
  yard: PickupYard,
  containers: readonly Place[],
  more: object = {},
): Promise<Pickup> {
  return expectDone(await yard.officer.post('/pickups', planBody(yard, containers, more)))
}

export async function issued(
  yard: PickupYard,
  containers: readonly Place[],
  more: object = {},
): Promise<Pickup> {
  const { id, version } = await planned(yard, containers, more)
  return expectDone(await yard.officer.post(`/pickups/${id}/issue`, { version }))
}

export function signBody(pickup: Pickup, party: 'generator' | 'driver', more: object = {}) {
  return {
    id: randomUUID(),
    party,
    name: party === 'driver' ? 'Dov Invented' : 'Olga Invented',
    documentSha256: pickup.documents[0]?.sha256,
    version: pickup.version,
    ...more,
  }
}

export async function signed(
  yard: PickupYard,
  pickup: Pickup,
  party: 'generator' | 'driver',
): Promise<Pickup> {
  const body = signBody(pickup, party)
  return expectDone(await yard.officer.post(`/pickups/${pickup.id}/signatures`, body))
}

/** Issued and signed by both: the load has left. */
export async function signedOut(
  yard: PickupYard,
  containers: readonly Place[],
  more: object = {},
): Promise<Pickup> {
  const atTheGate = await signed(yard, await issued(yard, containers, more), 'generator')
  return signed(yard, atTheGate, 'driver')
}

/** What the facility says: a quantity, and pieces where they are counted, for each line in order. */
export function receiveBody(
  pickup: Pickup,
  lines: readonly { value: string; unit: string; pieces?: number; method?: string }[],
  more: object = {},
) {
  return {
    version: pickup.version,
    receivedOn: '2025-03-10',
    ticket: 'W-77',
    lines: pickup.lines.map(({ id }, index) => {
      const { value, unit, pieces = 0, method = 'weighbridge' } = lines[index] ?? noLine(index)
      return { lineId: id, quantity: { value, unit }, pieces, method }
    }),
    ...more,
  }
}

export async function received(
  yard: PickupYard,
  pickup: Pickup,
  ...lines: { value: string; unit: string; pieces?: number; method?: string }[]
): Promise<Pickup> {
  const body = receiveBody(pickup, lines)
  return expectDone(await yard.officer.post(`/pickups/${pickup.id}/received`, body))
}

/** The bytes of a document, by the short-lived link. */
export async function bytesOf(yard: PickupYard, documentId: string): Promise<Buffer> {
  const { url } = expectDone(await yard.officer.post(`/documents/${documentId}/ticket`))
  const reply = await request(yard.test.app).get(url).responseType('blob')
  expect(reply.status).toBe(200)
  return reply.body as Buffer
}

/** The reply's body, when the request did what it should; its problem in the failure otherwise. */
export function expectDone<Body>(reply: { status: number; body: Body; text: string }): Body {
  if (reply.status >= 300) throw new Error(`${reply.status}: ${reply.text}`)
  return reply.body
}

function noLine(index: number): never {
  throw new Error(`the test says nothing of line ${index}`)
}
