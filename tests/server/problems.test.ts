import { gzipSync } from 'node:zlib'
import { randomUUID } from 'node:crypto'
import request from 'supertest'
import words from '@/shared/words/en/problems.json'
import { problemCodes } from '@/shared/problems'
import { statusOfProblem } from '@/server/http/problems'
import { expectProblem } from '../helpers/expect-problem'
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
let its: { machine: { id: string }; container: { id: string } }

beforeAll(async () => {
  product = await testApp()
  site = await aSite(product)
  technician = await signInAs(product, site.organisation, 'technician', [site.id])
  its = { machine: await aMachine(site), container: await aContainer(site) }
})
afterAll(() => product.close())

/** Sends bytes as they are, as JSON unless told otherwise. */
function postRaw(path: string, body: string | Buffer, headers: Record<string, string> = {}) {
  return request(product.app)
    .post(`/api${path}`)
    .set({ 'Content-Type': 'application/json', Authorization: technician.bearer(), ...headers })
    .serialize((raw) => raw as unknown as string)
    .send(body as unknown as string)
}

describe('a request that cannot be read', () => {
  test.each([
    ['half a JSON object', '{"id":'],
    ['a word', 'drain'],
    ['a number', '5'],
    ['null', 'null'],
  ])('for %s is told so', async (_, body) => {
    expectProblem(await postRaw('/drains', body), 400, 'body-unreadable')
  })

  test('in a list instead of an object is refused by its fields', async () => {
    expectProblem(await postRaw('/drains', '[]'), 400, 'fields-refused')
  })

  test('of 2 MB is too large, also when it comes compressed', async () => {
    const large = JSON.stringify({ note: 'x'.repeat(2_000_000) })
    expectProblem(await postRaw('/drains', large), 413, 'body-too-large')
    const packed = await postRaw('/drains', gzipSync(large), { 'Content-Encoding': 'gzip' })
    expectProblem(packed, 413, 'body-too-large')
  })

  test.each([
    ['a form', { 'Content-Type': 'application/x-www-form-urlencoded' }],
    ['text', { 'Content-Type': 'text/plain' }],
    ['bytes of no kind', { 'Content-Type': 'application/octet-stream' }],
    ['an unknown character set', { 'Content-Type': 'application/json; charset=klingon' }],
    ['an unknown packing', { 'Content-Encoding': 'rar' }],
  ])('as %s is not read', async (_, headers) => {
    expectProblem(await postRaw('/drains', '{}', headers), 415, 'unsupported-media-type')
  })
})

describe('a drain with a field that cannot be is refused at that field', () => {
  const volume = (value: unknown, unit: unknown = 'gal_us') => ({ volume: { value, unit } })
  test.each<[string, Record<string, unknown>, string]>([
    ['a negative volume', volume('-5'), 'volume.value'],
    ['no volume at all', volume('0'), 'volume.value'],
    ['a volume that is a JSON number', volume(18.5), 'volume.value'],
    ['a volume in words', volume('a lot'), 'volume.value'],
    ['an unknown unit', volume('5', 'firkin'), 'volume.unit'],
    ['a mass where a volume belongs', volume('5', 'kg'), 'volume.unit'],
    ['another type', { note: 7 }, 'note'],
    ['a field too many', { colour: 'brown' }, 'colour'],
    [
      'a field too many inside',
      { machine: { kind: 'listed', machineId: randomUUID(), x: 1 } },
      'machine.x',
    ],
    ['a control character', { note: 'a\u0007b' }, 'note'],
    ['no character at all', { note: 'a\u0000b' }, 'note'],
    ['half a character', { note: 'a\ud83d' }, 'note'],
    ['an id that is none', { streamId: 'mineral' }, 'streamId'],
    ['no parts', { legs: [] }, 'legs'],
    ['a part that has no container', { legs: [{}] }, 'legs.0.containerId'],
    ['a time without its offset', { occurredAt: '2025-03-10T15:00:00' }, 'occurredAt'],
    ['a day that is not in the calendar', { occurredAt: '2025-02-30T15:00:00Z' }, 'occurredAt'],
    ['a method nobody knows', { method: 'guess' }, 'method'],
    [
      'half a filter',
      { filters: [{ count: 0.5, size: 'small', state: 'drained' }] },
      'filters.0.count',
    ],
    ['far too long a note', { note: 'x'.repeat(1001) }, 'note'],
  ])('%s', async (_, more, field) => {
    const reply = await technician.post('/drains', drainBody(site, its, more))
    expectProblem(reply, 400, 'fields-refused', field)
  })

  test('a time to come, parts that do not sum, a container of another site', async () => {
    const post = (more: Record<string, unknown>) =>
      technician.post('/drains', drainBody(site, its, more))
    const late = await post({ occurredAt: '2030-01-01T00:00:00Z' })
    expectProblem(late, 400, 'time-in-future', 'occurredAt')
    const legs = [
      { containerId: its.container.id, volume: { value: '4', unit: 'gal_us' } },
      { containerId: its.container.id, volume: { value: '5', unit: 'gal_us' } },
    ]
    expectProblem(await post({ legs }), 400, 'legs-do-not-sum', 'legs.1.volume.value')
    const other = await aContainer(await aSite(product, { organisation: site.organisation }))
    const astray = await post({ legs: [{ containerId: other.id }] })
    expectProblem(astray, 400, 'wrong-site', 'legs.0.containerId')
  })

  test('several are all named at once', async () => {
    const reply = await technician.post('/drains', drainBody(site, its, { note: 7, legs: [] }))
    const { fields } = expectProblem(reply, 400, 'fields-refused')
    expect(fields?.map(({ path }) => path).sort()).toEqual(['legs', 'note'])
  })
})

describe('an address', () => {
  test.each(['/drains/nothing', `/drains/${randomUUID()}`, '/containers/no%00code', '/nowhere'])(
    'that names nothing is not found: %s',
    async (path) => {
      expectProblem(await technician.get(path), 404, 'not-found')
    },
  )

  test('that cannot be decoded is no fault of ours', async () => {
    expect((await technician.get('/drains/%zz')).status).toBe(400)
    expectProblem(await technician.get('/drains/%zz'), 400, 'body-unreadable')
  })

  test('outside the API is not found either, as a problem', async () => {
    expectProblem(await request(product.app).get('/nowhere'), 404, 'not-found')
  })

  test('that takes other methods names them', async () => {
    const reply = await request(product.app).patch('/api/drains')
    expectProblem(reply, 405, 'method-not-allowed')
    expect(reply.headers.allow?.split(', ').sort()).toEqual(['GET', 'POST'])
    const one = await request(product.app).delete(`/api/machines/${randomUUID()}`)
    expectProblem(one, 405, 'method-not-allowed')
    expect(one.headers.allow?.split(', ').sort()).toEqual(['GET', 'PUT'])
  })

  test('with a question nobody knows is refused at that question', async () => {
    expectProblem(
      await technician.get('/drains?colour=brown'),
      400,
      'fields-refused',
      'query.colour',
    )
    expectProblem(await technician.get('/drains?limit=0'), 400, 'fields-refused', 'query.limit')
    expectProblem(await technician.get('/drains?cursor=x'), 400, 'fields-refused', 'query.cursor')
  })
})

test('who may not do it is told that, not what is wrong with what they typed', async () => {
  expectProblem(await technician.post('/people', { nonsense: true }), 403, 'not-allowed')
  expectProblem(await request(product.app).post('/api/people').send({}), 401, 'sign-in-required')
})

test('a fault of ours tells nothing of itself, and what was half done is undone', async () => {
  const broken = await testApp({ services: { newId: () => 'no id at all' } })
  const reply = await request(broken.app).post('/api/organisation').send({
    organisationName: 'Invented Works',
    phone: '',
    name: 'Ada Invented',
    email: 'ada@works.example.org',
    password: 'an invented password',
  })
  expectProblem(reply, 500, 'internal')
  expect(reply.text).not.toMatch(/uuid|insert|organisations|node_modules|at /i)
  const status = await request(broken.app).get('/api/status')
  expect(status.body.isSetUp).toBe(false)
  await broken.close()
})

describe('the words of problems', () => {
  test('are there for every code, and for nothing else', () => {
    expect(Object.keys(words).sort()).toEqual([...problemCodes].sort())
  })

  test('say what happened and what to do, without begging, blaming or a verdict', () => {
    for (const { title, detail } of Object.values(words)) {
      expect(`${title} ${detail}`).not.toMatch(
        /\b(please|sorry|invalid|valid|forbidden|error|oops|compliant|exempt|hazardous)\b/i,
      )
      expect(title).not.toMatch(/[.!]$/)
      expect(detail).toMatch(/[.}]$/)
    }
  })

  test('every code has a status of a refusal', () => {
    const statuses = problemCodes.map(statusOfProblem)
    expect(statuses.filter((status) => status < 400 || status > 500)).toEqual([])
    expect(problemCodes.filter((code) => statusOfProblem(code) === 500)).toEqual(['internal'])
  })
})
