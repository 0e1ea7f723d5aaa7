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

test('every single wrong character and every swap of neighbours is caught', () => {
  const body = 'PS125004'
  const check = checkCharacter(body)
  const isCaught = (wrong: string) => checkCharacter(wrong) !== check
  const missed: string[] = []
  for (let at = 0; at < body.length; at += 1) {
    for (const other of alphabet) {
      const wrong = body.slice(0, at) + other + body.slice(at + 1)
      if (wrong !== body && !isCaught(wrong)) missed.push(wrong)
    }
    const swapped = body.slice(0, at) + (body[at + 1] ?? '') + body[at] + body.slice(at + 2)
    if (at + 1 < body.length && swapped !== body && !isCaught(swapped)) missed.push(swapped)
  }
  expect(missed).toEqual([])
})
