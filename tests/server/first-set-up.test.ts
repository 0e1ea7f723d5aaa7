import request from 'supertest'
import { createApp } from '@/server/create-app'
import { defaultStreams } from '@/shared/default-streams'
import { aBrowser, cookieOf } from '../helpers/browser-jar'
import { expectProblem } from '../helpers/expect-problem'
import { testApp, type TestApp } from '../helpers/test-app'

/** An empty product: its first page makes the organisation and its first administrator. */
let product: TestApp

beforeEach(async () => {
  product = await testApp()
})
afterEach(() => product.close())

const given = {
  organisationName: 'Invented Works',
  phone: '555-0100',
  name: 'Ada Invented',
  email: 'ada@works.example.org',
  password: 'an invented password',
}
const setUp = (more: object = {}) =>
  request(product.app)
    .post('/api/organisation')
    .send({ ...given, ...more })
const status = async () => (await request(product.app).get('/api/status')).body as object

test('makes the organisation, its administrator and its streams, and signs in', async () => {
  expect(await status()).toEqual({ isSetUp: false, demo: null, version: '0.0.0-test' })
  const reply = await setUp()
  expect(reply.status).toBe(201)
  expect(reply.body.person).toMatchObject({
    name: given.name,
    role: 'administrator',
    organisation: { name: given.organisationName, isDemo: false },
  })
  expect(cookieOf(reply)?.attributes).toContain('httponly')
  expect(await status()).toMatchObject({ isSetUp: true })
  const bearer = `Bearer ${reply.body.accessToken as string}`
  const catalogue = await request(product.app).get('/api/catalogue').set('Authorization', bearer)
  expect(catalogue.body).toMatchObject({ sites: [], machines: [], fluids: [], haulers: [] })
  const codes = (catalogue.body.streams as { code: string }[]).map(({ code }) => code)
  expect(codes.sort()).toEqual(defaultStreams.map(({ code }) => code).sort())
  expect(codes.sort()).toEqual(['absorbents', 'ester', 'filters', 'mineral', 'water'])
  expect((await aBrowser(product).signIn(given.email, given.password)).status).toBe(200)
})

test('happens once: of two at the same moment one is told that it is done', async () => {
  const replies = await Promise.all([setUp(), setUp({ email: 'bo@works.example.org' })])
  expect(replies.map((reply) => reply.status).sort()).toEqual([201, 409])
  const late = replies.find((reply) => reply.status === 409)
  if (late === undefined) throw new Error('both were made')
  expectProblem(late, 409, 'already-set-up')
  expectProblem(await setUp({ email: 'cy@works.example.org' }), 409, 'already-set-up')
})

test.each([
  ['organisationName', ''],
  ['organisationName', '   '],
  ['name', 'a\nb'],
  ['email', 'ada'],
  ['password', 'too short'],
])('names %s when it is %j, and makes nothing', async (field, value) => {
  expectProblem(await setUp({ [field]: value }), 400, 'fields-refused', field)
  expect(await status()).toMatchObject({ isSetUp: false })
})

test('the demo tells on the first page whom to sign in as', async () => {
  const demo = {
    password: 'an invented password',
    people: [
      { name: 'Tess', email: 't@works.example.org', role: 'technician' as const, does: 'x' },
    ],
  }
  const app = createApp(
    { ...product.services, demo },
    { webFolder: null, proxies: 0, rates: { perMinute: 100, guessesPerMinute: 100 } },
  )
  expect((await request(app).get('/api/status')).body).toMatchObject({ demo })
})
