import type { useTranslation } from 'react-i18next'
import type { Figure, sides, Totals, TotalsGroup } from '@/shared/contracts/books'
import { convert } from '@/shared/quantities/convert'
import { multiply } from '@/shared/quantities/decimals'
import { formatFigure } from '@/shared/quantities/format'
import { unitSymbol } from '@/shared/quantities/units'

type Translate = ReturnType<typeof useTranslation>['t']
type AnyGroup = TotalsGroup | NonNullable<Totals['allFluids']>

/** The figure of a group that its lines were opened from; without a month, the year's. */
export function figureOf(
  group: Pick<TotalsGroup, 'opening' | 'months' | 'total' | 'closing'>,
  side: (typeof sides)[number],
  month: string,
): Figure | undefined {
  const ofMonth = group.months.find((one) => one.month === month)
  if (side === 'opening') return group.opening
  if (side === 'closing') return month === '' ? group.closing : ofMonth?.closing
  return month === '' ? group.total[side] : ofMonth?.[side]
}

/**
 * What one line adds, in the unit of its group: from litres of a fluid, as counted of a solid.
 * @param density kg/L of the line's stream; without one, kilograms of a fluid cannot be said
 */
export function shownAs(
  group: Pick<TotalsGroup, 'kind' | 'unit' | 'decimals'>,
  counted: string,
  density: string | undefined,
): string {
  if (group.kind === 'solid' || group.unit === 'L' || group.unit === 'pieces')
    return formatFigure(counted, group.decimals)
  if (group.unit === 'gal_us') return formatFigure(convert(counted, 'L', 'gal_us'), group.decimals)
  return density === undefined ? '–' : formatFigure(multiply(counted, density), group.decimals)
}

/** `C-201, Used mineral hydraulic fluid`; a stream alone is named once. */
export function nameOfGroup(t: Translate, group: AnyGroup): string {
  if (!('streamName' in group)) return t('books.everyFluid')
  return group.label === group.streamName || group.label === ''
    ? group.streamName
    : `${group.label}, ${group.streamName}`
}

export function unitWords(t: Translate, unit: TotalsGroup['unit']): string {
  return unit === 'pieces' ? t('books.pieces') : t(`units.${unit}`, { count: 2 })
}

export function unitSign(t: Translate, unit: TotalsGroup['unit']): string {
  return unit === 'pieces' ? t('books.pieces') : unitSymbol(unit)
}
