import { randomUUID } from 'node:crypto'
import type { Response } from 'supertest'
import { bookFindings, bookLines } from '../helpers/book'
import {
  aContainer,
  aMachine,
  anOrganisation,
  aSite,
  drainBody,
  signInAs,
  type Member,
  type TestSite,
} from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

/** Requests that run into each other. On PostgreSQL they truly do; on PGlite they take turns at the door. */
let product: TestApp
let site: TestSite
let ines: Member
let omar: Member

beforeAll(async () => {
  product = await testApp()
})
beforeEach(async () => {
  site = await aSite(product)
  ines = await signInAs(product, site.organisation, 'technician', [site.id])
  omar = await signInAs(product, site.organisation, 'officer', [site.id])
})
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

const times = <T>(count: number, make: (index: number) => T): T[] =>
  Array.from({ length: count }, (_, index) => make(index))
const statusesOf = (replies: Response[]) => replies.map(({ status }) => status).sort()
const gallons = (value: string) => ({ volume: { value, unit: 'gal_us' } })
const unmeasured = () => aMachine(site, { reservoir: null, system: null })

function transfer(from: { id: string }, to: { id: string }, litres = '1') {
  return {
    id: randomUUID(),
    siteId: site.id,
    fromContainerId: from.id,
    toContainerId: to.id,
    volume: { value: litres, unit: 'L' },
    method: 'pump-meter',
    occurredAt: '2025-03-10T16:00:00Z',
  }
}

test('two technicians at one drum: both are saved, nothing is lost, and the book decides who overfilled', async () => {
  const container = await aContainer(site)
  const machines = await Promise.all(times(12, () => unmeasured()))
  const replies = await Promise.all(
    machines.map((machine, index) =>
      (index % 2 === 0 ? ines : omar).post(
        '/drains',
        drainBody(site, { machine, container }, gallons('5')),
      ),
    ),
  )
  expect(statusesOf(replies)).toEqual(times(12, () => 201))
  const read = await ines.get(`/containers/${container.id}`)
  expect(read.body.litres).toBe('227.12470704')
  // 49.5 gal fit: of twelve times 5, whoever is tenth, eleventh and twelfth is told.
  const marked = replies.filter(({ body }) => body.needsLook)
  expect(
    marked
      .map(({ body }) => body.marks[0].details.overLitres)
      .sort((a, b) => Number(a) - Number(b)),
  ).toEqual(['1.892705892', '20.819764812', '39.746823732'])
  expect(replies.map(({ body }) => body.number).sort()).toEqual(
    times(12, (index) => `D-25-00${String(index + 1).padStart(2, '0')}`),
  )
})

test('one drain sent eight times at once stands once, and everyone gets the same answer', async () => {
  const its = { machine: await aMachine(site), container: await aContainer(site) }
  const body = drainBody(site, its)
  const replies = await Promise.all(times(8, () => ines.post('/drains', body)))
  expect(statusesOf(replies)).toEqual([...times(7, () => 200), 201])
  for (const reply of replies) expect(reply.body).toEqual(replies[0]?.body)
  expect(await bookLines(product, site.id)).toHaveLength(1)
})

test('one transfer sent eight times at once moves once', async () => {
  const [from, to] = [await aContainer(site), await aContainer(site)]
  const body = transfer(from, to)
  const replies = await Promise.all(times(8, () => ines.post('/transfers', body)))
  expect(statusesOf(replies)).toEqual([...times(7, () => 200), 201])
  expect(await bookLines(product, site.id)).toHaveLength(1)
})

test('of five amendments of one revision one holds, the others are told', async () => {
  const its = { machine: await unmeasured(), container: await aContainer(site) }
  const { id, siteId: _, ...facts } = drainBody(site, its)
  await ines.post('/drains', { ...facts, id, siteId: site.id })
  const reason = { code: 'mistyped', text: '' }
  const replies = await Promise.all(
    times(5, (index) =>
      (index % 2 === 0 ? ines : omar).post(`/drains/${id}/amend`, {
        ...facts,
        ...gallons(String(index + 1)),
        expectedRevision: 1,
        reason,
      }),
    ),
  )
  expect(statusesOf(replies)).toEqual([200, 409, 409, 409, 409])
  const refused = replies.filter(({ status }) => status === 409)
  expect(refused.map(({ body }) => body.code)).toEqual(times(4, () => 'changed-under-you'))
  expect(await bookLines(product, site.id)).toHaveLength(3)
})

test('amended and struck out at once: one of the two happened', async () => {
  const its = { machine: await unmeasured(), container: await aContainer(site) }
  const { id, siteId: _, ...facts } = drainBody(site, its)
  await ines.post('/drains', { ...facts, id, siteId: site.id })
  const [amended, struck] = await Promise.all([
    ines.post(`/drains/${id}/amend`, {
      ...facts,
      ...gallons('2'),
      expectedRevision: 1,
      reason: { code: 'mistyped', text: '' },
    }),
    omar.post(`/drains/${id}/strike`, { expectedRevision: 1, reason: 'Typed twice' }),
  ])
  expect(statusesOf([amended, struck])).toEqual([200, 409])
  const litres = (await ines.get(`/containers/${its.container.id}`)).body.litres
  expect(litres).toBe(amended.status === 200 ? '7.570823568' : '0')
})

test('transfers that cross each other end, and sum', async () => {
  const [one, other] = [await aContainer(site), await aContainer(site)]
  const replies = await Promise.all(
    times(12, (index) =>
      ines.post(
        '/transfers',
        index % 2 === 0 ? transfer(one, other, '3') : transfer(other, one, '2'),
      ),
    ),
  )
  expect(statusesOf(replies)).toEqual(times(12, () => 201))
  const litres = async ({ id }: { id: string }) => (await ines.get(`/containers/${id}`)).body.litres
  expect([await litres(one), await litres(other)]).toEqual(['-6', '6'])
})

test('one hold sent four times at once is one hold; of four holds one is taken', async () => {
  const [same, many] = [await aContainer(site), await aContainer(site)]
  const id = randomUUID()
  const hold = (container: { id: string }, holdId: string) =>
    ines.post(`/containers/${container.id}/hold`, { id: holdId, reason: 'Smells of solvent' })
  expect(statusesOf(await Promise.all(times(4, () => hold(same, id))))).toEqual(times(4, () => 200))
  const others = await Promise.all(times(4, () => hold(many, randomUUID())))
  expect(statusesOf(others)).toEqual([200, 409, 409, 409])
})

test('nothing leaves a container after it is held', async () => {
  const [from, to] = [await aContainer(site), await aContainer(site)]
  const [held, ...moved] = await Promise.all([
    ines.post(`/containers/${from.id}/hold`, { id: randomUUID(), reason: 'Tested positive' }),
    ...times(6, () => ines.post('/transfers', transfer(from, to))),
  ])
  expect(held.status).toBe(200)
  const taken = moved.filter(({ status }) => status === 201)
  const refused = moved.filter(({ body }) => body.code === 'container-held')
  expect(taken.length + refused.length).toBe(6)
  expect(await bookLines(product, site.id)).toHaveLength(taken.length)
})

test('a container that is retired while someone pours is empty, or the drain says so', async () => {
  const machine = await aMachine(site)
  for (let round = 0; round < 4; round += 1) {
    const container = await aContainer(site)
    const [retired, poured] = await Promise.all([
      site.organisation.administrator.post(`/container-records/${container.id}/retire`),
      ines.post('/drains', drainBody(site, { machine, container })),
    ])
    expect(poured.status).toBe(201)
    const codes = poured.body.marks.map(({ code }: { code: string }) => code)
    if (retired.status === 200) expect(codes).toContain('container-retired')
    else expect(retired.body.code).toBe('still-in-use')
  }
})

test('sites of one organisation share the numbers of drains without a gap or a double', async () => {
  const organisation = await anOrganisation(product)
  const sites = [await aSite(product, { organisation }), await aSite(product, { organisation })]
  const bodies = await Promise.all(
    sites.map(async (of) => {
      const its = { machine: await aMachine(of), container: await aContainer(of) }
      return times(5, () => drainBody(of, its, gallons('1')))
    }),
  )
  const replies = await Promise.all(
    bodies.flat().map((body) => organisation.administrator.post('/drains', body)),
  )
  expect(replies.map(({ body }) => body.number).sort()).toEqual(
    times(10, (index) => `D-25-00${String(index + 1).padStart(2, '0')}`),
  )
})

test('while drains are saved, checkBook sees one moment and finds nothing', async () => {
  const its = { machine: await unmeasured(), container: await aContainer(site) }
  const saving = times(10, () => ines.post('/drains', drainBody(site, its, gallons('1'))))
  const checks = times(5, () => bookFindings(product))
  const replies = await Promise.all(saving)
  expect(await Promise.all(checks)).toEqual(times(5, () => []))
  expect(statusesOf(replies)).toEqual(times(10, () => 201))
})
