import { useTranslation } from 'react-i18next'
import { formatDay, localDay, localTime } from '@/shared/calendar'
import type { Pickup } from '@/shared/contracts/pickups'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { Text } from '../ui/text'

/** Who did what when. */
export function PickupHistory({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  return (
    <Card role="region" label={t('pickups.history.title')}>
      <Heading level={2}>{t('pickups.history.title')}</Heading>
      <ol style={{ margin: 0, paddingLeft: 24 }}>
        {pickup.history.map((entry, index) => (
          <li key={index}>
            <Text>
              {t('pickups.history.entry', {
                what: t(`pickups.history.${entry.act}`),
                by: entry.by ?? '–',
                at: `${formatDay(localDay(entry.at, pickup.timeZone))}, ${localTime(entry.at, pickup.timeZone)}`,
              })}
            </Text>
          </li>
        ))}
      </ol>
    </Card>
  )
}
