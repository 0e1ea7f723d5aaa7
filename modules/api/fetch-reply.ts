import type { z } from 'zod'
import type { AnyContract, ReplyOf } from '@/shared/contracts/contract'
import { problemCodes, type ProblemCode, type ProblemDocument } from '@/shared/problems'
import { OfflineError, ProblemError } from './problem-error'

/** `{}` fits a schema that asks for nothing in particular: then the part may be left out. */
type Part<Name extends string, Value> =
  Record<never, never> extends Value ? { [key in Name]?: Value } : { [key in Name]: Value }

/** What a call of this contract needs: only what its schemas ask for. */
export type InputOf<C extends AnyContract> = Part<'params', z.input<C['params']>> &
  Part<'query', z.input<C['query']>> &
  Part<'body', z.input<C['body']>> & {
    /** Version of the record for a versioned change: its `version`. */
    ifMatch?: string
  }

/** The same, as any contract may have it. */
export type AnyInput = { params?: unknown; query?: unknown; body?: unknown }

export type CallOptions = { ifMatch?: string; token?: string }

/** Longer than any act takes; a phone that moved out of reach is told after this. */
const patienceMs = 30_000

/**
 * One request, its reply read with the contract's schema. Knows nothing of sessions: call.ts adds the token.
 * @throws ProblemError when the server refuses, OfflineError when no answer came
 */
export async function fetchReply<C extends AnyContract>(
  contract: C,
  input: AnyInput,
  options: CallOptions = {},
): Promise<ReplyOf<C>> {
  const response = await fetchResponse(contract, input, options)
  const body = response.status === 204 ? undefined : await readJson(response)
  const reply = contract.reply.safeParse(body)
  if (!reply.success) throw new ProblemError(unreadableReply(response.status))
  return reply.data as ReplyOf<C>
}

/** The response itself, for replies that are files. Refusals are thrown as for `fetchReply`. */
export async function fetchResponse(
  contract: AnyContract,
  input: AnyInput,
  options: CallOptions = {},
): Promise<Response> {
  const patience = new AbortController()
  const timer = setTimeout(() => patience.abort(), patienceMs)
  let response: Response
  try {
    response = await fetch(addressOf(contract, input), {
      method: contract.method.toUpperCase(),
      headers: headersOf(contract, input, options),
      body: input.body === undefined ? undefined : JSON.stringify(input.body),
      credentials: 'same-origin',
      signal: patience.signal,
    })
  } catch (error) {
    throw new OfflineError(error)
  } finally {
    clearTimeout(timer)
  }
  if (!response.ok) throw await refusalOf(response)
  return response
}

/** `/api/drains/<id>?site=...`: parameters filled into the contract's path, empty query values left out. */
export function addressOf(contract: AnyContract, input: AnyInput): string {
  const params = (input.params ?? {}) as Record<string, unknown>
  const path = contract.path.replace(/:(\w+)/g, (_, name: string) =>
    encodeURIComponent(String(params[name])),
  )
  const query = new URLSearchParams()
  for (const [name, value] of Object.entries((input.query ?? {}) as Record<string, unknown>)) {
    if (value !== undefined && value !== null && value !== '') query.append(name, String(value))
  }
  const asked = query.toString()
  return `/api${path}${asked === '' ? '' : `?${asked}`}`
}

function headersOf(contract: AnyContract, input: AnyInput, options: CallOptions): HeadersInit {
  return {
    Accept: contract.replyType,
    ...(input.body === undefined ? {} : { 'Content-Type': 'application/json' }),
    ...(options.token === undefined ? {} : { Authorization: `Bearer ${options.token}` }),
    ...(options.ifMatch === undefined ? {} : { 'If-Match': `"${options.ifMatch}"` }),
  }
}

async function readJson(response: Response): Promise<unknown> {
  try {
    return await response.json()
  } catch (error) {
    // Cut off in the middle: what the server did is not known.
    throw new OfflineError(error)
  }
}

async function refusalOf(response: Response): Promise<Error> {
  const type = response.headers.get('Content-Type') ?? ''
  const document: unknown = type.includes('json')
    ? await response.json().catch(() => undefined)
    : undefined
  if (isProblemDocument(document)) return new ProblemError(document)
  // A proxy or a portal answered, not the product.
  return new OfflineError(new Error(`status ${response.status}`))
}

function isProblemDocument(value: unknown): value is ProblemDocument {
  if (typeof value !== 'object' || value === null || !('code' in value)) return false
  return problemCodes.includes(value.code as ProblemCode)
}

function unreadableReply(status: number): ProblemDocument {
  return {
    type: 'about:blank',
    title: 'internal',
    detail: 'internal',
    status,
    code: 'internal',
  }
}
