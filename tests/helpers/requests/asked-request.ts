import request, { type Response } from 'supertest'
import { allContracts } from '@/shared/contracts/all-contracts'
import type { AnyContract } from '@/shared/contracts/contract'
import type { Member } from '../factories'
import type { PickupYard } from '../pickups'
import type { TestApp } from '../test-app'

/** Parts of one request, as its contract names them. */
export type AskedRequest = {
  params?: Record<string, string>
  query?: Record<string, unknown>
  body?: unknown
  version?: string
}

/** A yard with its people: who asks, and what is asked for. */
export type AskedWorld = PickupYard & {
  technician: Member
  auditor: Member
  administrator: Member
  /** What the request of changing the own password changes: of the one who asks. */
  nextPassword: () => string
}

/** Makes a request that its contract, the policy and the state of the world allow; fresh at every call. */
export type MakeRequest = (world: AskedWorld) => Promise<AskedRequest> | AskedRequest

export type RequestTable = Record<
  string,
  {
    /** Whose rows it reaches into: of a site, of the organisation, or of nobody else than who asks. */
    reach: 'site' | 'organisation' | 'own'
    make: MakeRequest
  }
>

export function contractNamed(name: string): AnyContract {
  const found = allContracts.find((contract) => contract.name === name)
  if (found === undefined) throw new Error(`no contract is called ${name}`)
  return found
}

/** Sends a request of a contract; nobody's without a bearer. */
export async function send(
  test: TestApp,
  contract: AnyContract,
  asked: AskedRequest,
  bearer: string | null,
): Promise<Response> {
  const path = contract.path.replace(/:(\w+)/g, (_, name: string) =>
    encodeURIComponent(asked.params?.[name] ?? ''),
  )
  const sent = request(test.app)[contract.method](`/api${path}`)
  if (bearer !== null) void sent.set('Authorization', bearer)
  if (asked.version !== undefined) void sent.set('If-Match', `"${asked.version}"`)
  if (asked.query !== undefined) void sent.query(asked.query)
  if (asked.body === undefined) return sent
  return sent.set('Content-Type', 'application/json').send(JSON.stringify(asked.body))
}
