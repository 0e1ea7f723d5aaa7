import { useTranslation } from 'react-i18next'
import { formatDay } from '@/shared/calendar'
import { listPickups } from '@/shared/contracts/pickups'
import { formatLitresAs } from '@/shared/quantities/format'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useSite } from '../session/site-provider'
import { Card, Row } from '../ui/card'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Status, type StatusKind } from '../ui/status'
import { Text } from '../ui/text'

/** How each stage looks. */
export const stageKinds: Record<string, StatusKind> = {
  planned: 'note',
  ready: 'waiting',
  'at-the-gate': 'waiting',
  'signed-out': 'waiting',
  'return-due': 'check',
  differs: 'stop',
  settled: 'settled',
  voided: 'voided',
}

/** Pickups of the site, newest first. */
export function PickupsScreen() {
  const { t } = useTranslation()
  const { site } = useSite()
  const reply = useContract(listPickups, site ? { query: { siteId: site.id, limit: 100 } } : null)
  return (
    <Screen title={t('pickups.title')}>
      {reply.data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {reply.data?.rows.length === 0 && <EmptyState title={t('pickups.empty')} />}
      {reply.data?.rows.map((pickup) => (
        <Card key={pickup.id}>
          <Row>
            <LinkText href={`/pickups/${pickup.number ?? pickup.id}`}>
              {pickup.number ?? t('pickups.noNumber', { day: formatDay(pickup.plannedOn) })}
            </LinkText>
            <Status
              kind={stageKinds[pickup.stage] ?? 'note'}
              label={t(`pickups.stages.${pickup.stage}`)}
            />
          </Row>
          <Text>{[pickup.hauler?.name, ...pickup.streams].filter(Boolean).join(' · ')}</Text>
          <Text kind="figure">{formatLitresAs(pickup.totalLitres, site?.volumeUnit ?? 'L')}</Text>
        </Card>
      ))}
    </Screen>
  )
}
