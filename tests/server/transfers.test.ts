import { randomUUID } from 'node:crypto'
import request from 'supertest'
import { bookFindings, bookLines } from '../helpers/book'
import {
  aContainer,
  aMachine,
  aSite,
  drainBody,
  signInAs,
  type Member,
  type TestSite,
} from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let site: TestSite
let technician: Member

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
  site = await aSite(product)
  technician = await signInAs(product, site.organisation, 'technician', [site.id])
})
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

type Place = { id: string; code: string }

const transferBody = (from: Place, to: Place, more: Record<string, unknown> = {}) => ({
  id: randomUUID(),
  siteId: site.id,
  fromContainerId: from.id,
  toContainerId: to.id,
  volume: { value: '40', unit: 'L' },
  method: 'pump-meter',
  occurredAt: '2025-03-10T16:00:00Z',
  ...more,
})

/** A drum with so many litres in it. */
async function filled(litres: string) {
  const container = await aContainer(site)
  const machine = await aMachine(site, { reservoir: null, system: null })
  const volume = { value: litres, unit: 'L' }
  await technician.post('/drains', drainBody(site, { machine, container }, { volume }))
  return container
}

/** A tote with room for anything. */
const tote = () => aContainer(site, { type: 'tote', capacity: { value: '1000', unit: 'L' } })
const litresIn = async ({ id }: Place) => (await technician.get(`/containers/${id}`)).body.litres
const linesSo = async () => (await bookLines(product, site.id)).length

test('a transfer moves exact litres from one container to the other', async () => {
  const [from, to] = [await filled('150'), await tote()]
  const before = await linesSo()
  const volume = { value: '10.5', unit: 'gal_us' }
  const body = transferBody(from, to, { volume, note: 'van' })
  const reply = await technician.post('/transfers', body)
  expect(reply.status).toBe(201)
  expect(reply.body).toMatchObject({
    id: body.id,
    from: { code: from.code },
    to: { code: to.code },
    volume,
    litres: '39.746823732',
  })
  expect(await bookLines(product, site.id, before)).toEqual([
    `${from.code} > ${to.code} 39.746823732 L mineral transfer`,
  ])
  expect([await litresIn(from), await litresIn(to)]).toEqual(['110.253176268', '39.746823732'])
})

test('there and back again is nothing, to the last digit', async () => {
  const [one, other] = [await filled('100'), await tote()]
  const volume = { value: '0.33333', unit: 'gill_imp' }
  for (const [from, to] of [
    [one, other],
    [other, one],
  ] as const) {
    expect((await technician.post('/transfers', transferBody(from, to, { volume }))).status).toBe(
      201,
    )
  }
  expect([await litresIn(one), await litresIn(other)]).toEqual(['100', '0'])
})

test('more than the book says is in it is taken, and marked below zero once', async () => {
  const [from, to] = [await filled('30'), await tote()]
  await technician.post('/transfers', transferBody(from, to))
  await technician.post('/transfers', transferBody(from, to))
  const read = await technician.get(`/containers/${from.id}`)
  expect(read.body).toMatchObject({ litres: '-50', level: 'below-zero' })
  expect(read.body.marks).toMatchObject([
    { code: 'balance-below-zero', details: { container: from.code, bookLitres: '-10' } },
  ])
})

test('over the line, or into a container of another stream, is taken and marked', async () => {
  const [from, to] = [await filled('150'), await aContainer(site, { stream: 'ester' })]
  const pail = await aContainer(site, { type: 'pail', capacity: { value: '20', unit: 'L' } })
  await technician.post('/transfers', transferBody(from, to))
  await technician.post('/transfers', transferBody(from, pail))
  const marksOf = async ({ id }: Place) => (await technician.get(`/containers/${id}`)).body.marks
  expect(await marksOf(to)).toMatchObject([
    { code: 'wrong-stream', details: { containerStream: 'Used ester fluid' } },
  ])
  expect(await marksOf(pail)).toMatchObject([
    { code: 'over-fill-line', details: { overLitres: '22', roomLitres: '18' } },
  ])
})

describe('the same transfer sent again', () => {
  test('is answered as the first time, and moves nothing more', async () => {
    const body = transferBody(await filled('150'), await tote())
    const first = await technician.post('/transfers', body)
    const before = await linesSo()
    const again = await technician.post('/transfers', body)
    expect([first.status, again.status]).toEqual([201, 200])
    expect(again.body).toEqual(first.body)
    expect(await linesSo()).toBe(before)
  })

  test('with other content, or by another person, is refused', async () => {
    const body = transferBody(await filled('150'), await tote())
    await technician.post('/transfers', body)
    const colleague = await signInAs(product, site.organisation, 'technician', [site.id])
    for (const reply of [
      await technician.post('/transfers', { ...body, note: 'other' }),
      await colleague.post('/transfers', body),
    ]) {
      expect([reply.status, reply.body.code]).toEqual([409, 'id-reused'])
    }
  })
})

describe('a transfer is refused, and moves nothing', () => {
  async function refusal(body: object, by = technician) {
    const before = await linesSo()
    const reply = await by.post('/transfers', body)
    expect(await linesSo()).toBe(before)
    const paths = (reply.body.fields ?? []).map(({ path }: { path: string }) => path)
    return [reply.status, reply.body.code, ...paths]
  }

  test('from or into a held container, which is named with its reason', async () => {
    const [held, other] = [await filled('100'), await tote()]
    await technician.post(`/containers/${held.id}/hold`, {
      id: randomUUID(),
      reason: 'Water in it',
    })
    expect(await refusal(transferBody(held, other))).toEqual([409, 'container-held'])
    expect(await refusal(transferBody(other, held))).toEqual([409, 'container-held'])
    const told = await technician.post('/transfers', transferBody(held, other))
    expect(told.body.facts).toEqual({ container: held.code, reason: 'Water in it' })
  })

  test('into a retired container', async () => {
    const [from, retired] = [await filled('100'), await tote()]
    await site.organisation.administrator.post(`/container-records/${retired.id}/retire`)
    expect(await refusal(transferBody(from, retired))).toEqual([409, 'retired', 'toContainerId'])
  })

  test('into itself', async () => {
    const one = await filled('100')
    expect(await refusal(transferBody(one, one))).toEqual([400, 'same-container', 'toContainerId'])
  })

  test('to another site, or to what is not there', async () => {
    const from = await filled('100')
    const other = await aContainer(await aSite(product, { organisation: site.organisation }))
    const theirs = await aContainer(await aSite(product))
    expect(await refusal(transferBody(from, other))).toEqual([400, 'wrong-site', 'toContainerId'])
    for (const nowhere of [theirs, { id: randomUUID(), code: '' }]) {
      expect(await refusal(transferBody(from, nowhere))).toEqual([
        400,
        'fields-refused',
        'toContainerId',
      ])
    }
  })

  test.each([
    ['in a time to come', { occurredAt: '2025-03-10T18:05:01Z' }, 'time-in-future', 'occurredAt'],
    ['of nothing', { volume: { value: '0', unit: 'L' } }, 'fields-refused', 'volume.value'],
    ['in kilograms', { volume: { value: '1', unit: 'kg' } }, 'fields-refused', 'volume.unit'],
    ['by guess and hope', { method: 'guess' }, 'fields-refused', 'method'],
  ])('%s', async (_, more, code, path) => {
    expect(await refusal(transferBody(await filled('100'), await tote(), more))).toEqual([
      400,
      code,
      path,
    ])
  })

  test('by an auditor, by a technician of another site, by nobody', async () => {
    const body = transferBody(await filled('100'), await tote())
    const elsewhere = await aSite(product, { organisation: site.organisation })
    const auditor = await signInAs(product, site.organisation, 'auditor')
    const colleague = await signInAs(product, site.organisation, 'technician', [elsewhere.id])
    expect(await refusal(body, auditor)).toEqual([403, 'not-allowed'])
    expect(await refusal(body, colleague)).toEqual([404, 'not-found'])
    const nobody = await request(product.app).post('/api/transfers').send(body)
    expect([nobody.status, nobody.body.code]).toEqual([401, 'sign-in-required'])
  })
})
