import { randomUUID } from 'node:crypto'
import { aBrowser } from '../helpers/browser-jar'
import { expectProblem } from '../helpers/expect-problem'
import { anOrganisation, aSite, signInAs, type TestOrganisation } from '../helpers/factories'
import { expectDone } from '../helpers/pickups'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let organisation: TestOrganisation

beforeAll(async () => {
  product = await testApp()
})
beforeEach(async () => {
  organisation = await anOrganisation(product)
})
afterAll(() => product.close())

function aPerson(more: object = {}) {
  const id = randomUUID()
  return {
    id,
    name: 'Pia Invented',
    email: `${id}@works.example.org`,
    phone: '555-0103',
    role: 'technician',
    siteIds: [] as string[],
    password: 'an invented password',
    ...more,
  }
}

test('a person who was added signs in with the first password and sees the given sites', async () => {
  const { administrator } = organisation
  const site = await aSite(product, { organisation })
  const person = aPerson({ siteIds: [site.id, site.id] })
  const made = await administrator.post('/people', person)
  expect(made.status).toBe(201)
  expect(made.body.siteIds).toEqual([site.id])
  const signedIn = await aBrowser(product).signIn(person.email, person.password)
  expect(signedIn.body.person).toMatchObject({ role: 'technician', siteIds: [site.id] })
})

test('the same person sent again is answered again; with another password it is another request', async () => {
  const { administrator } = organisation
  const person = aPerson()
  expect((await administrator.post('/people', person)).status).toBe(201)
  expect((await administrator.post('/people', person)).status).toBe(200)
  const other = { ...person, password: 'quite another password' }
  expectProblem(await administrator.post('/people', other), 409, 'id-reused')
})

test('one address is one account, in any case and in any organisation', async () => {
  const person = aPerson()
  expectDone(await organisation.administrator.post('/people', person))
  const again = aPerson({ email: person.email.toUpperCase() })
  expectProblem(await organisation.administrator.post('/people', again), 409, 'email-taken')
  const stranger = (await anOrganisation(product)).administrator
  expectProblem(await stranger.post('/people', again), 409, 'email-taken')
})

test('sites are given as a whole: what is not named is taken away, at once', async () => {
  const { administrator } = organisation
  const [first, second] = [
    await aSite(product, { organisation }),
    await aSite(product, { organisation }),
  ]
  const technician = await signInAs(product, organisation, 'technician', [first.id])
  const {
    version,
    id: _id,
    retiredAt: _at,
    ...body
  } = (await administrator.get(`/people/${technician.id}`)).body
  const change = { ...body, siteIds: [second.id] }
  const reply = await administrator.put(`/people/${technician.id}`, change, version)
  expect(reply.body.siteIds).toEqual([second.id])
  expectProblem(await technician.get(`/yard?siteId=${first.id}`), 404, 'not-found')
  expect((await technician.get(`/yard?siteId=${second.id}`)).status).toBe(200)
})

test('a site of another organisation is not given', async () => {
  const foreign = await aSite(product)
  const reply = await organisation.administrator.post('/people', aPerson({ siteIds: [foreign.id] }))
  expectProblem(reply, 400, 'fields-refused', 'siteIds')
})

describe('somebody remains administrator', () => {
  test('the last one is neither retired nor given another role', async () => {
    const { administrator } = organisation
    const path = `/people/${administrator.id}`
    expectProblem(await administrator.post(`${path}/retire`), 409, 'last-administrator')
    const { version, id: _id, retiredAt: _at, ...body } = (await administrator.get(path)).body
    const demoted = await administrator.put(path, { ...body, role: 'officer' }, version)
    expectProblem(demoted, 409, 'last-administrator')
    expect((await administrator.get('/me')).body.role).toBe('administrator')
  })

  test('one of two goes, and only then the other one is the last', async () => {
    const second = await signInAs(product, organisation, 'administrator')
    const gone = await second.post(`/people/${organisation.administrator.id}/retire`)
    expect(gone.status).toBe(200)
    expectProblem(await second.post(`/people/${second.id}/retire`), 409, 'last-administrator')
  })

  test('when two retire each other at the same moment', async () => {
    const first = organisation.administrator
    const second = await signInAs(product, organisation, 'administrator')
    const replies = await Promise.all([
      first.post(`/people/${second.id}/retire`),
      second.post(`/people/${first.id}/retire`),
    ])
    // Who comes second is told that nobody would remain, or is out already.
    const codes = replies.map(({ status, body }) => (status === 200 ? 'done' : body.code))
    expect(codes).toContain('done')
    expect(codes.filter((code) => code !== 'done')).toHaveLength(1)
    expect(['last-administrator', 'sign-in-required']).toContain(
      codes.find((code) => code !== 'done'),
    )
  })

  test('a retired one does not count', async () => {
    const { administrator } = organisation
    const second = await signInAs(product, organisation, 'administrator')
    expectDone(await administrator.post(`/people/${second.id}/retire`))
    const reply = await administrator.post(`/people/${administrator.id}/retire`)
    expectProblem(reply, 409, 'last-administrator')
  })
})

test('a person brought back signs in again', async () => {
  const { administrator } = organisation
  const person = aPerson()
  expectDone(await administrator.post('/people', person))
  expectDone(await administrator.post(`/people/${person.id}/retire`))
  const signIn = () => aBrowser(product).signIn(person.email, person.password)
  expectProblem(await signIn(), 401, 'sign-in-refused')
  expectDone(await administrator.post(`/people/${person.id}/restore`))
  expect((await signIn()).status).toBe(200)
})
