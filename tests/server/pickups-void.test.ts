import { randomUUID } from 'node:crypto'
import type { Pickup } from '@/shared/contracts/pickups'
import { bookFindings, bookLines } from '../helpers/book'
import {
  aFilledDrum,
  aPickupYard,
  expectDone,
  issued,
  planned,
  received,
  signBody,
  signed,
  signedOut,
  type PickupYard,
} from '../helpers/pickups'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let yard: PickupYard

beforeAll(async () => {
  product = await testApp()
})
beforeEach(async () => (yard = await aPickupYard(product)))
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

const aDrum = () => aFilledDrum(yard, { value: '100', unit: 'L' })
const voidIt = ({ id, version }: Pickup, reason = 'wrong hauler') =>
  yard.officer.post(`/pickups/${id}/void`, { version, reason })

test('a plan that is voided never had a number and leaves no paper', async () => {
  const pickup: Pickup = expectDone(await voidIt(await planned(yard, [await aDrum()])))
  expect(pickup).toMatchObject({ stage: 'voided', number: null, documents: [] })
  expect(pickup.voided).toMatchObject({ reason: 'wrong hauler', by: { id: yard.officer.id } })
})

test('a manifest that is voided keeps its number, which is not given again', async () => {
  const drum = await aDrum()
  const first = await issued(yard, [drum])
  const voided: Pickup = expectDone(await voidIt(first))
  expect([voided.stage, voided.number]).toEqual(['voided', first.number])
  expect(voided.documents[0]).toMatchObject({ kind: 'void-manifest', revision: 2 })
  const next = await issued(yard, [drum])
  expect(next.number).toContain('-25-002-')
})

test('a load that left goes back into its container by mirror lines', async () => {
  const drum = await aDrum()
  const load = await signedOut(yard, [drum])
  const before = (await bookLines(product, yard.site.id)).length
  const voided: Pickup = expectDone(await voidIt(load, 'the load never left'))
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${yard.hauler.name} > ${drum.code} 100 L mineral undoes shipment`,
  ])
  expect(voided.documents.map(({ kind }) => kind)).toEqual([
    'void-manifest',
    'signed-manifest',
    'manifest',
  ])
  expect(voided.lines[0]?.bookLitres).toBe('100')
})

test('at the gate it can still be voided, and then nobody signs it', async () => {
  const pickup = await signed(yard, await issued(yard, [await aDrum()]), 'generator')
  const voided: Pickup = expectDone(await voidIt(pickup))
  const reply = await yard.officer.post(
    `/pickups/${pickup.id}/signatures`,
    signBody(voided, 'driver', { id: randomUUID() }),
  )
  expect([reply.status, reply.body.code]).toEqual([409, 'wrong-stage'])
})

test('what was received is settled, not voided', async () => {
  const pickup = await received(yard, await signedOut(yard, [await aDrum()]), {
    value: '50',
    unit: 'L',
  })
  const reply = await voidIt(pickup)
  expect([reply.status, reply.body.code]).toEqual([409, 'wrong-stage'])
})

test('a void needs a reason, and happens once', async () => {
  const pickup = await issued(yard, [await aDrum()])
  const silent = await voidIt(pickup, ' ')
  expect([silent.status, silent.body.fields[0].path]).toEqual([400, 'reason'])
  const replies = await Promise.all([voidIt(pickup), voidIt(pickup)])
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 409])
})

test('voided while the driver signs: the book ends as if one of them had been first', async () => {
  const drum = await aDrum()
  const pickup = await signed(yard, await issued(yard, [drum]), 'generator')
  const [signing, voiding] = await Promise.all([
    yard.officer.post(`/pickups/${pickup.id}/signatures`, signBody(pickup, 'driver')),
    voidIt(pickup),
  ])
  expect([signing.status, voiding.status].filter((status) => status < 300)).toHaveLength(1)
  const { stage, lines } = (await yard.officer.get(`/pickups/${pickup.id}`)).body
  expect([stage, lines[0].bookLitres]).toEqual(
    voiding.status === 200 ? ['voided', '100'] : ['signed-out', '0'],
  )
})
