import type { Container } from '@/shared/contracts/containers'
import { formatFigure, formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import type { useTranslation } from 'react-i18next'

type Translate = ReturnType<typeof useTranslation>['t']

/** What is in a container and how much room is left, or what was counted and weighed of solids. */
export function contentsOf(t: Translate, container: Container, unit: VolumeUnit): string {
  if (container.stream.kind === 'fluid') {
    return t('containers.holds', {
      held: formatLitresAs(container.litres, unit),
      line: formatLitresAs(container.fillLineLitres, unit),
      room: formatLitresAs(container.roomLitres, unit),
    })
  }
  return t('containers.holdsSolids', {
    pieces: t('containers.pieces', { count: container.pieces }),
    mass: `${formatFigure(container.kilograms, 1)}\u00a0kg`,
  })
}
