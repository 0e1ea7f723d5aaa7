import { convert } from '@/shared/quantities/convert'
import { compare, isPositive, subtract, sum } from '@/shared/quantities/decimals'
import { parseQuantity } from '@/shared/quantities/parse'
import type { VolumeUnit } from '@/shared/quantities/units'
import type { LegValues } from './drain-values'

export type TypedVolume = ReturnType<typeof readVolume>

/** Gallons and litres are read off a meter or a stick: two decimals are more than either shows. */
export const volumeDecimals = 2

export function readVolume(typed: string, unit: VolumeUnit, locale?: string) {
  return parseQuantity(typed, {
    defaultUnit: unit,
    measure: 'volume',
    locale,
    maxDecimals: volumeDecimals,
  })
}

export type LegShare = {
  /** Exact litres of this leg; undefined where what was typed cannot be read. */
  litres: string | undefined
  isRemainder: boolean
}

/**
 * What each leg takes, in exact litres: the typed legs as typed, the last one what is left of the drain. The
 * remainder is below zero when the typed legs already hold more than was drained.
 */
export function shareLegs(
  legs: readonly LegValues[],
  drainLitres: string,
  unit: VolumeUnit,
  locale?: string,
): LegShare[] {
  const typed = legs.slice(0, -1).map((leg) => litresOf(leg.typed, unit, locale))
  const isReadable = typed.every((litres) => litres !== undefined)
  const remainder = isReadable ? subtract(drainLitres, sum(typed.map(String))) : undefined
  return [
    ...typed.map((litres) => ({ litres, isRemainder: false })),
    { litres: remainder, isRemainder: true },
  ]
}

/** Exact litres of a typed volume; undefined where it cannot be read. */
export function litresOf(typed: string, unit: VolumeUnit, locale?: string): string | undefined {
  const read = readVolume(typed, unit, locale)
  return read.ok ? convert(read.value, read.unit, 'L') : undefined
}

/** How much of a drain a container takes before it is at its line, written in the form's unit, cut to one decimal. */
export function fillingShare(roomLitres: string, drainLitres: string, unit: VolumeUnit): string {
  if (!isPositive(roomLitres) || compare(roomLitres, drainLitres) >= 0) return ''
  const [whole = '0', fraction = ''] = convert(roomLitres, 'L', unit).split('.')
  // Cut, not rounded: a share that rounds up would stand over the line.
  const cut = `${whole}.${fraction.slice(0, 1).padEnd(1, '0')}`
  return isPositive(cut) ? cut.replace(/\.0$/, '') : ''
}
