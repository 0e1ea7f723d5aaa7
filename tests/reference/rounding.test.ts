import { roundHalfEven } from '@/shared/quantities/decimals'

// Source: NIST SP 811 (2008), Appendix B.7.1, examples of rounding: a 5 followed by zeros goes to the even digit.
test.each([
  ['6.9749515', 2, '6.97'],
  ['6.9749515', 4, '6.9750'],
  ['6.9749515', 6, '6.974952'],
  ['6.9749505', 6, '6.974950'],
])('%s to %d decimals is %s', (value, places, wanted) => {
  expect(roundHalfEven(value, places)).toBe(wanted)
})

// Common practice, worked by hand.
test.each([
  ['0.5', 0, '0'],
  ['1.5', 0, '2'],
  ['2.5', 0, '2'],
  ['-0.04', 1, '0.0'],
  ['-2.5', 0, '-2'],
  ['12345678901234567890.123456789012345678', 17, '12345678901234567890.12345678901234568'],
])('%s to %d decimals is %s', (value, places, wanted) => {
  expect(roundHalfEven(value, places)).toBe(wanted)
})
