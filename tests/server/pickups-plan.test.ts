import { randomUUID } from 'node:crypto'
import request from 'supertest'
import { bookFindings, bookLines } from '../helpers/book'
import { aContainer, aParty, aSite, signInAs } from '../helpers/factories'
import {
  aBinOfAbsorbents,
  aBinOfFilters,
  aFilledDrum,
  aPickupYard,
  planBody,
  planned,
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
afterAll(() => product.close())

test('a line without a quantity takes what the book holds, shown in the unit of the site', async () => {
  const drum = await aFilledDrum(yard, { value: '10.25', unit: 'gal_us' })
  const { lines, stage, number, version, missing } = await planned(yard, [drum])
  expect({ stage, number, version, missing }).toEqual({
    stage: 'planned',
    number: null,
    version: 1,
    missing: [],
  })
  expect(lines[0]).toMatchObject({
    shipped: { value: '10.25', unit: 'gal_us' },
    shippedLitres: '38.800470786',
    bookLitres: '38.800470786',
    massIsEstimate: true,
    densityUsed: '0.875',
    massKilograms: '33.95041193775',
  })
})

test('litres that recur in gallons are shown to a thousandth and shipped to the last digit', async () => {
  const drum = await aFilledDrum(yard, { value: '100', unit: 'L' })
  const before = (await bookLines(product, yard.site.id)).length
  const pickup = await signedOut(yard, [drum])
  expect(pickup.lines[0]).toMatchObject({
    shipped: { value: '26.417', unit: 'gal_us' },
    shippedLitres: '100',
    bookLitres: '0',
  })
  expect(await bookLines(product, yard.site.id, before)).toEqual([
    `${drum.code} > ${yard.hauler.name} 100 L mineral shipment`,
  ])
  expect(await bookFindings(product)).toEqual([])
})

test('a quantity that was typed is shipped as typed, whatever the book holds', async () => {
  const drum = await aFilledDrum(yard, { value: '40', unit: 'gal_us' })
  const lines = [
    { id: randomUUID(), containerId: drum.id, quantity: { value: '38.50', unit: 'gal_us' } },
  ]
  const pickup = await planned(yard, [], { lines })
  expect(pickup.lines[0]).toMatchObject({
    shipped: { value: '38.50', unit: 'gal_us' },
    shippedLitres: '145.738353684',
  })
})

test('solids go by the piece and by the kilogram', async () => {
  const filters = await aBinOfFilters(yard, 12)
  const absorbents = await aBinOfAbsorbents(yard, '6.4')
  const { lines } = await planned(yard, [filters, absorbents])
  expect(
    lines.map(({ shipped, pieces, massKilograms }) => [shipped, pieces, massKilograms]),
  ).toEqual([
    [{ value: '0', unit: 'kg' }, 12, null],
    [{ value: '6.4', unit: 'kg' }, 0, '6.4'],
  ])
})

test.each([
  ['a fluid in kilograms', { value: '10', unit: 'kg' }],
  ['a fluid in pounds', { value: '10', unit: 'lb_avdp' }],
])('%s is refused at its unit', async (_, quantity) => {
  const drum = await aFilledDrum(yard, { value: '10', unit: 'gal_us' })
  const lines = [{ id: randomUUID(), containerId: drum.id, quantity }]
  const reply = await yard.officer.post('/pickups', planBody(yard, [], { lines }))
  expect(reply.status).toBe(400)
  expect(reply.body.fields).toMatchObject([
    { path: 'lines.0.quantity.unit', code: 'unit-does-not-fit' },
  ])
})

test('the same plan sent again is answered as before, another with its id is refused', async () => {
  const body = planBody(yard, [await aFilledDrum(yard, { value: '10', unit: 'gal_us' })])
  expect((await yard.officer.post('/pickups', body)).status).toBe(201)
  const again = await yard.officer.post('/pickups', body)
  expect([again.status, again.body.lines.length]).toEqual([200, 1])
  const other = await yard.officer.post('/pickups', { ...body, plannedOn: '2025-03-12' })
  expect([other.status, other.body.code]).toEqual([409, 'id-reused'])
})

test.each([
  ['no lines', { lines: [] }, 'lines'],
  ['a day that is none', { plannedOn: '2025-02-30' }, 'plannedOn'],
  ['a hauler nobody knows', { haulerId: randomUUID() }, 'haulerId'],
  [
    'a container nobody knows',
    { lines: [{ id: randomUUID(), containerId: randomUUID() }] },
    'lines.0.containerId',
  ],
  ['a field nobody knows', { colour: 'blue' }, 'colour'],
])('%s is refused with the field named', async (_, more, path) => {
  const reply = await yard.officer.post(
    '/pickups',
    planBody(yard, [await aContainer(yard.site)], more),
  )
  expect(reply.status).toBe(400)
  expect(reply.body.fields.map((field: { path: string }) => field.path)).toEqual([path])
})

test('a facility is no hauler, a container twice is one too many, another site’s is not this one’s', async () => {
  const drum = await aContainer(yard.site)
  const elsewhere = await aContainer(await aSite(product, { organisation: yard.site.organisation }))
  const refused = async (containers: { id: string; code: string }[], more: object = {}) => {
    const reply = await yard.officer.post('/pickups', planBody(yard, containers, more))
    return [reply.status, reply.body.code, reply.body.fields[0].path]
  }
  expect(await refused([drum], { haulerId: yard.facility.id })).toEqual([
    400,
    'fields-refused',
    'haulerId',
  ])
  expect(await refused([drum, drum])).toEqual([400, 'fields-refused', 'lines.1.containerId'])
  expect(await refused([drum, elsewhere])).toEqual([400, 'wrong-site', 'lines.1.containerId'])
})

test('what an issue waits for is listed: parties, contents, holds and other pickups', async () => {
  const empty = await aContainer(yard.site)
  const held = await aFilledDrum(yard, { value: '10', unit: 'gal_us' })
  const hold = { id: randomUUID(), reason: 'solvent smell', halogensPpm: null }
  expect((await yard.officer.post(`/containers/${held.id}/hold`, hold)).status).toBeLessThan(300)
  const unproven = await aParty(yard.site.organisation, 'hauler')
  const plan = async (more: object) =>
    (await planned(yard, [empty, held], more)).missing.map(({ code, facts }) => [
      code,
      facts.container ?? facts.party,
    ])
  expect(await plan({ haulerId: null, facilityId: null })).toEqual([
    ['no-hauler', undefined],
    ['no-facility', undefined],
    ['nothing-in-container', empty.code],
    ['container-held', held.code],
  ])
  expect(await plan({ haulerId: unproven.id })).toContainEqual(['permit-missing', unproven.name])
  expect(await plan({ plannedOn: '2026-02-01' })).toContainEqual([
    'permit-expired',
    yard.hauler.name,
  ])
})

test('a plan is changed as a whole, and only from the version that was read', async () => {
  const [one, two] = [
    await aFilledDrum(yard, { value: '10', unit: 'gal_us' }),
    await aFilledDrum(yard, { value: '20', unit: 'gal_us' }),
  ]
  const before = await planned(yard, [one], { note: 'first' })
  const { id: _, siteId: __, ...plan } = planBody(yard, [two], { orderNumber: 'PO-7' })
  const change = (version: number) =>
    yard.officer.put(`/pickups/${before.id}`, { ...plan, version }, '')
  const changed = await change(1)
  expect(changed.body).toMatchObject({
    version: 2,
    note: '',
    orderNumber: 'PO-7',
    lines: [{ containerCode: two.code }],
  })
  const late = await change(1)
  expect([late.status, late.body.code]).toEqual([409, 'changed-under-you'])
})

test('lists by stage are full pages, and a return is due after the last day at the site', async () => {
  const own = await aPickupYard(product)
  const before = product.clock.now
  const left = await signedOut(own, [await aFilledDrum(own, { value: '10', unit: 'gal_us' })])
  product.clock.now = new Date('2025-03-10T18:01:00Z')
  const waiting = await planned(own, [await aContainer(own.site)])
  expect(left.returnDueOn).toBe('2025-04-09')
  const stages = async (stage: string) =>
    (await own.officer.get(`/pickups?siteId=${own.site.id}&stage=${stage}`)).body.rows.map(
      (row: { id: string; stage: string }) => [row.id, row.stage],
    )
  expect(await stages('planned')).toEqual([[waiting.id, 'planned']])
  // 23:30 on 9 April in Chicago, then half past midnight.
  product.clock.now = new Date('2025-04-10T04:30:00Z')
  expect(await stages('return-due')).toEqual([])
  expect(await stages('signed-out')).toEqual([[left.id, 'signed-out']])
  product.clock.now = new Date('2025-04-10T05:30:00Z')
  expect(await stages('return-due')).toEqual([[left.id, 'return-due']])
  expect(await stages('signed-out')).toEqual([])
  product.clock.now = before
  const all = await own.officer.get('/pickups?limit=1')
  expect([all.body.rows.length, all.body.rows[0].id]).toEqual([1, waiting.id])
  const rest = await own.officer.get(`/pickups?limit=1&cursor=${all.body.next}`)
  expect([rest.body.rows[0].id, rest.body.next]).toEqual([left.id, null])
})

test('who may not plan is told so; what is elsewhere does not exist', async () => {
  const { organisation } = yard.site
  const pickup = await planned(yard, [await aContainer(yard.site)])
  const body = planBody(yard, [await aContainer(yard.site)])
  const technician = await signInAs(product, organisation, 'technician', [yard.site.id])
  const auditor = await signInAs(product, organisation, 'auditor')
  const otherSite = await aSite(product, { organisation })
  const otherOfficer = await signInAs(product, organisation, 'officer', [otherSite.id])
  const stranger = (await aPickupYard(product)).officer
  expect((await request(product.app).post('/api/pickups').send(body)).status).toBe(401)
  expect((await technician.post('/pickups', body)).status).toBe(403)
  expect((await auditor.post('/pickups', body)).status).toBe(403)
  expect((await otherOfficer.post('/pickups', body)).status).toBe(404)
  expect((await auditor.get(`/pickups/${pickup.id}`)).status).toBe(200)
  expect((await otherOfficer.get(`/pickups/${pickup.id}`)).status).toBe(404)
  expect((await stranger.get(`/pickups/${pickup.id}`)).status).toBe(404)
  expect((await otherOfficer.get('/pickups')).body.rows).toEqual([])
  const issue = await stranger.post(`/pickups/${pickup.id}/issue`, { version: 1 })
  expect(issue.status).toBe(404)
})
