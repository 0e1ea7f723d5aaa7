import { useRouter } from 'expo-router'
import { useTranslation } from 'react-i18next'
import { formatDay } from '@/shared/calendar'
import { listPickups, type PickupRow } from '@/shared/contracts/pickups'
import { pickupStages } from '@/shared/pickup-stages'
import { isPositive } from '@/shared/quantities/decimals'
import { formatFigure, formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { AsOf } from '../api/as-of'
import { CouldNotLoad } from '../api/could-not-load'
import { usePages } from '../api/use-pages'
import { useSession } from '../session/use-session'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Card, Row, Stack } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { StageStatus } from './stage-status'

/** The site's pickups by stage, what waits first. */
export function PickupsScreen() {
  const { t } = useTranslation()
  const router = useRouter()
  const { site } = useSite()
  const { can } = useSession()
  const reply = usePages(listPickups, site === undefined ? null : { query: { siteId: site.id } })
  const plan = can('plan-pickup', { siteId: site?.id ?? '' }) && (
    <Button
      kind="primary"
      icon="plus"
      label={t('pickups.plan.action')}
      onPress={() => router.push('/pickups/new')}
    />
  )
  const rows = reply.rows
  return (
    <Screen title={t('pickups.title')} actions={plan}>
      <AsOf reply={reply} />
      {rows === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {rows?.length === 0 && (
        <EmptyState title={t('pickups.empty', { site: site?.name })}>
          {t('pickups.emptyNext')}
        </EmptyState>
      )}
      {pickupStages.map((stage) => {
        const own = rows?.filter((row) => row.stage === stage) ?? []
        if (own.length === 0) return null
        return (
          <Stack key={stage} space={8}>
            <Heading level={2}>{t(`pickups.stages.${stage}`)}</Heading>
            {own.map((row) => (
              <PickupCard key={row.id} row={row} unit={site?.volumeUnit ?? 'L'} />
            ))}
          </Stack>
        )
      })}
      {reply.hasMore && (
        <Button
          label={t('pickups.more')}
          busy={reply.isLoadingMore}
          onPress={() => void reply.loadMore()}
        />
      )}
    </Screen>
  )
}

function PickupCard({ row, unit }: { row: PickupRow; unit: VolumeUnit }) {
  const { t } = useTranslation()
  const amounts = [
    ...(isPositive(row.totalLitres) ? [formatLitresAs(row.totalLitres, unit)] : []),
    ...(isPositive(row.totalKilograms) ? [`${formatFigure(row.totalKilograms, 1)}\u00a0kg`] : []),
  ]
  return (
    <Card>
      <Row>
        <LinkText href={`/pickups/${row.number ?? row.id}`}>
          {row.number ?? t('pickups.noNumber', { day: formatDay(row.plannedOn) })}
        </LinkText>
        <StageStatus stage={row.stage} />
      </Row>
      <Text>{[row.hauler?.name ?? t('pickups.noHauler'), ...row.streams].join(' · ')}</Text>
      <Row space={16}>
        <Text kind="figure">{amounts.join(', ')}</Text>
        <Text kind="hint">{clockOf(t, row)}</Text>
      </Row>
    </Card>
  )
}

/** Days since it was signed and when the return is due, while one is waited for. */
function clockOf(t: ReturnType<typeof useTranslation>['t'], row: PickupRow): string {
  const isWaiting = row.stage === 'signed-out' || row.stage === 'return-due'
  if (!isWaiting || row.daysSinceSigned === null || row.returnDueOn === null)
    return formatDay(row.plannedOn)
  return t('pickups.clock', { count: row.daysSinceSigned, due: formatDay(row.returnDueOn) })
}
