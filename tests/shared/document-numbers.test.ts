import {
  checkCharacter,
  formatDrainNumber,
  formatPickupNumber,
  isPickupNumber,
} from '@/shared/document-numbers'

const alphabet = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ'

// Source: the worked example of the Global Release Identifier standard, which uses ISO/IEC 7064 MOD 37,36:
// A1-2425G-ABC1234002 has the check character M (from memory of that published example).
test('the check character of the published example is M', () => {
  expect(checkCharacter('A12425GABC1234002')).toBe('M')
  expect(checkCharacter('A1-2425G-ABC1234002')).toBe('M')
})

test('a manifest number carries site, year, sequence and its check', () => {
  const number = formatPickupNumber({ siteCode: 'S1', year: 2025, sequence: 4 })
  expect(number).toMatch(/^P-S1-25-004-[0-9A-Z]$/)
  expect(isPickupNumber(number)).toBe(true)
  expect(isPickupNumber('P-S1-25-004')).toBe(false)
  expect(isPickupNumber(`${number}0`)).toBe(false)
  expect(formatPickupNumber({ siteCode: 'S1', year: 2025, sequence: 1234 })).toMatch(/-1234-/)
  expect(formatDrainNumber(2025, 28)).toBe('D-25-0028')
})

function missedOf(number: string, wrongs: readonly string[]): string[] {
  return wrongs.filter((wrong) => wrong !== number && isPickupNumber(wrong))
}

const numbers = ['S1', 'S2', 'QUILL', 'Z9'].flatMap((siteCode) =>
  [1, 10, 28, 999, 1000].map((sequence) => formatPickupNumber({ siteCode, year: 2025, sequence })),
)

test.each(numbers)('no single wrong character makes %s another number', (number) => {
  const wrongs = [...number].flatMap((at, index) =>
    at === '-'
      ? []
      : [...alphabet].map((other) => number.slice(0, index) + other + number.slice(index + 1)),
  )
  expect(wrongs.length).toBeGreaterThanOrEqual(9 * alphabet.length)
  expect(missedOf(number, wrongs)).toEqual([])
})

// Worked from the recursion of the standard: swapped neighbours a, b go unseen only where {a, b} = {18 - P, 19 - P}
// modulo 36, P being the carry before them. Of the 630 pairs of unlike characters that is one.
test('one pair of neighbours in 630 can be swapped unseen, whatever stands before it', () => {
  const pairs = [...alphabet].flatMap((a, index) =>
    [...alphabet.slice(index + 1)].map((b) => [a, b] as const),
  )
  expect(pairs).toHaveLength(630)
  for (const before of ['', 'P', 'PS1', 'PS125', 'PQUILL25']) {
    const missed = pairs.filter(
      ([a, b]) => checkCharacter(before + a + b) === checkCharacter(before + b + a),
    )
    expect(missed).toHaveLength(1)
    const [[a = '', b = ''] = []] = missed
    expect([1, 35]).toContain(alphabet.indexOf(b) - alphabet.indexOf(a))
  }
})
