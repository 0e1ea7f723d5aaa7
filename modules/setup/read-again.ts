import { valuesOf, type SetUpRecord, type Values } from './form-values'
import type { Kind } from './kinds'

/** Does the form show the same of both, whatever else of the record changed (a permit, retiring)? */
export function looksTheSame(kind: Kind, one: SetUpRecord, other: SetUpRecord): boolean {
  return JSON.stringify(valuesOf(kind, one, {})) === JSON.stringify(valuesOf(kind, other, {}))
}

/**
 * A form read again after somebody else's change: what was typed stays, the fields left alone show what stands now.
 * @param clashes fields that were typed here and changed there, with what stands there now
 */
export function readAgain(
  kind: Kind,
  before: SetUpRecord,
  now: SetUpRecord,
  typed: Values,
): { values: Values; clashes: { name: string; now: string | string[] }[] } {
  const old = valuesOf(kind, before, {})
  const standing = valuesOf(kind, now, {})
  const same = (one: unknown, other: unknown) => JSON.stringify(one) === JSON.stringify(other)
  const values: Values = { ...typed }
  const clashes: { name: string; now: string | string[] }[] = []
  for (const { name } of kind.fields) {
    const stands = standing[name] ?? ''
    if (same(typed[name], old[name])) values[name] = stands
    else if (!same(stands, old[name]) && !same(stands, typed[name]))
      clashes.push({ name, now: stands })
  }
  return { values, clashes }
}
