import { parseQuantity } from '@/shared/quantities/parse'

const inGallons = { defaultUnit: 'gal_us', measure: 'volume' } as const

test.each([
  ['18.5', '18.5', 'gal_us', false],
  ['18,5', '18.5', 'gal_us', false],
  ['1 850', '1850', 'gal_us', false],
  ['1\u202f850', '1850', 'gal_us', false],
  ['1,850', '1850', 'gal_us', false],
  ['1,850.25', '1850.25', 'gal_us', false],
  ['1.850,25', '1850.25', 'gal_us', false],
  ['.5', '0.5', 'gal_us', false],
  ['007', '7', 'gal_us', false],
  ['18.5 gal', '18.5', 'gal_us', true],
  ['70 l', '70', 'L', true],
  ['70L', '70', 'L', true],
  ['12 qt', '12', 'quart_us', true],
])('"%s" is %s %s', (typed, value, unit, unitWasTyped) => {
  expect(parseQuantity(typed, inGallons)).toEqual({ ok: true, value, unit, unitWasTyped })
})

test.each([
  ['', 'empty'],
  ['   ', 'empty'],
  ['abc', 'not-a-number'],
  ['1.2.3', 'not-a-number'],
  ['1,2,3', 'not-a-number'],
  ['0', 'not-positive'],
  ['-3', 'not-positive'],
  ['\u22123', 'not-positive'],
  ['1e5', 'unknown-unit'],
  ['2 lb', 'unknown-unit'],
  ['2 barrows', 'unknown-unit'],
  ['1.123456', 'too-many-decimals'],
  ['99999999', 'too-large'],
])('"%s" is refused: %s', (typed, code) => {
  expect(parseQuantity(typed, inGallons)).toEqual({ ok: false, code })
})

test('a comma is the decimal sign where the place writes so', () => {
  const german = { defaultUnit: 'L', measure: 'volume', locale: 'de-DE' } as const
  expect(parseQuantity('1,850', german)).toMatchObject({ value: '1.850' })
  expect(parseQuantity('1.850', german)).toMatchObject({ value: '1850' })
})

test('a gallon is the gallon of the place', () => {
  const british = { defaultUnit: 'gal_imp', measure: 'volume', locale: 'en-GB' } as const
  expect(parseQuantity('5 gal', british)).toMatchObject({ unit: 'gal_imp' })
  expect(parseQuantity('5 gal', { ...british, defaultUnit: 'L' })).toMatchObject({ unit: 'gal_us' })
})
