import type { PickupLineRecord } from '@/db/queries/pickups'
import {
  absolute,
  compare,
  divide,
  isZero,
  multiply,
  subtract,
  sum,
} from '@/shared/quantities/decimals'

type Line = Pick<
  PickupLineRecord,
  | 'shippedLitres'
  | 'shippedKilograms'
  | 'pieces'
  | 'receivedLitres'
  | 'receivedKilograms'
  | 'receivedPieces'
>

/** (received - shipped) / shipped in per cent, two decimals, of litres or else of kilograms; null where neither was shipped. */
export function differencePercent(line: Line): string | null {
  if (line.receivedLitres === null) return null
  if (!isZero(line.shippedLitres)) return percent(line.receivedLitres, line.shippedLitres)
  if (!isZero(line.shippedKilograms))
    return percent(line.receivedKilograms ?? '0', line.shippedKilograms)
  return null
}

export function percent(received: string, shipped: string): string {
  return divide(multiply(subtract(received, shipped), '100'), shipped, 2)
}

/** Above the rule, exactly: |received - shipped| x 100 > rule x shipped, so 10 % itself is not above 10 %. */
function isAbove(received: string, shipped: string, rulePercent: string): boolean {
  return (
    compare(
      multiply(absolute(subtract(received, shipped)), '100'),
      multiply(rulePercent, shipped),
    ) > 0
  )
}

/** Do received and shipped differ by more than the rule, in any line or in total, or in any count of pieces? */
export function differsByRule(lines: readonly Line[], rulePercent: string): boolean {
  const received = lines.filter(({ receivedLitres }) => receivedLitres !== null)
  const anyLine = received.some(
    (line) =>
      isAbove(line.receivedLitres ?? '0', line.shippedLitres, rulePercent) ||
      (!wasOnlyCounted(line) &&
        isAbove(line.receivedKilograms ?? '0', line.shippedKilograms, rulePercent)) ||
      (line.receivedPieces ?? 0) !== line.pieces,
  )
  const total = (pick: (line: Line) => string) => sum(received.map(pick))
  return (
    anyLine ||
    isAbove(
      total((line) => line.receivedLitres ?? '0'),
      total((line) => line.shippedLitres),
      rulePercent,
    )
  )
}

/** Shipped by the piece and never weighed here: there is no mass to differ from. */
function wasOnlyCounted(line: Line): boolean {
  return isZero(line.shippedKilograms) && line.pieces > 0
}
