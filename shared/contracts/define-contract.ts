import type { z } from 'zod'
import type { Contract } from './contract'
import { nothing } from './values'

type Given<
  Params extends z.ZodType,
  Query extends z.ZodType,
  Body extends z.ZodType,
  Reply extends z.ZodType,
> = Pick<
  Contract<Params, Query, Body, Reply>,
  'name' | 'method' | 'path' | 'summary' | 'tag' | 'access' | 'reply'
> & {
  params?: Params
  query?: Query
  body?: Body
} & Partial<Pick<Contract, 'status' | 'replyType' | 'versioned' | 'problems'>>

/** Fills in what most endpoints leave out: no parameters, 200, JSON, no version. */
export function defineContract<
  Reply extends z.ZodType,
  Params extends z.ZodType = typeof nothing,
  Query extends z.ZodType = typeof nothing,
  Body extends z.ZodType = typeof nothing,
>(given: Given<Params, Query, Body, Reply>): Contract<Params, Query, Body, Reply> {
  return {
    status: 200,
    replyType: 'json',
    versioned: false,
    problems: [],
    ...given,
    // The defaults are `nothing` exactly when the type parameters are: the casts say what the signature says.
    params: given.params ?? (nothing as unknown as Params),
    query: given.query ?? (nothing as unknown as Query),
    body: given.body ?? (nothing as unknown as Body),
  }
}
