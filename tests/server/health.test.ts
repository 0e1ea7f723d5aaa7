import request from 'supertest'
import { testApp } from '../helpers/test-app'

test('says which database answers, and in which version', async () => {
  const product = await testApp()
  const reply = await request(product.app).get('/api/health')
  expect(reply.status).toBe(200)
  expect(reply.body).toEqual({
    status: 'up',
    version: '0.0.0-test',
    database: {
      kind: product.opened.kind,
      serverVersion: expect.stringMatching(/^\d+\.\d+/),
      answers: true,
    },
  })
  await product.close()
})

test('says that the database is down, by its status as well', async () => {
  const product = await testApp()
  await product.close()
  const reply = await request(product.app).get('/api/health')
  expect(reply.status).toBe(503)
  expect(reply.body).toMatchObject({ status: 'down', database: { answers: false } })
})
