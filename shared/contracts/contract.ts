import type { z } from 'zod'
import type { Act } from '../policies'
import type { ProblemCode } from '../problems'

/**
 * One endpoint, written once: the server serves it, the client calls it, the OpenAPI document is made from it.
 * `access` is 'public' for nobody-in-particular, otherwise the act of shared/policies.ts that is needed; where the
 * act depends on a site, the server checks the site of the record as well.
 */
export type Contract<
  Params extends z.ZodType = z.ZodType,
  Query extends z.ZodType = z.ZodType,
  Body extends z.ZodType = z.ZodType,
  Reply extends z.ZodType = z.ZodType,
> = {
  /** Unique name: the OpenAPI operationId. */
  name: string
  method: 'get' | 'post' | 'put' | 'delete'
  /** Below /api, Express style: `/drains/:id`. */
  path: string
  summary: string
  tag: string
  access: 'public' | Act
  params: Params
  query: Query
  body: Body
  reply: Reply
  /** Status of success; 201 where a record is made (200 when the same request is repeated). */
  status: 200 | 201 | 204
  /** 'json' unless the reply is a file. */
  replyType: 'json' | 'text/csv' | 'application/pdf'
  /** The reply carries an ETag, and a change needs If-Match. */
  versioned: boolean
  problems: readonly ProblemCode[]
}

export type AnyContract = Contract

export type ParamsOf<C extends AnyContract> = z.output<C['params']>
export type QueryOf<C extends AnyContract> = z.output<C['query']>
export type QueryInputOf<C extends AnyContract> = z.input<C['query']>
export type BodyOf<C extends AnyContract> = z.output<C['body']>
export type BodyInputOf<C extends AnyContract> = z.input<C['body']>
export type ReplyOf<C extends AnyContract> = z.output<C['reply']>
