/** Numbers of drains and manifests. A manifest's last character catches a mistyped one. */

const alphabet = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ'
const modulus = alphabet.length

/**
 * Check character by ISO/IEC 7064, hybrid system MOD 37,36: one character of 0-9 A-Z that catches every single wrong
 * character, and all swaps of unlike neighbours but one pair in 630 at any place. Dashes do not count.
 * @throws RangeError on a character outside 0-9 A-Z
 */
export function checkCharacter(text: string): string {
  let carry = modulus
  for (const character of text.replaceAll('-', '')) {
    const value = alphabet.indexOf(character)
    if (value < 0) throw new RangeError(`"${character}" cannot stand in a document number`)
    const sum = (carry + value) % modulus || modulus
    carry = (sum * 2) % (modulus + 1)
  }
  const check = (modulus + 1 - carry) % modulus
  return alphabet.charAt(check)
}

/** `P-S1-25-004-K`: site, year, sequence of the site's year, check character. */
export function formatPickupNumber(given: {
  siteCode: string
  year: number
  sequence: number
}): string {
  const body = ['P', given.siteCode, shortYear(given.year), padded(given.sequence, 3)].join('-')
  return `${body}-${checkCharacter(body)}`
}

/** Has the text the form of a manifest number and the right check character? */
export function isPickupNumber(text: string): boolean {
  const match = /^(P-[A-Z0-9-]+-\d{2}-\d{3,})-([0-9A-Z])$/.exec(text)
  return match !== null && checkCharacter(match[1] ?? '') === match[2]
}

/** `D-25-0028` */
export function formatDrainNumber(year: number, sequence: number): string {
  return `D-${shortYear(year)}-${padded(sequence, 4)}`
}

function shortYear(year: number): string {
  return String(year % 100).padStart(2, '0')
}

function padded(sequence: number, width: number): string {
  return String(sequence).padStart(width, '0')
}
