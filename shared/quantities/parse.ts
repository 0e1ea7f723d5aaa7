import { compare, isPositive } from './decimals'
import { measureOf, type Measure, type Unit } from './units'

export type ParseFailure =
  'empty' | 'not-a-number' | 'not-positive' | 'too-many-decimals' | 'unknown-unit' | 'too-large'

export type ParsedQuantity =
  { ok: true; value: string; unit: Unit; unitWasTyped: boolean } | { ok: false; code: ParseFailure }

/** What people type after a figure. A bare `gal` is the gallon of the place: the default unit decides. */
const typedUnits: Record<string, Unit> = {
  ml: 'mL',
  l: 'L',
  lt: 'L',
  ltr: 'L',
  litre: 'L',
  litres: 'L',
  liter: 'L',
  liters: 'L',
  m3: 'm3',
  floz: 'fl_oz_us',
  pt: 'pint_us',
  pint: 'pint_us',
  pints: 'pint_us',
  qt: 'quart_us',
  quart: 'quart_us',
  quarts: 'quart_us',
  bbl: 'bbl_petroleum',
  impgal: 'gal_imp',
  usgal: 'gal_us',
  g: 'g',
  kg: 'kg',
  kgs: 'kg',
  t: 'tonne',
  tonne: 'tonne',
  tonnes: 'tonne',
  oz: 'oz_avdp',
  lb: 'lb_avdp',
  lbs: 'lb_avdp',
}
const gallonWords = ['gal', 'gals', 'gallon', 'gallons', 'g']

/** A figure above this is a slip, whatever the unit. */
const most = '10000000'

/**
 * Reads a typed quantity: `18.5`, `18,5` where the locale writes so, `1 850`, `1,850` elsewhere, `18.5 gal`, `70 l`.
 * A typed unit wins over the default and `unitWasTyped` says so.
 * @param options.locale BCP 47; decides whether a comma is a decimal or a grouping sign
 * @param options.maxDecimals 5 unless told
 */
export function parseQuantity(
  typed: string,
  options: { defaultUnit: Unit; measure: Measure; locale?: string; maxDecimals?: number },
): ParsedQuantity {
  const text = typed.normalize('NFKC').trim()
  if (text === '') return { ok: false, code: 'empty' }
  const match = /^([-+−]?[\d\s.,'’]*\d[\d\s.,'’]*?)\s*([a-zA-Z][a-zA-Z0-9 .]*)?$/.exec(text)
  if (match === null) return { ok: false, code: 'not-a-number' }
  const figure = plainFigure(match[1] ?? '', options.locale ?? 'en-US')
  if (figure === undefined) return { ok: false, code: 'not-a-number' }
  const unit = unitTyped(match[2], options)
  if (unit === undefined) return { ok: false, code: 'unknown-unit' }
  if (!isPositive(figure)) return { ok: false, code: 'not-positive' }
  const decimals = figure.split('.')[1]?.length ?? 0
  if (decimals > (options.maxDecimals ?? 5)) return { ok: false, code: 'too-many-decimals' }
  if (compare(figure, most) > 0) return { ok: false, code: 'too-large' }
  return { ok: true, value: figure, unit, unitWasTyped: match[2] !== undefined }
}

function unitTyped(
  word: string | undefined,
  options: { defaultUnit: Unit; measure: Measure },
): Unit | undefined {
  if (word === undefined) return options.defaultUnit
  const plain = word.toLowerCase().replace(/[\s.]/g, '')
  const isGallon = options.measure === 'volume' && gallonWords.includes(plain)
  if (isGallon) return options.defaultUnit === 'gal_imp' ? 'gal_imp' : 'gal_us'
  const unit = typedUnits[plain]
  return unit !== undefined && measureOf(unit) === options.measure ? unit : undefined
}

/** `1 850,50` -> `1850.50`; undefined where the signs do not make one figure. */
function plainFigure(text: string, locale: string): string | undefined {
  const point = decimalSign(locale)
  const signed = text.replace('−', '-').replace(/[\s'’]/g, '')
  const sign = /^[-+]/.test(signed) ? signed[0] : ''
  const digits = sign === '' ? signed : signed.slice(1)
  const marks = digits.match(/[.,]/g) ?? []
  const plain = withoutGrouping(digits, marks, point)
  if (plain === undefined || !/^\d*\.?\d*$/.test(plain) || !/\d/.test(plain)) return undefined
  const [whole = '', fraction] = plain.split('.')
  const value = (whole.replace(/^0+(?=\d)/, '') || '0') + (fraction ? `.${fraction}` : '')
  return sign === '-' ? `-${value}` : value
}

function withoutGrouping(digits: string, marks: string[], point: string): string | undefined {
  if (marks.length === 0) return digits
  const last = marks.at(-1) ?? point
  const kinds = new Set(marks)
  if (kinds.size === 2) {
    // Two kinds of marks: the last one is the decimal sign, the others group.
    if (marks.filter((mark) => mark === last).length > 1) return undefined
    return digits.replaceAll(last === ',' ? '.' : ',', '').replace(last, '.')
  }
  if (marks.length > 1)
    return /^\d{1,3}([.,]\d{3})+$/.test(digits) ? digits.replaceAll(last, '') : undefined
  // One mark that is not the locale's decimal sign groups only when exactly three digits follow it.
  if (last !== point && /^\d{1,3}[.,]\d{3}$/.test(digits)) return digits.replace(last, '')
  return digits.replace(last, '.')
}

function decimalSign(locale: string): string {
  const part = new Intl.NumberFormat(locale)
    .formatToParts(1.5)
    .find(({ type }) => type === 'decimal')
  return part?.value ?? '.'
}
