import { convert } from './convert'
import { compare, roundHalfEven } from './decimals'
import { unitSymbol, type Unit, type VolumeUnit } from './units'

export type FormatOptions = {
  /** BCP 47; 'en-US' unless told. */
  locale?: string
  /** Decimals to show; the unit's own unless told. */
  decimals?: number
  withUnit?: boolean
}

/** One decimal for gallons and litres, none for kilograms: finer than any yard measures. */
export function defaultDecimals(unit: Unit): number {
  if (unit === 'mL' || unit === 'g' || unit === 'kg') return 0
  if (unit === 'm3' || unit === 'tonne' || unit === 'ton_short' || unit === 'ton_long') return 3
  return 1
}

/** `18.5 gal`: rounded once half-even, grouped by the locale, with a real minus sign. */
export function formatQuantity(value: string, unit: Unit, options: FormatOptions = {}): string {
  const figure = formatFigure(value, options.decimals ?? defaultDecimals(unit), options.locale)
  return options.withUnit === false ? figure : `${figure}\u00a0${unitSymbol(unit)}`
}

/** What a person typed, with its unit, exactly as typed apart from grouping: `18.50 gal`. */
export function formatTyped(value: string, unit: Unit, options: FormatOptions = {}): string {
  const decimals = value.split('.')[1]?.length ?? 0
  return formatQuantity(value, unit, { ...options, decimals })
}

/** Exact litres shown in a volume unit: converted exactly, rounded once. */
export function formatLitresAs(
  litres: string,
  unit: VolumeUnit,
  options: FormatOptions = {},
): string {
  return formatQuantity(convert(litres, 'L', unit), unit, options)
}

/** A decimal string with the locale's grouping; never through a float. */
export function formatFigure(value: string, decimals: number, locale = 'en-US'): string {
  const rounded = roundHalfEven(value, decimals)
  const isBelowZero = compare(rounded, '0') < 0
  const [whole = '0', fraction] = rounded.replace('-', '').split('.')
  const parts = new Intl.NumberFormat(locale).formatToParts(1234567.8)
  const group = parts.find(({ type }) => type === 'group')?.value ?? ','
  const point = parts.find(({ type }) => type === 'decimal')?.value ?? '.'
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, group)
  return `${isBelowZero ? '\u2212' : ''}${grouped}${fraction === undefined ? '' : point + fraction}`
}
