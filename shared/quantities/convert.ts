import configureMeasurements from 'convert-units'
import { Exact, isDecimal } from './decimals'
import { exactSize, isUnit, massUnits, measureOf, volumeUnits, type Unit } from './units'

export type QuantityErrorCode = 'not-a-decimal' | 'unknown-unit' | 'another-measure'

/** A conversion that cannot be made; never answered with 0. */
export class QuantityError extends Error {
  readonly code: QuantityErrorCode

  constructor(code: QuantityErrorCode, message: string) {
    super(message)
    this.name = 'QuantityError'
    this.code = code
  }
}

type Figure = InstanceType<typeof Exact>
type Given = string | number | Figure

/** convert-units' arithmetic, done exactly. */
const exactArithmetic = {
  create: (value: string | number) => new Exact(value),
  add: (left: Given, right: Given) => new Exact(left).plus(right),
  sub: (left: Given, right: Given) => new Exact(left).minus(right),
  mul: (left: Given, right: Given) => new Exact(left).times(right),
  div: (left: Given, right: Given) => new Exact(left).div(right),
  lt: (left: Given, right: Given) => new Exact(left).lt(right),
  lte: (left: Given, right: Given) => new Exact(left).lte(right),
  gt: (left: Given, right: Given) => new Exact(left).gt(right),
  gte: (left: Given, right: Given) => new Exact(left).gte(right),
}

/**
 * Our own measures: the library's published ratios miss NIST's seventh digit for several units (decision 3). One
 * system per measure, so that no inexact ratio between systems is ever used.
 */
function measureOfUnits(units: readonly Unit[]) {
  return {
    systems: {
      own: Object.fromEntries(
        units.map((unit) => [
          unit,
          { name: { singular: unit, plural: unit }, to_anchor: exactSize[unit] },
        ]),
      ),
    },
  }
}

const engine = configureMeasurements<'volume' | 'mass', 'own', Unit, Figure>(
  { volume: measureOfUnits(volumeUnits), mass: measureOfUnits(massUnits) },
  exactArithmetic,
)

/** Digits after the point that are kept where a ratio recurs (litres in gallons): far below any measurement. */
const recurringPlaces = 30

/**
 * Converts a decimal string between two units of one measure: exact where the ratio is a finite decimal, half-even
 * at 30 decimals where it recurs.
 * @throws QuantityError not-a-decimal ('' NaN Infinity 1e3 ...), unknown-unit, another-measure
 */
export function convert(value: string, from: Unit, to: Unit): string {
  if (typeof value !== 'string' || !isDecimal(value)) {
    throw new QuantityError('not-a-decimal', `"${String(value)}" is not a decimal figure`)
  }
  for (const unit of [from, to]) {
    if (!isUnit(unit)) throw new QuantityError('unknown-unit', `There is no unit "${String(unit)}"`)
  }
  if (measureOf(from) !== measureOf(to)) {
    throw new QuantityError('another-measure', `${from} and ${to} measure different things`)
  }
  // The engine's types say number, its code takes the decimal string that keeps the figure exact.
  const converted = engine(value as unknown as number)
    .from(from)
    .to(to)
  const text = new Exact(converted).toDecimalPlaces(recurringPlaces).toFixed()
  return text === '-0' ? '0' : text
}

/** Exact litres of a volume. */
export function toLitres(value: string, unit: Unit): string {
  return convert(value, unit, 'L')
}

/** Exact kilograms of a mass. */
export function toKilograms(value: string, unit: Unit): string {
  return convert(value, unit, 'kg')
}
