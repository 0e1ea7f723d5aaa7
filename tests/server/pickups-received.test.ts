import { and, asc, eq } from 'drizzle-orm'
import { movements } from '@/db/schema/book'
import { asService } from '@/db/tenancy'
import type { Pickup } from '@/shared/contracts/pickups'
import { bookFindings, bookLines } from '../helpers/book'
import { signInAs } from '../helpers/factories'
import {
  aBinOfFilters,
  aFilledDrum,
  aPickupYard,
  expectDone,
  planned,
  received,
  receiveBody,
  signedOut,
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

const litres = (value: string) => ({ value, unit: 'L' })
const kilograms = (value: string) => ({ value, unit: 'kg' })
const aLoad = async (...values: string[]) => {
  const drums = []
  for (const value of values) drums.push(await aFilledDrum(yard, litres(value)))
  return signedOut(yard, drums)
}
const linesSo = async () => (await bookLines(product, yard.site.id)).length
const settle = (pickup: Pickup, more: object = {}, officer = yard.officer) =>
  officer.post(`/pickups/${pickup.id}/settle`, {
    version: pickup.version,
    cause: 'within-rule',
    ...more,
  })

test('what was received moves from hauler to facility; the rest stays with the hauler', async () => {
  const load = await aLoad('100')
  const before = await linesSo()
  const pickup = await received(yard, load, litres('95.5'))
  expect(pickup).toMatchObject({
    stage: 'signed-out',
    received: { on: '2025-03-10', ticket: 'W-77' },
    difference: { litres: '-4.5', percent: '-4.5', rulePercent: '10', exceeds: false },
  })
  expect(pickup.lines[0]).toMatchObject({
    differencePercent: '-4.5',
    received: {
      quantity: litres('95.5'),
      litres: '95.5',
      method: 'weighbridge',
      densityUsed: null,
    },
  })
  const { hauler, facility } = yard
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${hauler.name} > ${facility.name} 95.5 L mineral receipt`,
  ])
})

test.each([
  ['90', false],
  ['89.99', true],
  ['110', false],
  ['110.01', true],
  ['0', true],
])('100 L shipped and %s L received: differs is %s', async (value, differs) => {
  const pickup = await received(yard, await aLoad('100'), litres(value))
  expect(pickup.stage).toBe(differs ? 'differs' : 'signed-out')
  expect(pickup.difference?.exceeds).toBe(differs)
})

test('a line that differs is not hidden by a total that does not', async () => {
  const pickup = await received(yard, await aLoad('100', '20'), litres('103'), litres('17'))
  expect(pickup.stage).toBe('differs')
  expect(pickup.lines.map(({ differencePercent }) => differencePercent)).toEqual(['3', '-15'])
  expect(pickup.difference).toMatchObject({ litres: '0', percent: '0', exceeds: true })
})

test('one filter missing differs, whatever the rule in per cent; a mass nobody weighed here does not', async () => {
  const same = await signedOut(yard, [await aBinOfFilters(yard, 40)])
  const weighed = await received(yard, same, { ...kilograms('31'), pieces: 40 })
  expect(weighed.stage).toBe('signed-out')
  const short = await signedOut(yard, [await aBinOfFilters(yard, 40)])
  const pickup = await received(yard, short, { ...kilograms('31'), pieces: 39 })
  expect(pickup.stage).toBe('differs')
})

test('a weighed fluid becomes litres by the density of its stream, which is kept, and is an estimate', async () => {
  const pickup = await received(yard, await aLoad('100'), kilograms('84'))
  const posted = await asService(product.opened.db, (tx) =>
    tx
      .select()
      .from(movements)
      .where(and(eq(movements.pickupId, pickup.id), eq(movements.reason, 'receipt'))),
  )
  expect(posted).toMatchObject([{ isEstimate: true, enteredValue: '84', enteredUnit: 'kg' }])
  expect(pickup.lines[0]?.received).toMatchObject({
    quantity: kilograms('84'),
    litres: '96',
    densityUsed: '0.875',
  })
  expect(pickup.stage).toBe('signed-out')
})

test('a weighed fluid without a density on record is refused at its unit', async () => {
  const load = await signedOut(yard, [await aFilledDrum(yard, litres('100'), 'water')])
  const body = receiveBody(load, [kilograms('100')])
  const reply = await yard.officer.post(`/pickups/${load.id}/received`, body)
  expect(reply.status).toBe(400)
  expect(reply.body.fields).toMatchObject([{ path: 'lines.0.quantity.unit', code: 'no-density' }])
})

test('entered again, the old receipt is mirrored and the new one stands', async () => {
  const load = await aLoad('100')
  const before = await linesSo()
  const first = await received(yard, load, litres('37.9'))
  expect(first.stage).toBe('differs')
  const second = await received(yard, first, litres('100'))
  expect(second).toMatchObject({ stage: 'signed-out', difference: { litres: '0', percent: '0' } })
  const { hauler, facility } = yard
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${hauler.name} > ${facility.name} 37.9 L mineral receipt`,
    `${facility.name} > ${hauler.name} 37.9 L mineral undoes receipt`,
    `${hauler.name} > ${facility.name} 100 L mineral receipt`,
  ])
})

test('every line must be spoken of, once, and the day lies between leaving and today', async () => {
  const load = await aLoad('100', '20')
  const refused = async (lines: { value: string; unit: string }[], more: object = {}) => {
    const body = receiveBody({ ...load, lines: load.lines.slice(0, lines.length) }, lines, more)
    const reply = await yard.officer.post(`/pickups/${load.id}/received`, body)
    return [reply.status, reply.body.fields[0].path, reply.body.fields[0].code]
  }
  const both = [litres('100'), litres('20')]
  expect(await refused([litres('100')])).toEqual([400, 'lines', 'line-missing'])
  expect(await refused(both, { receivedOn: '2025-03-11' })).toEqual([
    400,
    'receivedOn',
    'in-future',
  ])
  expect(await refused(both, { receivedOn: '2025-03-09' })).toEqual([
    400,
    'receivedOn',
    'before-shipped',
  ])
  expect(await refused([litres('100'), kilograms('-1')])).toEqual([
    400,
    'lines.1.quantity.value',
    'not-a-positive-decimal',
  ])
})

test('settling within the rule posts what is left over, and then nothing stands with the hauler', async () => {
  const pickup = await received(yard, await aLoad('100'), litres('95.5'))
  const before = await linesSo()
  const settled: Pickup = expectDone(await settle(pickup))
  expect(settled).toMatchObject({
    stage: 'settled',
    settled: { cause: 'within-rule', by: { id: yard.officer.id } },
  })
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${yard.hauler.name} > adjustment 4.5 L mineral adjustment`,
  ])
})

test('more received than shipped comes from adjustment', async () => {
  const pickup = await received(yard, await aLoad('100'), litres('104'))
  const before = await linesSo()
  expectDone(await settle(pickup))
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `adjustment > ${yard.hauler.name} 4 L mineral adjustment`,
  ])
})

test('pieces and kilograms are adjusted each in its own direction', async () => {
  const load = await signedOut(yard, [await aBinOfFilters(yard, 40)])
  const pickup = await received(yard, load, { ...kilograms('31'), pieces: 39 })
  const before = await linesSo()
  expectDone(await settle(pickup, { cause: 'container-miscount', note: 'counted again' }))
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${yard.hauler.name} > adjustment 1 pieces filters adjustment`,
    `adjustment > ${yard.hauler.name} 31 kg filters adjustment`,
  ])
})

test('what differs is settled with a cause and a note only', async () => {
  const pickup = await received(yard, await aLoad('100'), litres('86.6'))
  const refused = async (more: object) => {
    const reply = await settle(pickup, more)
    return [reply.status, reply.body.code, reply.body.fields[0].path]
  }
  expect(await refused({ note: 'looked at' })).toEqual([400, 'cause-required', 'cause'])
  expect(await refused({ cause: 'free-water-decanted' })).toEqual([400, 'cause-required', 'note'])
  const settled: Pickup = expectDone(
    await settle(pickup, { cause: 'free-water-decanted', note: 'lab slip 4' }),
  )
  expect(settled.settled).toMatchObject({ cause: 'free-water-decanted', note: 'lab slip 4' })
})

test('nothing is settled before it was received, received before it left, or after it was settled', async () => {
  const load = await aLoad('100')
  const early = await settle(load)
  expect([early.status, early.body.code]).toEqual([409, 'nothing-received'])
  const plan = await planned(yard, [await aFilledDrum(yard, litres('10'))])
  const unsent = await yard.officer.post(
    `/pickups/${plan.id}/received`,
    receiveBody(plan, [litres('10')]),
  )
  expect([unsent.status, unsent.body.code]).toEqual([409, 'wrong-stage'])
  const settled: Pickup = expectDone(await settle(await received(yard, load, litres('100'))))
  const late = await yard.officer.post(
    `/pickups/${load.id}/received`,
    receiveBody(settled, [litres('99')]),
  )
  expect([late.status, late.body.code]).toEqual([409, 'wrong-stage'])
})

test('two officers who settle one pickup: one does, and the difference is posted once', async () => {
  const second = await signInAs(product, yard.site.organisation, 'officer', [yard.site.id])
  const pickup = await received(yard, await aLoad('100'), litres('95'))
  const before = await linesSo()
  const replies = await Promise.all([settle(pickup), settle(pickup, {}, second)])
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 409])
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${yard.hauler.name} > adjustment 5 L mineral adjustment`,
  ])
})

test('two receipts entered at once: one stands, none twice', async () => {
  const load = await aLoad('100')
  const before = await linesSo()
  const replies = await Promise.all(
    ['98', '97'].map((value) =>
      yard.officer.post(`/pickups/${load.id}/received`, receiveBody(load, [litres(value)])),
    ),
  )
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 409])
  expect(await bookLines(product, yard.site.id, before)).toHaveLength(1)
})

test('a receipt of the day it left does not come before it left', async () => {
  product.clock.now = new Date('2025-03-10T23:00:00Z')
  const load = await aLoad('100')
  product.clock.now = new Date('2025-03-11T03:00:00Z')
  await received(yard, load, litres('100'))
  const [left, arrived] = await asService(product.opened.db, (tx) =>
    tx
      .select()
      .from(movements)
      .where(eq(movements.pickupId, load.id))
      .orderBy(asc(movements.lineNo)),
  )
  expect(left?.occurredAt).toEqual(new Date('2025-03-10T23:00:00Z'))
  expect(arrived).toMatchObject({ occurredAt: left?.occurredAt, occurredOn: '2025-03-10' })
})
