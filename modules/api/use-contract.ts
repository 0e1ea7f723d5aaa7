import useSWR, { useSWRConfig, unstable_serialize } from 'swr'
import type { AnyContract, ReplyOf } from '@/shared/contracts/contract'
import { call } from './call'
import type { InputOf } from './fetch-reply'
import { keyOf } from './keys'
import { OfflineError, type ProblemError } from './problem-error'

/** What is cached: the reply and when the server gave it (ISO). */
export type CachedReply<Reply> = { reply: Reply; at: string }

export type ContractReply<C extends AnyContract> = {
  data: ReplyOf<C> | undefined
  error: ProblemError | OfflineError | undefined
  isLoading: boolean
  isRefreshing: boolean
  /** ISO instant the shown data is of; say "as of" when `isStale`. */
  asOf: string | undefined
  /** Shown from the cache while the server does not answer. */
  isStale: boolean
  refresh: () => Promise<void>
}

/**
 * The reply of a reading contract, cached, kept on the phone and fetched again on focus and reconnect.
 * @param input null: not asked yet
 */
export function useContract<C extends AnyContract>(
  contract: C,
  input: InputOf<C> | null,
): ContractReply<C> {
  const { cache } = useSWRConfig()
  const key = input === null ? null : keyOf(contract, input)
  const answer = useSWR<CachedReply<ReplyOf<C>>, ProblemError | OfflineError>(key, async () => {
    const reply = await call(contract, input as InputOf<C>)
    const before = cache.get(unstable_serialize(key))?.data as CachedReply<ReplyOf<C>> | undefined
    return {
      reply: sameIfEqual(before?.reply, reply),
      at: new Date().toISOString(),
    }
  })
  return {
    data: answer.data?.reply,
    error: answer.error,
    isLoading: key !== null && answer.data === undefined && answer.error === undefined,
    isRefreshing: answer.isValidating,
    asOf: answer.data?.at,
    isStale: answer.data !== undefined && answer.error instanceof OfflineError,
    refresh: async () => {
      await answer.mutate()
    },
  }
}

/** An unchanged reply keeps its identity, so that a form filled from it is not reset under the person's hands. */
function sameIfEqual<T>(before: T | undefined, now: T): T {
  return before !== undefined && JSON.stringify(before) === JSON.stringify(now) ? before : now
}
