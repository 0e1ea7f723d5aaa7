import { Decimal } from 'decimal.js'

/**
 * Exact arithmetic on decimal strings. 50 digits hold every product of a figure of numeric(38,18) with an exact
 * factor; only `divide` may round, half-even, to the places it is given.
 */
export const Exact = Decimal.clone({
  precision: 60,
  rounding: Decimal.ROUND_HALF_EVEN,
  toExpNeg: -60,
  toExpPos: 60,
})

const plainDecimal = /^-?\d+(\.\d+)?$/

/** Is this a plain decimal figure: digits, one point, at most a minus in front? */
export function isDecimal(text: string): boolean {
  return plainDecimal.test(text)
}

function read(value: string): Decimal {
  if (!isDecimal(value)) throw new RangeError(`"${value}" is not a decimal figure`)
  return new Exact(value)
}

function write(value: Decimal): string {
  const text = value.toFixed()
  return text === '-0' ? '0' : text
}

export function add(a: string, b: string): string {
  return write(read(a).plus(read(b)))
}

export function subtract(a: string, b: string): string {
  return write(read(a).minus(read(b)))
}

/** Sum of all figures; '0' of none. The order does not matter: nothing is rounded. */
export function sum(values: readonly string[]): string {
  return write(values.reduce((total, value) => total.plus(read(value)), new Exact(0)))
}

export function multiply(a: string, b: string): string {
  return write(read(a).times(read(b)))
}

/** a / b rounded once, half-even, to `places` decimals. @throws RangeError when b is zero */
export function divide(a: string, b: string, places: number): string {
  const divisor = read(b)
  if (divisor.isZero()) throw new RangeError('division by zero')
  return write(read(a).div(divisor).toDecimalPlaces(places, Decimal.ROUND_HALF_EVEN))
}

/** -1, 0 or 1 as a is below, equal to or above b. */
export function compare(a: string, b: string): -1 | 0 | 1 {
  return read(a).comparedTo(read(b)) as -1 | 0 | 1
}

export function isZero(a: string): boolean {
  return read(a).isZero()
}

export function isPositive(a: string): boolean {
  return read(a).gt(0)
}

export function isNegative(a: string): boolean {
  return read(a).lt(0)
}

export function negate(a: string): string {
  return write(read(a).negated())
}

export function absolute(a: string): string {
  return write(read(a).abs())
}

export function smaller(a: string, b: string): string {
  return compare(a, b) <= 0 ? a : b
}

/** Rounded half-even (NIST SP 811 B.7.1: a 5 followed by zeros goes to the even digit), padded to `places`. */
export function roundHalfEven(a: string, places: number): string {
  const text = read(a).toFixed(places, Decimal.ROUND_HALF_EVEN)
  return /^-0(\.0*)?$/.test(text) ? text.slice(1) : text
}

/** The same figure without trailing zeros: what two equal figures have in common ('18.500' -> '18.5'). */
export function normalise(a: string): string {
  return write(read(a))
}

/** Square root of a sum of squares, to 6 decimals: how independent spreads combine. */
export function rootOfSquares(values: readonly string[]): string {
  const total = values.reduce((so, value) => so.plus(read(value).pow(2)), new Exact(0))
  return write(total.sqrt().toDecimalPlaces(6, Decimal.ROUND_HALF_EVEN))
}
