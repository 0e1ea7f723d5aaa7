import { bookFindings } from '../helpers/book'
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

beforeAll(async () => {
  product = await testApp()
})
beforeEach(() => (product.clock.now = new Date('2025-03-11T04:30:00Z'))) // 23:30 of the 10th in Chicago
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

async function aYard() {
  const site = await aSite(product)
  const technician = await signInAs(product, site.organisation, 'technician', [site.id])
  return { site, technician, machine: await aMachine(site), container: await aContainer(site) }
}

async function pour(
  by: Member,
  site: TestSite,
  its: Parameters<typeof drainBody>[1],
  occurredAt: string,
  more: Record<string, unknown> = {},
) {
  const volume = { value: '4', unit: 'gal_us' }
  const body = drainBody(site, its, { occurredAt, volume, ...more })
  const reply = await by.post('/drains', body)
  expect(reply.status).toBe(201)
  return body
}

test('a new site has an empty yard', async () => {
  const site = await aSite(product)
  const { body } = await site.organisation.administrator.get(`/yard?siteId=${site.id}`)
  expect(body).toEqual({
    today: '2025-03-10',
    containers: [],
    marks: [],
    openFlags: 0,
    latestDrains: [],
    drainsToday: 0,
    litresToday: '0',
    pickups: [],
    lastMachines: [],
  })
})

test('today is the day of the site: what was drained in it is counted, struck out or not yet today is not', async () => {
  const { site, technician, ...its } = await aYard()
  await pour(technician, site, its, '2025-03-10T04:59:00Z') // the 9th
  await pour(technician, site, its, '2025-03-10T05:00:00Z')
  await pour(technician, site, its, '2025-03-11T04:29:00Z')
  const struck = await pour(technician, site, its, '2025-03-10T20:00:00Z')
  await technician.post(`/drains/${struck.id}/strike`, { expectedRevision: 1, reason: 'No' })
  const { body } = await technician.get(`/yard?siteId=${site.id}`)
  expect(body).toMatchObject({
    today: '2025-03-10',
    drainsToday: 2,
    litresToday: '30.283294272',
  })
  product.clock.now = new Date('2025-03-11T05:00:00Z')
  const tomorrow = await technician.get(`/yard?siteId=${site.id}`)
  expect(tomorrow.body).toMatchObject({ today: '2025-03-11', drainsToday: 0, litresToday: '0' })
})

test('shows open marks, the latest eight drains, and the machines this person drained last', async () => {
  const { site, technician, container } = await aYard()
  const colleague = await signInAs(product, site.organisation, 'technician', [site.id])
  const ester = await aContainer(site, { stream: 'ester' })
  const machines = [
    await aMachine(site),
    await aMachine(site),
    await aMachine(site),
    await aMachine(site),
  ]
  const poured: string[] = []
  for (let count = 0; count < 10; count += 1) {
    const machine = machines[count % 4] as { id: string }
    product.clock.now = new Date(Date.UTC(2025, 2, 10, 12, count * 10 + 1))
    const at = new Date(Date.UTC(2025, 2, 10, 12, count * 10)).toISOString()
    const { id } = await pour(technician, site, { machine, container }, at, {
      volume: { value: String(count + 1), unit: 'L' },
    })
    poured.unshift(id)
  }
  product.clock.now = new Date('2025-03-10T15:00:00Z')
  const [first] = machines
  await pour(
    colleague,
    site,
    { machine: first as { id: string }, container: ester },
    '2025-03-01T12:00:00Z',
  )
  const { body } = await technician.get(`/yard?siteId=${site.id}`)
  expect(body.latestDrains.map(({ id }: { id: string }) => id)).toEqual(poured.slice(0, 8))
  expect(body.marks).toMatchObject([{ code: 'wrong-stream', containerCode: ester.code }])
  // The tenth drain was of the second machine, the ninth of the first, the eighth of the fourth.
  expect(body.lastMachines).toEqual([machines[1]?.id, machines[0]?.id, machines[3]?.id])
  const theirs = await colleague.get(`/yard?siteId=${site.id}`)
  expect(theirs.body.lastMachines).toEqual([first?.id])
})

test('is not shown to an auditor, nor to anyone whose site it is not', async () => {
  const { site } = await aYard()
  const auditor = await signInAs(product, site.organisation, 'auditor')
  expect((await auditor.get(`/yard?siteId=${site.id}`)).body.code).toBe('not-allowed')
  const elsewhere = await signInAs(product, site.organisation, 'technician', [])
  expect((await elsewhere.get(`/yard?siteId=${site.id}`)).status).toBe(404)
  const stranger = (await aSite(product)).organisation.administrator
  expect((await stranger.get(`/yard?siteId=${site.id}`)).status).toBe(404)
  const missing = await stranger.get('/yard')
  expect(missing.body).toMatchObject({ code: 'fields-refused', fields: [{ path: 'query.siteId' }] })
})
