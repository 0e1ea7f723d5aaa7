import type { AnyContract, ReplyOf } from '@/shared/contracts/contract'
import { accessToken, refreshAccess } from './access-token'
import { fetchReply, fetchResponse, type AnyInput, type InputOf } from './fetch-reply'
import { isProblem } from './problem-error'

/**
 * Calls an endpoint: `call(readDrain, { params: { id } })`. Sends the bearer token, refreshes it once when it has
 * run out, and reads the reply with the contract's schema.
 * @throws ProblemError with the problem document when the server refuses; OfflineError when no answer came
 */
export function call<C extends AnyContract>(contract: C, input: InputOf<C>): Promise<ReplyOf<C>> {
  const { ifMatch } = input
  return withToken(contract, (token) => fetchReply(contract, input as AnyInput, { ifMatch, token }))
}

/** The same for endpoints that answer with a file. */
export function callForFile<C extends AnyContract>(
  contract: C,
  input: InputOf<C>,
): Promise<Response> {
  return withToken(contract, (token) => fetchResponse(contract, input as AnyInput, { token }))
}

async function withToken<T>(
  contract: AnyContract,
  send: (token: string | undefined) => Promise<T>,
): Promise<T> {
  if (contract.access === 'public') return send(undefined)
  const token = accessToken() ?? (await refreshAccess()).accessToken
  try {
    return await send(token)
  } catch (error) {
    if (!isProblem(error, 'sign-in-required')) throw error
    // Another call may have refreshed meanwhile: then its token is tried, and the cookie is spared.
    const newer = accessToken()
    const next =
      newer !== undefined && newer !== token ? newer : (await refreshAccess()).accessToken
    return send(next)
  }
}
