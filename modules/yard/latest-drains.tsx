import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { DrainRow } from '@/shared/contracts/drains'
import type { Site } from '@/shared/contracts/set-up'
import { formatDay, localTime } from '@/shared/calendar'
import { formatTyped } from '@/shared/quantities/format'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { gap } from '../ui/measures'
import { Text } from '../ui/text'

/** The last few drains of the site. */
export function LatestDrains({ site, drains }: { site: Site; drains: readonly DrainRow[] }) {
  const { t } = useTranslation()
  return (
    <Card role="region" label={t('yard.latest.title')}>
      <Heading level={2}>{t('yard.latest.title')}</Heading>
      {drains.length === 0 && <Text>{t('yard.latest.none', { site: site.name })}</Text>}
      {drains.map((row) => (
        <View key={row.id}>
          <View style={{ flexDirection: 'row', justifyContent: 'space-between', gap: gap.small }}>
            <LinkText href={`/drains/${row.number}`}>
              {[row.number, row.machine.code, row.machine.description].filter(Boolean).join(' ')}
            </LinkText>
            <Text kind="figure" struck={row.state === 'struck'}>
              {formatTyped(row.volume.value, row.volume.unit)}
            </Text>
          </View>
          <Text kind="label">
            {[
              `${formatDay(row.occurredOn)}, ${localTime(row.occurredAt, row.timeZone)}`,
              row.legs.map(({ containerCode }) => containerCode).join(', '),
            ].join(' · ')}
          </Text>
        </View>
      ))}
      <LinkText href="/drains">{t('yard.latest.all')}</LinkText>
    </Card>
  )
}
