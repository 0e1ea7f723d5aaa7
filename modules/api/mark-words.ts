import type { TFunction } from 'i18next'
import { localTime } from '@/shared/calendar'
import { isDecimal } from '@/shared/quantities/decimals'
import { formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'

/** How figures in questions and marks are shown: in the unit of the drain or of the site. */
export type FactsShown = { unit: VolumeUnit; timeZone: string; locale?: string }

/** Exact litres of the facts become figures in a unit (`overLitres` -> `over`), instants a local time. */
export function shownFacts(
  facts: Record<string, string>,
  { unit, timeZone, locale }: FactsShown,
): Record<string, string> {
  const shown: Record<string, string> = { ...facts }
  for (const [key, value] of Object.entries(facts)) {
    if (key.endsWith('Litres') && isDecimal(value)) {
      shown[key.slice(0, -'Litres'.length)] = formatLitresAs(value, unit, { locale })
    }
  }
  if (facts.otherAt !== undefined) shown.at = localTime(facts.otherAt, timeZone)
  return shown
}

/** The words of a mark: what the server found when the drain was recorded. */
export function markWords(
  t: TFunction,
  mark: { code: string; details: Record<string, string> },
  shownIn: FactsShown,
): string {
  return t([`drains.marks.${mark.code}`, 'drains.marks.unknown'], {
    ...slipFacts(mark.code, mark.details, shownIn),
  })
}

/** `looks-like-litres` shows what was meant in litres, `looks-like-gallons` in gallons. */
export function slipFacts(
  code: string,
  facts: Record<string, string>,
  shownIn: FactsShown,
): Record<string, string> {
  const shown = shownFacts(facts, shownIn)
  const meant = facts.meantLitres
  if (meant !== undefined && isDecimal(meant)) {
    const unit = otherUnit(code, shownIn.unit)
    shown.meant = formatLitresAs(meant, unit, { locale: shownIn.locale })
  }
  return shown
}

/** The unit the person may have read instead. */
export function otherUnit(code: string, unit: VolumeUnit): VolumeUnit {
  if (code === 'looks-like-litres') return 'L'
  return code === 'looks-like-gallons' ? 'gal_us' : unit
}
