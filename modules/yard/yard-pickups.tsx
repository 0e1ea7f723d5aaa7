import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Yard } from '@/shared/contracts/containers'
import { formatDay } from '@/shared/calendar'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { Text } from '../ui/text'

/** Pickups that wait for a next step. */
export function YardPickups({ pickups }: { pickups: Yard['pickups'] }) {
  const { t } = useTranslation()
  return (
    <Card role="region" label={t('yard.pickups.title')}>
      <Heading level={2}>{t('yard.pickups.title')}</Heading>
      {pickups.length === 0 && <Text>{t('yard.pickups.none')}</Text>}
      {pickups.map((pickup) => (
        <View key={pickup.id}>
          <LinkText href={`/pickups/${pickup.number ?? pickup.id}`}>
            {pickup.number ?? t('yard.pickups.planned')}
          </LinkText>
          <Text kind="label">
            {[
              t([`pickups.stages.${pickup.stage}`, `yard.stages.${pickup.stage}`]),
              pickup.hauler ?? t('yard.pickups.noHauler'),
              formatDay(pickup.plannedOn),
            ].join(' · ')}
          </Text>
        </View>
      ))}
    </Card>
  )
}
