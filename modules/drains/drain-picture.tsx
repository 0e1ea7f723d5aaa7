import { useTranslation } from 'react-i18next'
import type { Container } from '@/shared/contracts/containers'
import { formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { LevelPicture } from '../ui/level-picture'
import { roomAfter } from './room-after'

type Props = {
  container: Container
  pouredLitres: string
  unit: VolumeUnit
  height?: number
}

/** The container as it would stand after this drain, in one picture and the same in words. */
export function DrainPicture({ container, pouredLitres, unit, height }: Props) {
  const { t } = useTranslation()
  const room = roomAfter(container, pouredLitres)
  const shown = (litres: string) => formatLitresAs(litres, unit)
  const words = {
    container: container.code,
    after: shown(room.afterLitres),
    line: shown(container.fillLineLitres),
    room: shown(room.roomLitres),
    over: shown(room.overLitres),
  }
  return (
    <LevelPicture
      kind={container.type}
      capacity={Number(container.capacityLitres)}
      fillLine={Number(container.fillLineLitres)}
      contents={Number(container.litres)}
      adding={Number(pouredLitres)}
      label={
        room.isOver ? t('drains.form.pictureOver', words) : t('drains.form.pictureAfter', words)
      }
      overLabel={
        room.isOver ? `+${formatLitresAs(room.overLitres, unit, { withUnit: false })}` : undefined
      }
      height={height}
    />
  )
}
