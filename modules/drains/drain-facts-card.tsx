import { useTranslation } from 'react-i18next'
import type { Drain } from '@/shared/contracts/drains'
import { formatDay, localDay, localTime, offsetOf } from '@/shared/calendar'
import { isNegative } from '@/shared/quantities/decimals'
import { formatFigure, formatLitresAs, formatTyped } from '@/shared/quantities/format'
import type { Unit, VolumeUnit } from '@/shared/quantities/units'
import { measureOf } from '@/shared/quantities/units'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { Text } from '../ui/text'
import { FactList, type Fact } from '../ui/fact-list'
import { machineOf, volumeOf } from './drain-summary'

/** What was drained, as typed; the exact litres beside it. */
export function DrainFactsCard({
  drain,
  siteName,
}: {
  drain: Drain
  siteName: string | undefined
}) {
  const { t } = useTranslation()
  const { unit } = drain.volume
  const shownIn: VolumeUnit = isVolume(unit) ? unit : 'L'
  const day = localDay(drain.occurredAt, drain.timeZone)
  const time = localTime(drain.occurredAt, drain.timeZone)
  const facts: Fact[] = [
    { name: t('drains.detail.machine'), value: machineOf(drain) },
    {
      name: t('drains.detail.when'),
      value: `${formatDay(day)}, ${time} (UTC${offsetOf(drain.occurredAt, drain.timeZone)})`,
    },
    ...(siteName === undefined ? [] : [{ name: t('drains.detail.site'), value: siteName }]),
    {
      name: t('drains.detail.volume'),
      value: (
        <>
          <Text kind="strong">{volumeOf(drain)}</Text>
          <Text kind="hint">
            {` ${t('drains.detail.exact', { litres: formatFigure(drain.litres, decimalsOf(drain.litres)) })}`}
          </Text>
        </>
      ),
    },
    {
      name: t('drains.detail.method'),
      value: `${t(`drains.methods.${drain.method}`)} ${t('drains.spread', { percent: drain.spreadPercent })}`,
    },
    { name: t('drains.detail.stream'), value: drain.stream.name },
    { name: t('drains.detail.fluid'), value: drain.fluid?.name ?? t('drains.detail.none') },
    {
      name: t('drains.detail.legs'),
      value: (
        <ul style={{ margin: 0, paddingLeft: 18 }}>
          {drain.legs.map((leg) => (
            <li key={leg.containerId}>
              <LinkText href={`/containers/${leg.containerCode}`}>{leg.containerCode}</LinkText>
              <Text>
                {` ${leg.volume === null ? formatLitresAs(leg.litres, shownIn) : formatTyped(leg.volume.value, leg.volume.unit)}`}
              </Text>
            </li>
          ))}
        </ul>
      ),
    },
    ...(drain.filters.length === 0
      ? []
      : [
          {
            name: t('drains.detail.filters'),
            value: drain.filters
              .map(({ count, size, state, containerCode }) =>
                [
                  t('drains.detail.filterLine', {
                    count,
                    size: t(`drains.form.filterSizes.${size}`),
                    state: t(`drains.form.filterStates.${state}`),
                  }),
                  containerCode,
                ]
                  .filter(Boolean)
                  .join(', '),
              )
              .join('; '),
          },
        ]),
    ...(drain.absorbents === null
      ? []
      : [
          {
            name: t('drains.detail.absorbents'),
            value: [
              formatTyped(drain.absorbents.mass.value, drain.absorbents.mass.unit),
              drain.absorbents.containerCode,
            ]
              .filter(Boolean)
              .join(', '),
          },
        ]),
    ...(drain.breatherCaps === 0
      ? []
      : [{ name: t('drains.detail.breatherCaps'), value: String(drain.breatherCaps) }]),
    ...(drain.refill === null
      ? []
      : [
          {
            name: t('drains.detail.refill'),
            value: [
              formatTyped(drain.refill.volume.value, drain.refill.volume.unit),
              drain.refill.fluid?.name,
            ]
              .filter(Boolean)
              .join(', '),
          },
        ]),
    ...(drain.note === '' ? [] : [{ name: t('drains.detail.note'), value: drain.note }]),
    {
      name: t('drains.detail.recorded'),
      value: t('drains.detail.recordedBy', {
        name: drain.recordedBy.name,
        time: momentAt(drain.recordedAt, drain.timeZone),
      }),
    },
  ]
  return (
    <>
      <Card role="region" label={t('drains.detail.facts')}>
        <Heading level={2}>{t('drains.detail.facts')}</Heading>
        <FactList facts={facts} />
      </Card>
      <Card role="region" label={t('drains.detail.containersAfter')}>
        <Heading level={2}>{t('drains.detail.containersAfter')}</Heading>
        {drain.containersAfter.map((container) => (
          <Text key={container.containerId}>
            {[
              container.containerCode,
              formatLitresAs(container.litres, shownIn),
              isNegative(container.roomLitres)
                ? t('drains.container.overBy', {
                    volume: formatLitresAs(container.roomLitres.slice(1), shownIn),
                  })
                : t('drains.container.room', {
                    volume: formatLitresAs(container.roomLitres, shownIn),
                  }),
            ].join(' · ')}
          </Text>
        ))}
      </Card>
    </>
  )
}

/** `Sun 9 Mar 2025, 14:05` on the site's clock. */
export function momentAt(instant: string, timeZone: string): string {
  return `${formatDay(localDay(instant, timeZone))}, ${localTime(instant, timeZone)}`
}

function isVolume(unit: Unit): unit is VolumeUnit {
  return measureOf(unit) === 'volume'
}

/** Every decimal that is not a trailing zero: exact is exact. */
function decimalsOf(value: string): number {
  return (value.split('.')[1] ?? '').replace(/0+$/, '').length
}
