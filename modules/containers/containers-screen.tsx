import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { listContainers, type Container } from '@/shared/contracts/containers'
import { formatFigure, formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useSite } from '../session/site-provider'
import { Card, Row } from '../ui/card'
import { LevelPicture } from '../ui/level-picture'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Text } from '../ui/text'

/** Containers of the site by room and age, with their level. */
export function ContainersScreen() {
  const { t } = useTranslation()
  const { site } = useSite()
  const reply = useContract(listContainers, site ? { query: { siteId: site.id } } : null)
  const rows = [...(reply.data?.rows ?? [])].sort(byRoom)
  return (
    <Screen title={t('containers.title')}>
      {reply.data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {reply.data !== undefined && rows.length === 0 && (
        <EmptyState title={t('containers.empty')} />
      )}
      {rows.map((container) => (
        <ContainerCard key={container.id} container={container} unit={site?.volumeUnit ?? 'L'} />
      ))}
    </Screen>
  )
}

/** Least room first; of equal room the oldest. */
function byRoom(a: Container, b: Container): number {
  return Number(a.roomLitres) - Number(b.roomLitres) || (b.ageDays ?? 0) - (a.ageDays ?? 0)
}

export function ContainerCard({ container, unit }: { container: Container; unit: VolumeUnit }) {
  const { t } = useTranslation()
  const isFluid = container.stream.kind === 'fluid'
  const words = isFluid
    ? t('containers.holds', {
        held: formatLitresAs(container.litres, unit),
        room: formatLitresAs(container.roomLitres, unit),
      })
    : t('containers.holdsSolids', {
        pieces: container.pieces,
        mass: formatFigure(container.kilograms, 1),
      })
  return (
    <Card role="group" label={container.code}>
      <Row>
        <LevelPicture
          kind={container.type}
          capacity={Number(container.capacityLitres)}
          fillLine={Number(container.fillLineLitres)}
          contents={Number(container.litres)}
          label={`${container.code}: ${words}`}
          height={84}
        />
        <View style={{ flex: 1, minWidth: 180 }}>
          <LinkText href={`/containers/${container.code}`}>{container.code}</LinkText>
          <Text>{container.stream.name}</Text>
          <Text kind="figure">{words}</Text>
          <Text kind="hint">
            {container.ageDays === null
              ? t('containers.standsEmpty')
              : t('containers.age', { count: container.ageDays })}
          </Text>
        </View>
        {container.hold !== null && <Status kind="stop" label={t('containers.held')} />}
        {container.level === 'over' && <Status kind="stop" label={t('containers.over')} />}
        {container.level === 'below-zero' && (
          <Status kind="check" label={t('containers.belowZero')} />
        )}
        {container.level === 'near' && <Status kind="check" label={t('containers.near')} />}
      </Row>
    </Card>
  )
}
