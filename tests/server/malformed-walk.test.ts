import type { Response } from 'supertest'
import { allContracts } from '@/shared/contracts/all-contracts'
import type { AnyContract } from '@/shared/contracts/contract'
import { can, roles } from '@/shared/policies'
import { problemCodes, type ProblemCode } from '@/shared/problems'
import { contractNamed, send, type AskedWorld } from '../helpers/requests/asked-request'
import { anAskedWorld } from '../helpers/requests/asked-world'
import { setUpRequests } from '../helpers/requests/set-up-requests'
import { workRequests } from '../helpers/requests/work-requests'
import { spoiled, type Spoiled } from '../helpers/requests/spoil'
import { testApp, type TestApp } from '../helpers/test-app'

/**
 * Every part of every request, spoiled in every way: whatever is sent, nothing ends in 500, a refusal is a problem
 * document of a known code that the API document announces, and a refused field is the one that was spoiled.
 */
const table = { ...setUpRequests, ...workRequests }

let product: TestApp
let world: AskedWorld

beforeAll(async () => {
  product = await testApp()
  world = await anAskedWorld(product)
})
afterAll(() => product.close())

const asked = allContracts
  .filter(({ access, body, query }) => {
    const parts = [body, query].flatMap((part) =>
      Object.keys('shape' in part ? (part.shape as object) : { of: part }),
    )
    return access !== 'public' && parts.length > 0
  })
  .map(({ name }) => name)

test.each(asked)('%s', async (name) => {
  const contract = contractNamed(name)
  const role = roles.find(
    (one) => contract.access !== 'public' && can({ role: one, siteIds: [] }, contract.access),
  )
  const bearer = role === undefined ? '' : world[role].bearer()
  const good = (await table[name]?.make(world)) ?? {}
  const found: string[] = []
  for (const bad of spoiled(good)) {
    const reply = await send(product, contract, bad.asked, bearer)
    found.push(...faultsOf(contract, reply, bad).map((fault) => `${bad.what}: ${fault}`))
  }
  expect(found).toEqual([])
})

/** What the contract says it may be refused with, and what every one may. */
function announced(contract: AnyContract): readonly ProblemCode[] {
  return [...contract.problems, 'fields-refused', 'body-unreadable', 'body-too-large']
}

function faultsOf(contract: AnyContract, reply: Response, bad: Spoiled): string[] {
  if (reply.status < 400) return []
  const { code, fields = [] } = reply.body as { code: ProblemCode; fields?: { path: string }[] }
  if (reply.status >= 500) return [`${reply.status} ${String(code)}`]
  if (!reply.type.startsWith('application/problem+json')) return [`answered as ${reply.type}`]
  if (!problemCodes.includes(code)) return [`unknown code ${String(code)}`]
  if (!announced(contract).includes(code)) return [`${String(code)} is not announced`]
  if (code !== 'fields-refused') return []
  // A first day after the last one is told at the last one.
  const paths = bad.path === 'startsOn' ? ['startsOn', 'endsOn'] : [bad.path]
  const isNamed = fields.some(
    ({ path }) =>
      paths.includes(path) || bad.path.startsWith(`${path}.`) || path.startsWith(bad.path),
  )
  return isNamed ? [] : [`names ${fields.map(({ path }) => path).join(', ') || 'no field'}`]
}
