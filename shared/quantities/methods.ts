import { rootOfSquares } from './decimals'

/**
 * How a volume was measured, each with the spread shown beside the figure, in per cent. The spreads are common
 * practice in workshops, not from a standard; a person may give their own.
 */
export const measuringMethods = [
  'pump-meter',
  'marked-pail',
  'dip-stick',
  'sight-gauge',
  'weighed',
  'filled-to-line',
  'estimate',
] as const

export type MeasuringMethod = (typeof measuringMethods)[number]

const spreads: Record<MeasuringMethod, string> = {
  'pump-meter': '1',
  'marked-pail': '3',
  'dip-stick': '2',
  'sight-gauge': '3',
  weighed: '0.5',
  'filled-to-line': '5',
  estimate: '10',
}

/** Spread of a method in per cent, as a decimal string. */
export function spreadOf(method: MeasuringMethod): string {
  return spreads[method]
}

/** Only what nobody measured is an estimate; it stays one for ever. */
export function isEstimate(method: MeasuringMethod): boolean {
  return method === 'estimate'
}

/** Spreads of independent figures, in one unit, combined: the root of the sum of their squares. */
export function combineSpreads(spreadsInOneUnit: readonly string[]): string {
  return rootOfSquares(spreadsInOneUnit)
}
