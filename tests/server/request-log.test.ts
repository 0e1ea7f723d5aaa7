import { Writable } from 'node:stream'
import { pino } from 'pino'
import request from 'supertest'
import { errorForLog } from '@/server/error-for-log'
import { aBrowser } from '../helpers/browser-jar'
import { anOrganisation, knownPassword } from '../helpers/factories'
import { aFilledDrum, aPickupYard, expectDone, issued } from '../helpers/pickups'
import { testApp } from '../helpers/test-app'

/** The log of a product, as its lines. */
async function aLoggedProduct(level = 'debug') {
  const lines: Record<string, unknown>[] = []
  const stream = new Writable({
    write: (chunk: Buffer, _encoding, done) => {
      lines.push(JSON.parse(chunk.toString()) as Record<string, unknown>)
      done()
    },
  })
  const log = pino({ level, serializers: { err: (error: unknown) => errorForLog(error) } }, stream)
  return { product: await testApp({ services: { log } }), lines }
}

test('says what was asked and how it ended', async () => {
  const { product, lines } = await aLoggedProduct()
  await request(product.app).get('/api/me')
  expect(lines).toMatchObject([
    {
      req: { method: 'GET', url: '/api/me', id: expect.stringMatching(/-/) },
      res: { status: 401 },
    },
  ])
  await product.close()
})

test('holds no password, no token, no cookie and no ticket', async () => {
  const { product, lines } = await aLoggedProduct()
  const { administrator } = await anOrganisation(product)
  const browser = aBrowser(product)
  const { accessToken } = (await browser.signIn(administrator.email, knownPassword)).body
  await aBrowser(product).signIn(administrator.email, 'a wrong password')
  await browser.refresh()
  await request(product.app).get('/api/me').set('Authorization', `Bearer ${accessToken}`)
  await administrator.post('/me/password', { current: knownPassword, next: 'the next password' })
  const yard = await aPickupYard(product)
  const pickup = await issued(yard, [await aFilledDrum(yard, { value: '50', unit: 'L' })])
  const { url } = expectDone(
    await yard.officer.post(`/documents/${pickup.documents[0]?.id}/ticket`),
  )
  await request(product.app).get(url)
  const written = JSON.stringify(lines)
  expect(written).toContain('/file?ticket=…')
  for (const secret of [
    knownPassword,
    'a wrong password',
    'the next password',
    accessToken as string,
    browser.jar.token ?? 'no token',
    (url as string).split('ticket=')[1] ?? 'no ticket',
    '$argon2',
  ]) {
    expect(written).not.toContain(secret)
  }
  await product.close()
})

test('tells of a fault where it was, without the values of the statement that failed', async () => {
  const { product, lines } = await aLoggedProduct('error')
  // An id the database cannot keep: the insert fails with everything that was given to it.
  const { administrator } = await anOrganisation(product)
  const stream = { email: 'pia@works.example.org', password: 'an invented password' }
  product.services.newId = () => 'no id at all'
  const reply = await administrator.post('/people', {
    id: '5b0d6a5e-8a3f-4e0e-9a53-2f0f5a1f6c11',
    name: 'Pia Invented',
    phone: '',
    role: 'auditor',
    siteIds: [],
    ...stream,
  })
  expect(reply.status).toBe(500)
  const written = JSON.stringify(lines)
  expect(written).toContain('Failed query: insert into')
  expect(written).toMatch(/server\/set-up|set-up-act|createRecord/)
  expect(written).toContain('22P02')
  expect(written).not.toMatch(/argon2|an invented password|pia@works/)
  await product.close()
})
