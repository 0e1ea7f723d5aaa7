import { Validator } from '@seriousme/openapi-schema-validator'
import type { Express } from 'express'
import request from 'supertest'
import { allContracts } from '@/shared/contracts/all-contracts'
import { testApp, type TestApp } from '../helpers/test-app'

type Operation = {
  operationId: string
  security: object[]
  parameters?: { name: string; in: string; required?: boolean }[]
  requestBody?: { content: Record<string, { schema: { required?: string[] } }> }
  responses: Record<string, { description: string; content?: Record<string, unknown> }>
}
type Document = {
  openapi: string
  paths: Record<string, Record<string, Operation>>
  components: { schemas: Record<string, unknown>; securitySchemes: Record<string, unknown> }
}

let product: TestApp
let document: Document

beforeAll(async () => {
  product = await testApp()
  const reply = await request(product.app).get('/api/openapi.json')
  expect(reply.status).toBe(200)
  expect(reply.type).toBe('application/json')
  document = reply.body as Document
})
afterAll(() => product.close())

function operationOf(contract: { method: string; path: string }): Operation | undefined {
  return document.paths[contract.path.replace(/:(\w+)/g, '{$1}')]?.[contract.method]
}

test('an independent validator takes the document for OpenAPI 3.1', async () => {
  const validator = new Validator()
  const found = await validator.validate(structuredClone(document))
  expect(found).toEqual({ valid: true })
  expect(validator.version).toBe('3.1')
})

test('the validator would find a fault', async () => {
  const broken = structuredClone(document) as unknown as { paths: Record<string, unknown> }
  broken.paths['/drains'] = { post: { responses: 'none' } }
  expect((await new Validator().validate(broken)).valid).toBe(false)
})

test('it names every contract once, and nothing else', () => {
  const named = Object.values(document.paths)
    .flatMap((methods) => Object.values(methods))
    .map(({ operationId }) => operationId)
  expect(named.sort()).toEqual(allContracts.map(({ name }) => name).sort())
  expect(new Set(named).size).toBe(named.length)
})

test('no two contracts share a method and a path', () => {
  const addresses = allContracts.map(({ method, path }) => `${method} ${path}`)
  expect(addresses).toEqual([...new Set(addresses)])
})

test('the application serves every contract, and no address without one', () => {
  const served = addressesOf(product.app)
  const promised = allContracts.map(({ method, path }) => `${method} ${path}`)
  expect(served.sort()).toEqual([...promised, 'get /openapi.json'].sort())
})

describe.each(allContracts.map((contract) => [contract.name, contract] as const))(
  '%s',
  (_, contract) => {
    test('says who may ask, how it ends well and how it is refused', () => {
      const operation = operationOf(contract)
      const isPublic = contract.access === 'public'
      expect(operation?.security).toEqual(isPublic ? [] : [{ accessToken: [] }])
      expect(Object.keys(operation?.responses ?? {})).toEqual(
        expect.arrayContaining([
          String(contract.status),
          '400',
          ...(isPublic ? [] : ['401', '403']),
        ]),
      )
      for (const code of contract.problems) {
        const refusals = Object.values(operation?.responses ?? {}).filter(
          ({ content }) => content?.['application/problem+json'] !== undefined,
        )
        expect(refusals.some(({ description }) => description.split(', ').includes(code))).toBe(
          true,
        )
      }
    })

    test('says every part of the path, and the version it asks for', () => {
      const asked = operationOf(contract)?.parameters ?? []
      const inPath = [...contract.path.matchAll(/:(\w+)/g)].map(([, name]) => name)
      expect(asked.filter((one) => one.in === 'path').map(({ name }) => name)).toEqual(inPath)
      const needsVersion = contract.versioned && contract.method === 'put'
      expect(asked.some(({ name, required }) => name === 'If-Match' && required === true)).toBe(
        needsVersion,
      )
    })
  },
)

test('figures are strings in it, never numbers', () => {
  const volume = JSON.stringify(
    operationOf({ method: 'post', path: '/drains' })?.requestBody?.content['application/json'],
  )
  expect(volume).toContain('"value":{"type":"string"')
  expect(volume).not.toContain('"value":{"type":"number"')
})

/** `get /drains/:id` of everything below /api. */
function addressesOf(app: Express): string[] {
  type Layer = {
    route?: { path: string | string[]; methods: Record<string, boolean>; stack: Layer[] }
    handle: { stack?: Layer[] }
    method?: string
  }
  const below = (layers: Layer[]): string[] =>
    layers.flatMap(({ route, handle }) => {
      if (route === undefined) return handle.stack === undefined ? [] : below(handle.stack)
      // The limits of guesses are put before routes by path as well: they end nothing.
      if (Array.isArray(route.path) || route.stack.every((layer) => isLimit(layer))) return []
      return Object.keys(route.methods).map((method) => `${method} ${route.path as string}`)
    })
  const isLimit = (layer: Layer) => 'resetKey' in layer.handle
  return below((app.router as unknown as { stack: Layer[] }).stack)
}
