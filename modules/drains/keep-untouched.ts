import type { DrainValues, FactsInput } from './drain-values'

/**
 * The form shows less than the facts may hold (seconds, several filter states, a bin of its own for absorbents):
 * what the person did not touch stays exactly as it was recorded.
 */
export function keepUntouched(
  facts: FactsInput,
  recorded: FactsInput,
  before: DrainValues,
  after: DrainValues,
): FactsInput {
  const isSame = (...fields: (keyof DrainValues)[]) =>
    fields.every((field) => JSON.stringify(before[field]) === JSON.stringify(after[field]))
  return {
    ...facts,
    ...(isSame('time') ? { occurredAt: recorded.occurredAt } : {}),
    ...(isSame('filterCounts', 'filterState') ? { filters: recorded.filters } : {}),
    ...(isSame('absorbentsTyped') ? { absorbents: recorded.absorbents } : {}),
    ...(isSame('refillTyped', 'unit') ? { refill: recorded.refill } : {}),
    ...(isSame('legs', 'typed', 'unit') ? { legs: recorded.legs } : {}),
  }
}
