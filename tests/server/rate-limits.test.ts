import request from 'supertest'
import type { Express } from 'express'
import { createApp } from '@/server/create-app'
import { expectProblem } from '../helpers/expect-problem'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp

beforeAll(async () => {
  product = await testApp()
})
afterAll(() => product.close())

function appWith(rates: { perMinute: number; guessesPerMinute: number }, proxies = 0): Express {
  return createApp(product.services, { webFolder: null, proxies, rates })
}

const guess = (app: Express, from = '192.0.2.1') =>
  request(app)
    .post('/api/session')
    .set('X-Forwarded-For', from)
    .send({ email: 'nobody@works.example.org', password: 'a guess' })

test('somebody who guesses passwords must wait, and is told for how long', async () => {
  const app = appWith({ perMinute: 100, guessesPerMinute: 2 })
  expectProblem(await guess(app), 401, 'sign-in-refused')
  expectProblem(await guess(app), 401, 'sign-in-refused')
  const third = await guess(app)
  expectProblem(third, 429, 'too-many-requests')
  expect(Number(third.headers['retry-after'])).toBeGreaterThan(0)
  expect(third.headers['ratelimit']).toMatch(/r=0/)
})

test('one limit counts guesses of every kind; what is no guess goes on', async () => {
  const app = appWith({ perMinute: 100, guessesPerMinute: 2 })
  await request(app).get(`/api/verify/${'0'.repeat(16)}`)
  await request(app).post('/api/organisation').send({})
  expectProblem(await guess(app), 429, 'too-many-requests')
  expectProblem(await request(app).post('/api/session/refresh'), 401, 'sign-in-required')
  expect((await request(app).get('/api/status')).status).toBe(200)
})

test('requests of any kind have a limit too', async () => {
  const app = appWith({ perMinute: 3, guessesPerMinute: 2 })
  for (let count = 0; count < 3; count += 1) await request(app).get('/api/status')
  expectProblem(await request(app).get('/api/status'), 429, 'too-many-requests')
})

test('nobody gets round it by naming another address, unless a known proxy names it', async () => {
  const direct = appWith({ perMinute: 100, guessesPerMinute: 1 })
  await guess(direct, '192.0.2.1')
  expectProblem(await guess(direct, '192.0.2.2'), 429, 'too-many-requests')
  const behind = appWith({ perMinute: 100, guessesPerMinute: 1 }, 1)
  await guess(behind, '192.0.2.1')
  expectProblem(await guess(behind, '192.0.2.2'), 401, 'sign-in-refused')
  expectProblem(await guess(behind, '203.0.113.9, 192.0.2.2'), 429, 'too-many-requests')
})
