import type { AnyContract } from './contract'
import * as books from './books'
import * as containers from './containers'
import * as drains from './drains'
import * as limits from './limits'
import * as pickups from './pickups'
import * as session from './session'
import * as setUp from './set-up'

function isContract(value: unknown): value is AnyContract {
  return typeof value === 'object' && value !== null && 'replyType' in value && 'path' in value
}

/** Contracts stand alone or in groups of one record's acts; both count. */
function contractsIn(file: Record<string, unknown>): AnyContract[] {
  return Object.values(file).flatMap((value) => {
    if (isContract(value)) return [value]
    if (typeof value !== 'object' || value === null) return []
    return Object.values(value).filter(isContract)
  })
}

/** Every endpoint of the product, for the OpenAPI document and for tests that walk them all. */
export const allContracts: AnyContract[] = [
  session,
  setUp,
  drains,
  containers,
  pickups,
  books,
  limits,
].flatMap((file) => contractsIn(file))
