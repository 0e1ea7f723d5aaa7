import { createHash, randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import jwt from 'jsonwebtoken'
import request from 'supertest'
import { people, sessions } from '@/db/schema/organisations'
import { asService } from '@/db/tenancy'
import { signedInPerson } from '@/shared/contracts/session'
import { aBrowser, cookieOf } from '../helpers/browser-jar'
import { expectProblem } from '../helpers/expect-problem'
import {
  anOrganisation,
  knownPassword,
  signInAs,
  type Member,
  type TestOrganisation,
} from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let organisation: TestOrganisation
let officer: Member

beforeAll(async () => {
  product = await testApp()
  organisation = await anOrganisation(product)
})
beforeEach(async () => {
  product.clock.now = new Date('2025-03-10T18:00:00Z')
  officer = await signInAs(product, organisation, 'officer')
})
afterAll(() => product.close())

function later(minutes: number) {
  product.clock.now = new Date(product.clock.now.getTime() + minutes * 60_000)
}

async function signedIn(who: Member = officer) {
  const browser = aBrowser(product)
  const reply = await browser.signIn(who.email, knownPassword)
  expect(reply.status).toBe(200)
  return { ...browser, accessToken: reply.body.accessToken as string, reply }
}

function meWith(accessToken: string) {
  return request(product.app).get('/api/me').set('Authorization', `Bearer ${accessToken}`)
}

describe('sign-in', () => {
  test('gives an access token, the person, and the refresh token in a cookie no script can read', async () => {
    const { reply, accessToken } = await signedIn()
    expect(reply.body).toEqual({
      accessToken,
      expiresInSeconds: 600,
      person: {
        id: officer.id,
        name: expect.stringMatching(/^Invented officer/),
        email: officer.email,
        role: 'officer',
        siteIds: [],
        organisation: { id: organisation.id, name: expect.any(String), isDemo: false },
      },
    })
    const cookie = cookieOf(reply)
    expect(cookie?.attributes).toEqual(
      expect.arrayContaining(['httponly', 'samesite=strict', 'secure', 'path=/api/session']),
    )
    expect(reply.text).not.toContain(cookie?.value)
    expect(signedInPerson.parse((await meWith(accessToken)).body)).toEqual(reply.body.person)
  })

  test('keeps the cookie off plain http only where the product is reached by https', async () => {
    const plain = await testApp({ services: { publicUrl: 'http://yard.example.org:8080' } })
    const { administrator } = await anOrganisation(plain)
    const reply = await aBrowser(plain).signIn(administrator.email, knownPassword)
    expect(cookieOf(reply)?.attributes).not.toContain('secure')
    expect(cookieOf(reply)?.attributes).toContain('httponly')
    await plain.close()
  })

  test('takes the address in any case', async () => {
    expect(
      (await aBrowser(product).signIn(officer.email.toUpperCase(), knownPassword)).status,
    ).toBe(200)
  })

  test('answers an unknown address and a wrong password with the same words', async () => {
    const wrong = await aBrowser(product).signIn(officer.email, 'another invented word')
    const unknown = await aBrowser(product).signIn('nobody@works.example.org', knownPassword)
    expectProblem(wrong, 401, 'sign-in-refused')
    expect(unknown.status).toBe(401)
    expect(unknown.body).toEqual(wrong.body)
    expect(cookieOf(wrong)).toBeUndefined()
  })

  test('is not open to a retired person', async () => {
    await organisation.administrator.post(`/people/${officer.id}/retire`)
    expectProblem(
      await aBrowser(product).signIn(officer.email, knownPassword),
      401,
      'sign-in-refused',
    )
  })

  test('names the field that cannot be', async () => {
    expectProblem(await aBrowser(product).signIn('no address', 'x'), 400, 'fields-refused', 'email')
    expectProblem(
      await aBrowser(product).signIn(officer.email, ''),
      400,
      'fields-refused',
      'password',
    )
  })

  test('keeps neither the password nor the token, only what they cannot be read from', async () => {
    const { jar } = await signedIn()
    const kept = await asService(product.opened.db, async (tx) => ({
      person: await tx.select().from(people).where(eq(people.id, officer.id)),
      sessions: await tx.select().from(sessions).where(eq(sessions.personId, officer.id)),
    }))
    expect(kept.person[0]?.passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/)
    expect(JSON.stringify(kept)).not.toContain(jar.token?.split('.')[1])
    expect(kept.sessions.map(({ tokenHash }) => tokenHash)).toContain(
      createHash('sha256')
        .update(jar.token ?? '')
        .digest('hex'),
    )
  })
})

describe('an access token', () => {
  test('runs out after ten minutes', async () => {
    const { accessToken } = await signedIn()
    later(9.9)
    expect((await meWith(accessToken)).status).toBe(200)
    later(0.2)
    expectProblem(await meWith(accessToken), 401, 'sign-in-required')
  })

  const claims = () => ({
    sub: officer.id,
    org: organisation.id,
    sid: randomUUID(),
    aud: 'ebbmark-api',
    exp: Math.floor(product.clock.now.getTime() / 1000) + 600,
  })
  const sessionOfOfficer = async () => {
    const { accessToken } = await signedIn()
    return (jwt.decode(accessToken) as { sid: string }).sid
  }

  test('that was made up here would be taken, were it signed with the secret', async () => {
    const sid = await sessionOfOfficer()
    const token = jwt.sign({ ...claims(), sid }, product.services.secret)
    expect((await meWith(token)).status).toBe(200)
  })

  test.each<[string, (sid: string) => string]>([
    ['signed with another secret', (sid) => jwt.sign({ ...claims(), sid }, 'x'.repeat(40))],
    ['not signed at all', (sid) => jwt.sign({ ...claims(), sid }, '', { algorithm: 'none' })],
    [
      'signed by another method',
      (sid) => jwt.sign({ ...claims(), sid }, product.services.secret, { algorithm: 'HS512' }),
    ],
    [
      'made for a document',
      (sid) => jwt.sign({ ...claims(), sid, aud: 'ebbmark-document' }, product.services.secret),
    ],
    [
      "of another person's session",
      (sid) =>
        jwt.sign({ ...claims(), sid, sub: organisation.administrator.id }, product.services.secret),
    ],
    ['of no session', () => jwt.sign(claims(), product.services.secret)],
    [
      'without an end',
      (sid) => {
        const { exp: _exp, ...endless } = claims()
        return jwt.sign({ ...endless, sid }, product.services.secret)
      },
    ],
    [
      'of another organisation',
      (sid) => jwt.sign({ ...claims(), sid, org: randomUUID() }, product.services.secret),
    ],
    [
      'that names no ids',
      (sid) => jwt.sign({ ...claims(), sid, sub: "' or true --" }, product.services.secret),
    ],
    ['in no known form', () => 'a.b.c'],
  ])('%s is refused', async (_, forge) => {
    expectProblem(await meWith(forge(await sessionOfOfficer())), 401, 'sign-in-required')
  })

  test('says what the database says now: another role counts at once', async () => {
    const { accessToken } = await signedIn()
    await asService(product.opened.db, (tx) =>
      tx.update(people).set({ role: 'technician' }).where(eq(people.id, officer.id)),
    )
    expect((await meWith(accessToken)).body.role).toBe('technician')
  })
})

describe('a session', () => {
  test('goes on with a new token and a new cookie', async () => {
    const browser = await signedIn()
    const first = browser.jar.token
    later(9)
    const reply = await browser.refresh()
    expect(reply.status).toBe(200)
    expect(browser.jar.token).not.toBe(first)
    later(9)
    expect((await meWith(reply.body.accessToken as string)).status).toBe(200)
  })

  test('answers two tabs that use one token at the same time, and both go on', async () => {
    const browser = await signedIn()
    const otherTab = aBrowser(product, browser.jar.token)
    later(9)
    expect((await browser.refresh()).status).toBe(200)
    later(0.2)
    const second = await otherTab.refresh()
    expect(second.status).toBe(200)
    expect(cookieOf(second)).toBeUndefined()
    later(9)
    expect((await browser.refresh()).status).toBe(200)
  })

  test('replaces its token once in half a minute, so that nothing under way comes too late', async () => {
    const browser = await signedIn()
    const [slowTab, quickTab] = [aBrowser(product, browser.jar.token), aBrowser(product)]
    later(9)
    await browser.refresh()
    quickTab.jar.token = browser.jar.token
    later(0.1)
    expect(cookieOf(await quickTab.refresh())).toBeUndefined()
    later(0.1)
    expect((await slowTab.refresh()).status).toBe(200)
  })

  test('ends, for everybody, when a token that was replaced comes back', async () => {
    const browser = await signedIn()
    const thief = aBrowser(product, browser.jar.token)
    later(9)
    const { body } = await browser.refresh()
    later(0.6)
    expectProblem(await thief.refresh(), 401, 'sign-in-required')
    expectProblem(await browser.refresh(), 401, 'sign-in-required')
    expectProblem(await meWith(body.accessToken as string), 401, 'sign-in-required')
  })

  test('ends as well when the copy went on and the owner comes back two tokens late', async () => {
    const owner = await signedIn()
    const thief = aBrowser(product, owner.jar.token)
    for (const minutes of [9, 9]) {
      later(minutes)
      expect((await thief.refresh()).status).toBe(200)
    }
    later(1)
    expectProblem(await owner.refresh(), 401, 'sign-in-required')
    expectProblem(await thief.refresh(), 401, 'sign-in-required')
  })

  test('ends after 30 days without use, not before', async () => {
    const browser = await signedIn()
    later(29 * 24 * 60)
    expect((await browser.refresh()).status).toBe(200)
    later(29 * 24 * 60)
    expect((await browser.refresh()).status).toBe(200)
    later(30 * 24 * 60 + 1)
    expectProblem(await browser.refresh(), 401, 'sign-in-required')
    expect(browser.jar.token).toBeUndefined()
  })

  test.each([
    '',
    'x',
    '5b0d6a5e-8a3f-4e0e-9a53-2f0f5a1f6c11.x',
    'a.much.too.long.one'.repeat(20),
    '%00.b',
  ])('is not continued by "%s"', async (token) => {
    expectProblem(await aBrowser(product, token).refresh(), 401, 'sign-in-required')
  })

  test('ends at sign-out, on this device alone, and the cookie goes', async () => {
    const [here, there] = [await signedIn(), await signedIn()]
    const copied = aBrowser(product, here.jar.token)
    const reply = await here.signOut()
    expect(reply.status).toBe(204)
    expect(cookieOf(reply)?.value).toBe('')
    expect(here.jar.token).toBeUndefined()
    expectProblem(await meWith(here.accessToken), 401, 'sign-in-required')
    expectProblem(await copied.refresh(), 401, 'sign-in-required')
    expect((await meWith(there.accessToken)).status).toBe(200)
    expect((await here.signOut()).status).toBe(204)
  })

  test('ends when the person is retired', async () => {
    const { accessToken, refresh } = await signedIn()
    expect((await organisation.administrator.post(`/people/${officer.id}/retire`)).status).toBe(200)
    expectProblem(await meWith(accessToken), 401, 'sign-in-required')
    later(1)
    expectProblem(await refresh(), 401, 'sign-in-required')
  })
})

describe('a password', () => {
  test('is changed by who knows it; every other session ends', async () => {
    const [here, there] = [await signedIn(), await signedIn()]
    const change = (current: string, next: string) =>
      request(product.app)
        .post('/api/me/password')
        .set('Authorization', `Bearer ${here.accessToken}`)
        .send({ current, next })
    expectProblem(await change('not this one', 'the next invented word'), 401, 'sign-in-refused')
    expectProblem(await change(knownPassword, 'short'), 400, 'fields-refused', 'next')
    expect((await meWith(there.accessToken)).status).toBe(200)
    expect((await change(knownPassword, 'the next invented word')).status).toBe(204)
    expect((await meWith(here.accessToken)).status).toBe(200)
    expectProblem(await meWith(there.accessToken), 401, 'sign-in-required')
    expectProblem(
      await aBrowser(product).signIn(officer.email, knownPassword),
      401,
      'sign-in-refused',
    )
    expect((await aBrowser(product).signIn(officer.email, 'the next invented word')).status).toBe(
      200,
    )
  })

  test('is given anew by an administrator; every session ends', async () => {
    const { accessToken } = await signedIn()
    const path = `/people/${officer.id}/password`
    const reply = await organisation.administrator.post(path, { password: 'given anew by Ada' })
    expect(reply.status).toBe(204)
    expectProblem(await meWith(accessToken), 401, 'sign-in-required')
    expect((await aBrowser(product).signIn(officer.email, 'given anew by Ada')).status).toBe(200)
  })
})
