import { convert, QuantityError } from '@/shared/quantities/convert'
import { exactSize, massUnits, measureOf, volumeUnits, type Unit } from '@/shared/quantities/units'
import table from './nist-sp-811.json'

/** A fraction in whole numbers: arithmetic that shares nothing with the code under test. */
type Fraction = { top: bigint; bottom: bigint }

function fraction(text: string): Fraction {
  const [top = '', bottom = '1'] = text.split('/')
  return { top: BigInt(top), bottom: BigInt(bottom) }
}

function ofDecimal(text: string): Fraction {
  const [whole = '', part = ''] = text.split('.')
  return { top: BigInt(whole + part), bottom: 10n ** BigInt(part.length) }
}

function over(a: Fraction, b: Fraction): Fraction {
  return { top: a.top * b.bottom, bottom: a.bottom * b.top }
}

/** Rounded half-even to `places`, as a plain decimal without trailing zeros. */
function decimal({ top, bottom }: Fraction, places: number): string {
  const scaled = top * 10n ** BigInt(places)
  const below = scaled / bottom
  const twice = 2n * (scaled % bottom)
  const isUp = twice > bottom || (twice === bottom && below % 2n === 1n)
  const digits = (below + (isUp ? 1n : 0n)).toString().padStart(places + 1, '0')
  const text = `${digits.slice(0, -places)}.${digits.slice(-places)}`
  return text.replace(/\.?0+$/, '')
}

const units = table.units as (Omit<(typeof table.units)[number], 'id'> & { id: Unit })[]
const base = (unit: Unit) => (measureOf(unit) === 'volume' ? 'm3' : 'kg')

test('every unit of the product is in the table', () => {
  expect(units.map(({ id }) => id).sort()).toEqual([...volumeUnits, ...massUnits].sort())
})

// Source: NIST SP 811 (2008), Appendix B.8 and B.9, as printed.
test.each(units.filter(({ printed }) => printed !== null))(
  '$id is $printed $toUnit as NIST prints it',
  ({ id, printed, printedBoldExact }) => {
    const [mantissa = '', exponent = '0'] = (printed ?? '').replace(/ (?=\d)/g, '').split(' E')
    const shown = Number(mantissa) * 10 ** Number(exponent)
    const ours = Number(convert('1', id, base(id)))
    const digits = mantissa.split('.')[1]?.length ?? 0
    // Half a unit of the last digit printed; nothing at all where the factor is exact.
    const off = printedBoldExact
      ? 1e-15 * shown
      : 0.5 * 10 ** (Number(exponent) - digits) * (1 + 1e-9)
    expect(Math.abs(ours - shown)).toBeLessThanOrEqual(off)
  },
)

// Source: the definitions named in the table's derivations.
test.each(units)('$id is exactly $exactFraction $toUnit', ({ id, exactFraction }) => {
  expect(convert('1', id, base(id))).toBe(decimal(fraction(exactFraction), 30))
})

const pairs = [volumeUnits, massUnits].flatMap((same: readonly Unit[]) =>
  same.flatMap((from) => same.map((to) => ({ from, to }))),
)

test.each(pairs)('18.375 $from in $to is right to the thirtieth decimal', ({ from, to }) => {
  const size = (unit: Unit) => ofDecimal(exactSize[unit])
  const one = over(size(from), size(to))
  const typed = ofDecimal('18.375')
  const wanted = { top: one.top * typed.top, bottom: one.bottom * typed.bottom }
  expect(convert('18.375', from, to)).toBe(decimal(wanted, 30))
})

// Identities of the inch, the gallon and the pound; worked by hand.
test.each([
  ['1', 'gal_us', 'in3', '231'],
  ['1', 'gal_us', 'fl_oz_us', '128'],
  ['1', 'bbl_petroleum', 'gal_us', '42'],
  ['1', 'yd3', 'ft3', '27'],
  ['1', 'ft3', 'in3', '1728'],
  ['1', 'gal_imp', 'fl_oz_imp', '160'],
  ['1', 'ton_short', 'lb_avdp', '2000'],
  ['1', 'ton_long', 'lb_avdp', '2240'],
  ['1', 'lb_avdp', 'oz_avdp', '16'],
  ['55', 'gal_us', 'L', '208.19764812'],
] as const)('%s %s is %s: %s', (value, from, to, wanted) => {
  expect(convert(value, from, to)).toBe(wanted)
})

test.each(['', ' ', 'NaN', 'Infinity', '1e3', '0x10', '1,5', '+1', '.5', '1.', '--1'])(
  '"%s" is refused, never taken for 0',
  (value) => {
    expect(() => convert(value, 'L', 'gal_us')).toThrow(QuantityError)
  },
)

test('an unknown unit and a unit of another measure are refused by name', () => {
  expect(() => convert('1', 'firkin' as Unit, 'L')).toThrow(
    expect.objectContaining({ code: 'unknown-unit' }),
  )
  expect(() => convert('1', 'L', 'toString' as Unit)).toThrow(
    expect.objectContaining({ code: 'unknown-unit' }),
  )
  expect(() => convert('1', 'L', 'kg')).toThrow(
    expect.objectContaining({ code: 'another-measure' }),
  )
})
