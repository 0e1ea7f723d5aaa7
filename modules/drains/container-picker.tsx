import { useTranslation } from 'react-i18next'
import type { Container } from '@/shared/contracts/containers'
import { absolute, isNegative } from '@/shared/quantities/decimals'
import { formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { Button } from '../ui/button'
import { Stack } from '../ui/card'
import { Dialog } from '../ui/dialog'
import { Heading } from '../ui/heading'
import { Text } from '../ui/text'
import { rankContainers, type ContainerChoice } from './best-container'
import { PickedRow } from './picked-row'

type Props = {
  containers: readonly Container[]
  wanted: { streamId: string; litres: string }
  siteName: string
  unit: VolumeUnit
  chosenId: string
  onChoose: (container: Container) => void
  onClose: () => void
}

/** Containers that fit this drain, best first; the others stay reachable and say why they are not among them. */
export function ContainerPicker(props: Props) {
  const { containers, wanted, siteName, unit, chosenId, onChoose, onClose } = props
  const { t } = useTranslation()
  const ranked = rankContainers(containers, wanted)
  const fitting = ranked.filter(({ unfit }) => unfit === undefined)
  const others = ranked.filter(({ unfit }) => unfit !== undefined)

  const row = ({ container, unfit }: ContainerChoice) => (
    <PickedRow
      key={container.id}
      title={`${container.code} ${container.description}`.trim()}
      detail={[
        container.stream.name,
        isNegative(container.roomLitres)
          ? t('drains.container.overBy', {
              volume: formatLitresAs(absolute(container.roomLitres), unit),
            })
          : t('drains.container.room', { volume: formatLitresAs(container.roomLitres, unit) }),
        unfit === undefined || unfit === 'other-stream'
          ? ''
          : t(`drains.container.why.${unfit}`, { stream: container.stream.name }),
      ]
        .filter(Boolean)
        .join(' · ')}
      isChosen={container.id === chosenId}
      onPress={() => onChoose(container)}
    />
  )

  return (
    <Dialog
      title={t('drains.container.title')}
      isOpen
      onClose={onClose}
      actions={<Button label={t('ui.close')} onPress={onClose} />}
    >
      <Stack>
        <Text kind="hint">{t('drains.container.caution')}</Text>
        <Stack space={0}>
          <Heading level={3}>{t('drains.container.fits')}</Heading>
          {fitting.map(row)}
          {fitting.length === 0 && (
            <Text>{t('drains.container.noneFits', { site: siteName })}</Text>
          )}
        </Stack>
        {others.length > 0 && (
          <Stack space={0}>
            <Heading level={3}>{t('drains.container.others')}</Heading>
            {others.map(row)}
          </Stack>
        )}
      </Stack>
    </Dialog>
  )
}
