import { createHash, randomUUID } from 'node:crypto'
import type { Pickup } from '@/shared/contracts/pickups'
import { bookFindings, bookLines } from '../helpers/book'
import { signInAs } from '../helpers/factories'
import {
  aBinOfAbsorbents,
  aBinOfFilters,
  aFilledDrum,
  aPickupYard,
  bytesOf,
  expectDone,
  issued,
  signBody,
  signed,
  type PickupYard,
} from '../helpers/pickups'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let yard: PickupYard

beforeAll(async () => {
  product = await testApp()
  yard = await aPickupYard(product)
})
beforeEach(() => (product.clock.now = new Date('2025-03-10T18:00:00Z')))
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

const aLoad = async () => issued(yard, [await aFilledDrum(yard, { value: '10', unit: 'gal_us' })])
const sign = (pickup: Pickup, body: object) =>
  yard.officer.post(`/pickups/${pickup.id}/signatures`, body)
const linesSo = async () => (await bookLines(product, yard.site.id)).length

test('the first signature brings it to the gate and moves nothing', async () => {
  const pickup = await aLoad()
  const before = await linesSo()
  const after = await signed(yard, pickup, 'driver')
  expect(after).toMatchObject({ stage: 'at-the-gate', version: 3, signedOutAt: null })
  expect(after.signatures).toMatchObject([
    {
      party: 'driver',
      signedOffset: '-05:00',
      isDrawn: false,
      documentSha256: pickup.documents[0]?.sha256,
    },
  ])
  expect(after.documents).toHaveLength(1)
  expect(await linesSo()).toBe(before)
})

test('the second signature ships every line, makes the signed paper and starts the clock', async () => {
  const drum = await aFilledDrum(yard, { value: '10', unit: 'gal_us' })
  const filters = await aBinOfFilters(yard, 12)
  const absorbents = await aBinOfAbsorbents(yard, '6.4')
  const pickup = await issued(yard, [drum, filters, absorbents])
  const before = await linesSo()
  await signed(yard, pickup, 'generator')
  // Eleven at night in Chicago: the day that counts is the site's.
  product.clock.now = new Date('2025-03-11T04:00:00Z')
  const { id, documents } = pickup
  const body = signBody(pickup, 'driver', {
    version: 3,
    strokes: [
      [
        [10, 10],
        [500, 200],
      ],
      [[990, 390]],
    ],
    dispute: 'One seal was broken.',
  })
  const left: Pickup = expectDone(await sign(pickup, body))
  expect(left).toMatchObject({
    stage: 'signed-out',
    signedOutAt: '2025-03-11T04:00:00.000Z',
    returnDueOn: '2025-04-09',
    daysSinceSigned: 0,
  })
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${drum.code} > ${yard.hauler.name} 37.85411784 L mineral shipment`,
    `${filters.code} > ${yard.hauler.name} 12 pieces filters shipment`,
    `${absorbents.code} > ${yard.hauler.name} 6.4 kg absorbents shipment`,
  ])
  expect(left.documents.map(({ kind, revision }) => [kind, revision])).toEqual([
    ['signed-manifest', 2],
    ['manifest', 1],
  ])
  expect(left.signatures[1]).toMatchObject({ isDrawn: true, dispute: 'One seal was broken.' })
  for (const document of left.documents) {
    const bytes = await bytesOf(yard, document.id)
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(document.sha256)
  }
  // What was read and signed is still what it was.
  expect(left.documents[1]).toEqual(documents[0])
  expect(left.id).toBe(id)
})

test('a drum shipped as the book holds it is empty afterwards, to the last digit', async () => {
  const drum = await aFilledDrum(yard, { value: '0.33333', unit: 'gill_imp' })
  await signed(yard, await signed(yard, await issued(yard, [drum]), 'generator'), 'driver')
  const { body } = await yard.officer.get(`/containers/${drum.id}`)
  expect(body.litres).toBe('0')
})

test('another document than the newest is refused: it must be read again', async () => {
  const pickup = await aLoad()
  const reply = await sign(pickup, signBody(pickup, 'driver', { documentSha256: 'ab'.repeat(32) }))
  expect([reply.status, reply.body.code]).toEqual([409, 'document-changed'])
})

test('a party signs once, and the same signature sent again is answered as before', async () => {
  const pickup = await aLoad()
  const body = signBody(pickup, 'generator')
  expect((await sign(pickup, body)).status).toBe(200)
  const again = await sign(pickup, body)
  expect([again.status, again.body.signatures.length]).toEqual([200, 1])
  const other = await sign(pickup, { ...body, id: randomUUID(), version: 3 })
  expect([other.status, other.body.code]).toEqual([409, 'already-signed'])
  const reused = await sign(pickup, { ...body, name: 'Somebody Else' })
  expect([reused.status, reused.body.code]).toEqual([409, 'id-reused'])
})

test('nothing leaves a container that was held after the issue', async () => {
  const pickup = await aLoad()
  const containerId = pickup.lines[0]?.containerId
  const hold = { id: randomUUID(), reason: 'solvent smell', halogensPpm: '1240' }
  expectDone(await yard.officer.post(`/containers/${containerId}/hold`, hold))
  const reply = await sign(pickup, signBody(pickup, 'driver'))
  expect([reply.status, reply.body.code]).toEqual([409, 'container-held'])
  expect(reply.body.facts).toMatchObject({ reason: 'solvent smell' })
  expectDone(await yard.officer.post(`/containers/${containerId}/release`, { note: 'passed' }))
  expect((await sign(pickup, signBody(pickup, 'driver'))).status).toBe(200)
})

test('both sign at the same moment on two devices: one is asked to look again', async () => {
  const second = await signInAs(product, yard.site.organisation, 'officer', [yard.site.id])
  const pickup = await aLoad()
  const before = await linesSo()
  const path = `/pickups/${pickup.id}/signatures`
  const replies = await Promise.all([
    yard.officer.post(path, signBody(pickup, 'generator')),
    second.post(path, signBody(pickup, 'driver')),
  ])
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 409])
  const after = (await yard.officer.get(`/pickups/${pickup.id}`)).body
  expect([after.stage, after.signatures.length, await linesSo()]).toEqual([
    'at-the-gate',
    1,
    before,
  ])
})

test.each([
  ['no name', { name: ' ' }, 'name'],
  ['a point outside the box', { strokes: [[[1001, 10]]] }, 'strokes.0.0.0'],
  ['a party of its own', { party: 'auditor' }, 'party'],
  ['a hash that is none', { documentSha256: 'XYZ' }, 'documentSha256'],
])('%s is refused with the field named', async (_, more, path) => {
  const pickup = await aLoad()
  const reply = await sign(pickup, signBody(pickup, 'driver', more))
  expect(reply.status).toBe(400)
  expect(reply.body.fields.map((field: { path: string }) => field.path)).toEqual([path])
})

test('a technician does not take signatures for the site', async () => {
  const pickup = await aLoad()
  const technician = await signInAs(product, yard.site.organisation, 'technician', [yard.site.id])
  const path = `/pickups/${pickup.id}/signatures`
  expect((await technician.post(path, signBody(pickup, 'generator'))).status).toBe(403)
})
