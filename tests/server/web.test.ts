import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { brotliCompressSync } from 'node:zlib'
import type { Express } from 'express'
import request from 'supertest'
import { createApp } from '@/server/create-app'
import { expectProblem } from '../helpers/expect-problem'
import { testApp, type TestApp } from '../helpers/test-app'

const hashed = '/_expo/static/js/web/entry-0123456789abcdef0123456789abcdef.js'
const script = 'globalThis.isOpen = true\n'

let product: TestApp
let folder: string
let app: Express

beforeAll(async () => {
  product = await testApp()
  folder = mkdtempSync(join(tmpdir(), 'ebbmark-web-'))
  mkdirSync(join(folder, '_expo/static/js/web'), { recursive: true })
  writeFileSync(join(folder, 'index.html'), '<!doctype html><title>Ebbmark</title>')
  writeFileSync(join(folder, 'sw.js'), 'self.skipWaiting()\n')
  writeFileSync(join(folder, hashed), script)
  writeFileSync(join(folder, `${hashed}.br`), brotliCompressSync(script))
  app = createApp(product.services, settings(folder))
})
afterAll(async () => {
  rmSync(folder, { recursive: true })
  await product.close()
})

function settings(webFolder: string) {
  return { webFolder, proxies: 0, rates: { perMinute: 1000, guessesPerMinute: 1000 } }
}

test.each(['/', '/drains', '/drains/new?machine=M-09', '/c/C-201'])(
  '%s opens the app, asked for again each time',
  async (path) => {
    const reply = await request(app).get(path).set('Accept', 'text/html')
    expect(reply.status).toBe(200)
    expect(reply.text).toContain('<title>Ebbmark</title>')
    expect(reply.headers['cache-control']).toBe('no-cache')
  },
)

test('a file with a hash in its name is kept for a year and comes compressed', async () => {
  const reply = await request(app).get(hashed).set('Accept-Encoding', 'br, gzip')
  expect(reply.headers).toMatchObject({
    'content-encoding': 'br',
    'cache-control': 'public, max-age=31536000, immutable',
  })
  expect((await request(app).get(hashed).set('Accept-Encoding', 'identity')).text).toBe(script)
})

test('a file without one is asked for again', async () => {
  expect((await request(app).get('/sw.js')).headers['cache-control']).toBe('no-cache')
})

test('fonts come from the folder that the PDFs read', async () => {
  const [name = ''] = readdirSync('fonts').filter((file) => file.endsWith('.woff2'))
  const reply = await request(app).get(`/fonts/${name}`).responseType('blob')
  expect(reply.status).toBe(200)
  expect(reply.body).toEqual(readFileSync(join('fonts', name)))
  expect(reply.headers['cache-control']).toBe('public, max-age=604800')
})

test.each([
  '/missing.js',
  '/_expo/static/js/web/old-ffffffffffffffffffffffffffffffff.js',
  '/..%2f..%2fpackage.json',
  '/fonts/..%2f..%2fpackage.json',
  '/%2e%2e/package.json',
])('%s is no address of the app', async (path) => {
  const reply = await request(app).get(path)
  expect(reply.status).toBeGreaterThanOrEqual(400)
  expect(reply.status).toBeLessThan(500)
  expect(reply.text).not.toContain('"ebbmark"')
})

test('an address of the API is never a page', async () => {
  const reply = await request(app).get('/api/nowhere').set('Accept', 'text/html')
  expectProblem(reply, 404, 'not-found')
})

test.each(['/', hashed, '/api/status', '/api/nowhere'])(
  '%s says what a browser may do with it',
  async (path) => {
    const { headers } = await request(app).get(path)
    const policy = String(headers['content-security-policy'])
    expect(policy).toContain("default-src 'self'")
    expect(policy).toContain("script-src 'self';")
    expect(policy).toContain("object-src 'none'")
    expect(policy).toContain("frame-ancestors 'none'")
    expect(policy).not.toMatch(/script-src[^;]*unsafe/)
    expect(headers).toMatchObject({
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'no-referrer',
      'permissions-policy': expect.stringContaining('geolocation=()'),
    })
    expect(headers['x-powered-by']).toBeUndefined()
  },
)

test('answers of the API are kept nowhere', async () => {
  const reply = await request(app).get('/api/status')
  expect(reply.headers['cache-control']).toBe('no-store')
})

test('without a built web app the product does not start', () => {
  const empty = join(folder, 'nothing')
  expect(() => createApp(product.services, settings(empty))).toThrow('holds no built web app')
})
