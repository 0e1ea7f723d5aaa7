import { useTranslation } from 'react-i18next'
import type { Flag } from '@/shared/contracts/limits'
import { formatFigure } from '@/shared/quantities/format'
import type { RuleFinding } from '@/shared/rules/finding'
import { Status } from '../ui/status'

type Translate = ReturnType<typeof useTranslation>['t']

/** Where a flag stands: reached or near, looked at or not. */
export function FlagStatus({ flag }: { flag: Flag }) {
  const { t } = useTranslation()
  if (flag.state === 'reviewed')
    return <Status kind="settled" label={t('limits.states.reviewed')} />
  if (flag.state === 'withdrawn')
    return <Status kind="voided" label={t('limits.states.withdrawn')} />
  const isLimit = flag.level === 'limit'
  return (
    <Status
      kind={isLimit ? 'stop' : 'check'}
      label={t(isLimit ? 'limits.reached' : 'limits.near')}
    />
  )
}

/** `226.0 gallons; the line is more than 240 gallons`. */
export function measuredWords(t: Translate, finding: RuleFinding): string {
  const unit = t(`units.${finding.unit}`, { count: 2 })
  return t(`limits.measured.${finding.comparison}`, {
    measured: formatFigure(finding.measured, finding.unit === 'days' ? 0 : 1),
    threshold: formatFigure(finding.threshold, finding.threshold.split('.')[1]?.length ?? 0),
    unit,
  })
}

/** `For review under 40 CFR 279.22`; an own rule need not name where it is written. */
export function reviewWords(t: Translate, citation: string): string {
  return citation === '' ? t('limits.reviewOwn') : t('limits.review', { citation })
}
