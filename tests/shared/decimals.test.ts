import fc from 'fast-check'
import { convert, toLitres } from '@/shared/quantities/convert'
import {
  add,
  compare,
  divide,
  isDecimal,
  multiply,
  negate,
  normalise,
  rootOfSquares,
  subtract,
  sum,
} from '@/shared/quantities/decimals'
import { volumeUnits } from '@/shared/quantities/units'

test('ten entries of 0.1 gal are exactly 1 gal', () => {
  const entries = Array.from({ length: 10 }, () => toLitres('0.1', 'gal_us'))
  expect(sum(entries)).toBe(toLitres('1', 'gal_us'))
  // What floating point makes of it.
  expect(entries.reduce((total, litres) => total + Number(litres), 0)).not.toBe(3.785411784)
})

const typed = fc
  .tuple(fc.integer({ min: 0, max: 99_999_999 }), fc.integer({ min: 0, max: 99_999 }))
  .map(([whole, part]) => `${whole}.${String(part).padStart(5, '0')}`)
const unit = fc.constantFrom(...volumeUnits)

test('what is typed comes back from litres exactly, in any unit', () => {
  fc.assert(
    fc.property(typed, unit, (value, from) => {
      expect(convert(toLitres(value, from), 'L', from)).toBe(normalise(value))
    }),
  )
})

test('litres of typed figures need at most eighteen decimals', () => {
  fc.assert(
    fc.property(typed, unit, (value, from) => {
      expect(toLitres(value, from).split('.')[1]?.length ?? 0).toBeLessThanOrEqual(18)
    }),
  )
})

test('sums do not depend on order or on how an entry is split', () => {
  fc.assert(
    fc.property(fc.array(typed, { maxLength: 12 }), typed, typed, unit, (values, a, b, from) => {
      const litres = values.map((value) => toLitres(value, from))
      expect(sum([...litres].reverse())).toBe(sum(litres))
      expect(toLitres(add(a, b), from)).toBe(add(toLitres(a, from), toLitres(b, from)))
    }),
  )
})

test('conversion keeps the order', () => {
  fc.assert(
    fc.property(typed, typed, unit, (a, b, from) => {
      expect(compare(toLitres(a, from), toLitres(b, from))).toBe(compare(a, b))
    }),
  )
})

test('figures of twenty digits before and eighteen behind the point lose nothing', () => {
  const large = '99999999999999999999.999999999999999999'
  expect(add(large, '0.000000000000000001')).toBe('100000000000000000000')
  expect(subtract(add(large, large), large)).toBe(large)
  expect(negate(negate(large))).toBe(large)
  expect(multiply('0.1', '0.2')).toBe('0.02')
})

test('nothing but a plain decimal is read', () => {
  expect(['1', '-1.50', '007'].every(isDecimal)).toBe(true)
  expect(['', '1e3', 'NaN', '1,5', ' 1', '+1'].some(isDecimal)).toBe(false)
  expect(() => add('1', 'x')).toThrow(RangeError)
  expect(() => divide('1', '0', 3)).toThrow(RangeError)
})

test('spreads combine as the root of their squares', () => {
  expect(rootOfSquares(['3', '4'])).toBe('5')
  expect(sum([])).toBe('0')
})
