import type { AnyContract } from '@/shared/contracts/contract'
import type { AnyInput } from './fetch-reply'

/** Key of a cached reply: the contract's name, then what was asked. */
export type ReplyKey = readonly [name: string, input: AnyInput]

export function keyOf(contract: AnyContract, input: AnyInput): ReplyKey {
  return [contract.name, withoutGaps(input)]
}

/** Filter for swr's mutate: every cached reply of these contracts, whatever was asked. */
export function isReplyOf(names: readonly string[]): (key: unknown) => boolean {
  return (key) => Array.isArray(key) && typeof key[0] === 'string' && names.includes(key[0])
}

/** `undefined` and a left-out field ask the same: they share one key. */
function withoutGaps(input: AnyInput): AnyInput {
  return JSON.parse(JSON.stringify(input)) as AnyInput
}
