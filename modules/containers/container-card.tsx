import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Container } from '@/shared/contracts/containers'
import { formatLitresAs } from '@/shared/quantities/format'
import { absolute } from '@/shared/quantities/decimals'
import type { VolumeUnit } from '@/shared/quantities/units'
import { Card, Row } from '../ui/card'
import { LevelPicture } from '../ui/level-picture'
import { LinkText } from '../ui/link-text'
import { Status } from '../ui/status'
import { Text } from '../ui/text'
import { contentsOf } from './container-words'

/** A container at a glance: picture, contents, age, state. */
export function ContainerCard({
  container,
  unit,
  isLink = true,
}: {
  container: Container
  unit: VolumeUnit
  isLink?: boolean
}) {
  const { t } = useTranslation()
  const words = contentsOf(t, container, unit)
  return (
    <Card role="group" label={container.code}>
      <Row align="flex-start" space={16}>
        <LevelPicture
          kind={container.type}
          capacity={Number(container.capacityLitres)}
          fillLine={Number(container.fillLineLitres)}
          contents={Number(container.litres)}
          label={`${container.code}: ${words}`}
          overLabel={`+${formatLitresAs(absolute(container.roomLitres), unit, { withUnit: false })}`}
          height={isLink ? 84 : 132}
        />
        <View style={{ flex: 1, minWidth: 190, gap: 2 }}>
          {isLink && <LinkText href={`/containers/${container.code}`}>{container.code}</LinkText>}
          <Text>{[container.description, container.stream.name].filter(Boolean).join(' · ')}</Text>
          <Text kind="figure">{words}</Text>
          <Text kind="hint">
            {[
              container.ageDays === null
                ? t('containers.standsEmpty')
                : t('containers.age', { count: container.ageDays }),
              container.place,
              container.hasEstimates ? t('containers.estimates') : '',
            ]
              .filter(Boolean)
              .join(' · ')}
          </Text>
        </View>
        <ContainerStates container={container} />
      </Row>
    </Card>
  )
}

function ContainerStates({ container }: { container: Container }) {
  const { t } = useTranslation()
  const { level } = container
  return (
    <View style={{ gap: 4 }}>
      {container.hold !== null && <Status kind="stop" label={t('containers.states.held')} />}
      {container.stream.kind === 'fluid' && level === 'room' && (
        <Status kind="settled" label={t('containers.states.room')} />
      )}
      {level === 'near' && <Status kind="check" label={t('containers.states.near')} />}
      {level === 'over' && <Status kind="stop" label={t('containers.states.over')} />}
      {level === 'below-zero' && <Status kind="check" label={t('containers.states.belowZero')} />}
      {container.openMarks > 0 && level !== 'below-zero' && (
        <Status kind="check" label={t('containers.states.look')} />
      )}
      {container.onPickup !== null && (
        <Status
          kind="waiting"
          label={t('containers.states.onPickup', {
            number: container.onPickup.number ?? t('containers.aPlan'),
          })}
        />
      )}
      {container.retiredAt !== null && (
        <Status kind="voided" label={t('containers.states.retired')} />
      )}
    </View>
  )
}
