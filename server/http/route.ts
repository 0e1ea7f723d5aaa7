import type { Request, RequestHandler, Response, Router } from 'express'
import type { z } from 'zod'
import type { Database, Transaction } from '@/db/client'
import { asMember } from '@/db/tenancy'
import type { AnyContract, Contract } from '@/shared/contracts/contract'
import type { FieldProblem } from '@/shared/problems'
import { can } from '@/shared/policies'
import type { ActContext, ActingPerson } from '../act-context'
import { getActingPerson } from '../people/get-acting-person'
import { Problem, problem } from '../problem'
import { claimsOf } from './authenticate'
import { fieldsOf } from './problems'

/** What routes are served with: handed in by createApp. */
export type Services = Omit<ActContext, 'person'> & { db: Database }

/** A file instead of JSON: bytes or text, with the name a person saves it under. */
export type FileReply = {
  bytes: Uint8Array | string
  name: string
  disposition: 'inline' | 'attachment'
}

type ReplyValue<C extends AnyContract> = C['replyType'] extends 'json'
  ? z.input<C['reply']>
  : z.input<C['reply']> | FileReply

type Input<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType> = {
  params: z.output<P>
  query: z.output<Q>
  body: z.output<B>
  /** Version from If-Match, of a versioned change. */
  ifMatch: string | undefined
  request: Request
  response: Response
  /** Call when the same request was answered before: the status is then 200 instead of 201. */
  repeated: () => void
}

export type MemberHandler<
  P extends z.ZodType,
  Q extends z.ZodType,
  B extends z.ZodType,
  R extends z.ZodType,
> = (
  tx: Transaction,
  context: ActContext,
  input: Input<P, Q, B>,
) => Promise<ReplyValue<Contract<P, Q, B, R>> | FileReply>

export type PublicHandler<
  P extends z.ZodType,
  Q extends z.ZodType,
  B extends z.ZodType,
  R extends z.ZodType,
> = (
  services: Services,
  input: Input<P, Q, B>,
) => Promise<ReplyValue<Contract<P, Q, B, R>> | FileReply>

/**
 * Serves a contract to signed-in members: reads and checks the request, opens ONE transaction as that member,
 * checks the policy, runs the act and sends the checked reply.
 */
export function serve<
  P extends z.ZodType,
  Q extends z.ZodType,
  B extends z.ZodType,
  R extends z.ZodType,
>(
  router: Router,
  services: Services,
  contract: Contract<P, Q, B, R>,
  handler: MemberHandler<P, Q, B, R>,
): void {
  const access = contract.access
  if (access === 'public') throw new Error(`${contract.name} is public: use servePublic`)
  mount(router, contract, async (request, response) => {
    const claims = claimsOf(request)
    // Who may not do this is told so before what they typed is judged.
    const repliedWith = await asMember(
      services.db,
      { organisationId: claims.organisationId, personId: claims.personId },
      async (tx) => {
        const person: ActingPerson = await getActingPerson(tx, claims)
        if (!can(person, access)) throw problem('not-allowed')
        const context: ActContext = { ...services, person }
        let isRepeated = false
        const input = {
          ...readRequest(contract, request),
          request,
          response,
          repeated: () => (isRepeated = true),
        }
        const reply = await handler(tx, context, input as Input<P, Q, B>)
        return { reply, isRepeated }
      },
    )
    send(contract, response, repliedWith.reply, repliedWith.isRepeated)
  })
}

/** Serves a contract to anyone. The handler opens its own transaction, as the service. */
export function servePublic<
  P extends z.ZodType,
  Q extends z.ZodType,
  B extends z.ZodType,
  R extends z.ZodType,
>(
  router: Router,
  services: Services,
  contract: Contract<P, Q, B, R>,
  handler: PublicHandler<P, Q, B, R>,
): void {
  if (contract.access !== 'public') throw new Error(`${contract.name} is not public: use serve`)
  mount(router, contract, async (request, response) => {
    let isRepeated = false
    const input = {
      ...readRequest(contract, request),
      request,
      response,
      repeated: () => (isRepeated = true),
    }
    const reply = await handler(services, input as Input<P, Q, B>)
    send(contract, response, reply, isRepeated)
  })
}

function mount(router: Router, contract: AnyContract, handler: RequestHandler): void {
  router[contract.method](contract.path, handler)
}

function readRequest(contract: AnyContract, request: Request) {
  const params = contract.params.safeParse(request.params)
  // An id that cannot be one names nothing.
  if (!params.success) throw problem('not-found')
  const query = contract.query.safeParse(request.query)
  const body = contract.body.safeParse(request.body ?? {})
  const fields: FieldProblem[] = [
    ...(query.success ? [] : fieldsOf(query.error, 'query')),
    ...(body.success ? [] : fieldsOf(body.error)),
  ]
  if (fields.length > 0 || !query.success || !body.success)
    throw new Problem('fields-refused', { fields })
  return {
    params: params.data,
    query: query.data,
    body: body.data,
    ifMatch: versionIn(contract, request),
  }
}

function versionIn(contract: AnyContract, request: Request): string | undefined {
  const sent = request.get('If-Match')?.replace(/^(W\/)?"?|"?$/g, '')
  if (contract.versioned && contract.method === 'put' && (sent === undefined || sent === '')) {
    throw problem('version-required')
  }
  return sent
}

function send(
  contract: AnyContract,
  response: Response,
  reply: unknown,
  isRepeated: boolean,
): void {
  response.set('Cache-Control', 'no-store')
  if (isFileReply(reply)) {
    response
      .status(200)
      .type(contract.replyType)
      .set('Content-Disposition', `${reply.disposition}; filename="${reply.name}"`)
      .send(typeof reply.bytes === 'string' ? reply.bytes : Buffer.from(reply.bytes))
    return
  }
  if (contract.status === 204) {
    response.status(204).end()
    return
  }
  // Parsing the reply strips whatever the contract does not name: no database shape leaves the server.
  const checked: unknown = contract.reply.parse(reply)
  if (contract.versioned) response.set('ETag', `"${(checked as { version: string }).version}"`)
  // A handler that set another status itself (health: 503) keeps it.
  if (response.statusCode === 200) response.status(isRepeated ? 200 : contract.status)
  response.json(checked)
}

function isFileReply(reply: unknown): reply is FileReply {
  return typeof reply === 'object' && reply !== null && 'bytes' in reply && 'disposition' in reply
}
