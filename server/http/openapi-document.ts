import {
  extendZodWithOpenApi,
  OpenAPIRegistry,
  OpenApiGeneratorV31,
  type RouteConfig,
} from '@asteasolutions/zod-to-openapi'
import { z } from 'zod'
import { allContracts } from '@/shared/contracts/all-contracts'
import type { AnyContract } from '@/shared/contracts/contract'
import { problemCodes } from '@/shared/problems'
import packageJson from '@/package.json'
import { statusOfProblem } from './problems'

extendZodWithOpenApi(z)

const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  code: z.enum(problemCodes),
  fields: z.array(z.object({ path: z.string(), code: z.string(), detail: z.string() })).optional(),
  facts: z.record(z.string(), z.string()).optional(),
})

/** OpenAPI 3.1 of every contract: nothing is written here that the contracts do not say. */
export function openApiDocument() {
  const registry = new OpenAPIRegistry()
  registry.registerComponent('securitySchemes', 'accessToken', {
    type: 'http',
    scheme: 'bearer',
    bearerFormat: 'JWT',
  })
  const problem = registry.register('Problem', problemSchema)
  for (const contract of allContracts) registry.registerPath(pathOf(contract, problem))
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Ebbmark',
      version: packageJson.version,
      description:
        'The register of fluid drained from hydraulic machines. Quantities are decimal strings with a unit.',
    },
    servers: [{ url: '/api' }],
  })
}

function pathOf(contract: AnyContract, problem: z.ZodType): RouteConfig {
  const isPublic = contract.access === 'public'
  const codes = [
    ...contract.problems,
    ...(isPublic ? [] : (['sign-in-required', 'not-allowed'] as const)),
    'fields-refused' as const,
  ]
  const byStatus = new Map<number, string[]>()
  for (const code of new Set(codes)) {
    const status = statusOfProblem(code)
    byStatus.set(status, [...(byStatus.get(status) ?? []), code])
  }
  const problems = [...byStatus].map(([status, found]) => [
    status,
    { description: found.join(', '), content: { 'application/problem+json': { schema: problem } } },
  ])
  const hasBody =
    contract.method !== 'get' && contract.method !== 'delete' && keysOf(contract.body).length > 0
  return {
    method: contract.method,
    path: contract.path.replace(/:(\w+)/g, '{$1}'),
    operationId: contract.name,
    summary: contract.summary,
    tags: [contract.tag],
    security: isPublic ? [] : [{ accessToken: [] }],
    request: {
      ...(keysOf(contract.params).length > 0 ? { params: contract.params as z.ZodObject } : {}),
      ...(keysOf(contract.query).length > 0 ? { query: contract.query as z.ZodObject } : {}),
      ...(contract.versioned && contract.method === 'put'
        ? { headers: z.object({ 'If-Match': z.string() }) }
        : {}),
      ...(hasBody
        ? { body: { required: true, content: { 'application/json': { schema: contract.body } } } }
        : {}),
    },
    responses: { [contract.status]: successOf(contract), ...Object.fromEntries(problems) },
  }
}

function successOf(contract: AnyContract) {
  if (contract.status === 204) return { description: 'Done' }
  if (contract.replyType !== 'json') {
    return { description: 'A file', content: { [contract.replyType]: { schema: z.string() } } }
  }
  return { description: 'Done', content: { 'application/json': { schema: contract.reply } } }
}

function keysOf(schema: z.ZodType): string[] {
  return schema instanceof z.ZodObject ? Object.keys(schema.shape) : ['?']
}
