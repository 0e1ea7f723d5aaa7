import { readdirSync } from 'node:fs'
import { startProduct, type Product } from './product'

let product: Product
beforeEach(async () => {
  product = await startProduct({ isEmpty: true })
})
afterEach(() => product.remove())

const organisation = {
  organisationName: 'Invented Workshop',
  phone: '+1 555 0100',
  name: 'Ada Invented',
  email: 'ada@book.example.org',
  password: 'a long invented password',
}

function post(url: string, path: string, body: unknown): Promise<Response> {
  return fetch(`${url}/api${path}`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json', Origin: url },
    body: JSON.stringify(body),
  })
}

test('a second process on the same folder is told so in one line and ends with 1', async () => {
  await expect(startProduct({ dataFolder: product.dataFolder })).rejects.toThrow(
    /ended with 1: The database folder \S+ is already open in process \d+\. Stop that process first\.\n$/,
  )
})

test('a taken port is told in one line, ends with 1 and leaves no lock', async () => {
  const { port } = new URL(product.url)
  const other = await startProduct({ isEmpty: true })
  await other.stop()
  const again = startProduct({ dataFolder: other.dataFolder, env: { PORT: port } })
  await expect(again).rejects.toThrow(
    new RegExp(
      `ended with 1: Port ${port} on 127.0.0.1 is already in use. Set PORT to another one.\n$`,
    ),
  )
  expect(readdirSync(other.dataFolder).filter((name) => name.startsWith('lock'))).toEqual([])
  await other.remove()
})

test.each(['SIGTERM', 'SIGINT'] as const)('%s stops it in order', async (signal) => {
  expect(await product.stop(signal)).toBe(0)
  expect(readdirSync(product.dataFolder).filter((name) => name.startsWith('lock'))).toEqual([])
})

test('what was acknowledged before kill -9 is there at the next start', async () => {
  const made = await post(product.url, '/organisation', organisation)
  expect(made.status).toBe(201)
  await product.stop('SIGKILL')
  const next = await startProduct({ dataFolder: product.dataFolder, isEmpty: true })
  const { email, password } = organisation
  const signedIn = await post(next.url, '/session', { email, password })
  expect(signedIn.status).toBe(200)
  await next.stop()
})
