import { randomUUID } from 'node:crypto'
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
let reader: Member
const drains: Record<string, string> = {}

/** Five drains of one site and one of another, each under a name. */
beforeAll(async () => {
  product = await testApp({ now: '2025-04-01T18:00:00Z' })
  site = await aSite(product)
  const other = await aSite(product, { organisation: site.organisation })
  const { administrator } = site.organisation
  reader = await signInAs(product, site.organisation, 'technician', [site.id])
  const loader = await aMachine(site, { code: 'LOADER', reservoir: null, system: null })
  const lift = await aMachine(site, { code: 'LIFT', reservoir: null, system: null })
  const [drum, tote] = [
    await aContainer(site, { code: 'DRUM' }),
    await aContainer(site, { code: 'TOTE' }),
  ]
  const record = async (
    name: string,
    of: TestSite,
    its: Parameters<typeof drainBody>[1],
    more: object,
  ) => {
    const body = drainBody(of, its, { ...more })
    const reply = await administrator.post('/drains', body)
    expect(reply.status).toBe(201)
    drains[name] = body.id
    return reply.body as { number: string }
  }
  const small = { volume: { value: '1', unit: 'gal_us' } }
  const at = (occurredAt: string) => ({ occurredAt, ...small })
  await record('first', site, { machine: loader, container: drum }, at('2025-03-01T05:59:00Z'))
  await record('second', site, { machine: loader, container: tote }, at('2025-03-01T06:00:00Z'))
  // Two at one instant.
  await record('twinA', site, { machine: lift, container: drum }, at('2025-03-10T12:00:00Z'))
  await record('twinB', site, { machine: loader, container: drum }, at('2025-03-10T12:00:00Z'))
  const water = site.organisation.streams['water']
  await record(
    'marked',
    site,
    { machine: lift, container: tote },
    { ...at('2025-03-20T12:00:00Z'), streamId: water },
  )
  const struck = await record(
    'struck',
    site,
    { machine: lift, container: tote },
    at('2025-03-21T12:00:00Z'),
  )
  await administrator.post(`/drains/${drains['struck']}/strike`, {
    expectedRevision: 1,
    reason: 'No',
  })
  expect(struck.number).toBe('D-25-0006')
  const unlisted = { kind: 'unlisted', description: 'Hired 100% loader_7' }
  await record(
    'hired',
    site,
    { machine: lift, container: drum },
    { ...at('2025-03-22T12:00:00Z'), machine: unlisted },
  )
  const its = { machine: await aMachine(other), container: await aContainer(other) }
  await record('elsewhere', other, its, at('2025-03-23T12:00:00Z'))
})
afterAll(() => product.close())

const nameOf = (id: string) => Object.keys(drains).find((name) => drains[name] === id) ?? id

async function list(query = '', by = reader): Promise<string[]> {
  const reply = await by.get(`/drains?${query}`)
  expect(reply.status).toBe(200)
  return reply.body.rows.map(({ id }: { id: string }) => nameOf(id))
}
const container = async (code: string) =>
  (await reader.get(`/containers/${code}`)).body.id as string

test('the newest comes first, of the sites one may see', async () => {
  const all = await list()
  expect([...all].sort()).toEqual(
    ['hired', 'struck', 'marked', 'twinA', 'twinB', 'second', 'first'].sort(),
  )
  expect(all.slice(0, 3)).toEqual(['hired', 'struck', 'marked'])
  expect(all.slice(-2)).toEqual(['second', 'first'])
  expect((await list('', site.organisation.administrator))[0]).toBe('elsewhere')
})

test('pages of one, of two and of three hold the same drains in the same order', async () => {
  const all = await list()
  for (const limit of [1, 2, 3]) {
    const found: string[] = []
    let cursor = ''
    do {
      const { body } = await reader.get(`/drains?limit=${limit}${cursor}`)
      found.push(...body.rows.map(({ id }: { id: string }) => nameOf(id)))
      cursor = body.next === null ? '' : `&cursor=${body.next}`
    } while (cursor !== '')
    expect(found).toEqual(all)
  }
})

test('by state', async () => {
  expect(await list('state=struck')).toEqual(['struck'])
  expect(await list('state=needs-a-look')).toEqual(['marked'])
  expect(await list('state=standing')).not.toContain('struck')
})

test('by days of the site, both included', async () => {
  expect(await list('to=2025-02-28')).toEqual(['first'])
  expect(await list('from=2025-03-01&to=2025-03-01')).toEqual(['second'])
  expect(await list('from=2025-03-22')).toEqual(['hired'])
})

test('by machine and by container', async () => {
  const lift = (await reader.get(`/drains/${drains['twinA']}`)).body.machine.id
  expect(await list(`machineId=${lift}`)).toEqual(['struck', 'marked', 'twinA'])
  expect(await list(`containerId=${await container('TOTE')}`)).toEqual([
    'struck',
    'marked',
    'second',
  ])
})

test('by words: number, machine, description; signs of a pattern are signs', async () => {
  expect(await list('search=d-25-0002')).toEqual(['second'])
  expect(await list('search=lift')).toEqual(['struck', 'marked', 'twinA'])
  expect(await list(`search=${encodeURIComponent('100%')}`)).toEqual(['hired'])
  expect(await list('search=loader_7')).toEqual(['hired'])
  expect(await list('search=loader-7')).toEqual([])
  expect(await list(`search=${encodeURIComponent("'; drop table drains; --")}`)).toEqual([])
})

test.each([
  ['limit=0', 'query.limit'],
  ['limit=1000', 'query.limit'],
  ['from=2025-02-30', 'query.from'],
  ['machineId=one', 'query.machineId'],
  ['state=lost', 'query.state'],
  ['colour=red', 'query.colour'],
  ['cursor=x', 'query.cursor'],
])('a question that cannot be read is refused: %s', async (query, path) => {
  const reply = await reader.get(`/drains?${query}`)
  expect(reply.status).toBe(400)
  expect(reply.body.fields).toMatchObject([{ path }])
})

test('one is read by its id and by its number, by who may see its site', async () => {
  const { body } = await reader.get(`/drains/${drains['first']}`)
  expect(body).toMatchObject({ number: 'D-25-0001', occurredOn: '2025-02-28' })
  expect((await reader.get('/drains/D-25-0001')).body).toEqual(body)
  for (const nothing of ['D-25-9999', 'D-1', randomUUID(), drains['elsewhere']]) {
    expect((await reader.get(`/drains/${nothing}`)).status).toBe(404)
  }
  const auditor = await signInAs(product, site.organisation, 'auditor')
  expect((await auditor.get(`/drains/${drains['elsewhere']}`)).status).toBe(200)
  const stranger = (await aSite(product)).organisation.administrator
  expect((await stranger.get(`/drains/${drains['first']}`)).status).toBe(404)
  expect(await list('', stranger)).toEqual([])
})
