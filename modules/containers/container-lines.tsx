import { useTranslation } from 'react-i18next'
import { formatDay } from '@/shared/calendar'
import type { ContainerDetail } from '@/shared/contracts/containers'
import { compare } from '@/shared/quantities/decimals'
import { formatFigure, formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { LinkText } from '../ui/link-text'
import { Table } from '../ui/table'
import { Text } from '../ui/text'

type Line = ContainerDetail['lines'][number]

/** Newest lines of the book that touch the container, each leading to what made it. */
export function ContainerLines({
  container,
  unit,
}: {
  container: ContainerDetail
  unit: VolumeUnit
}) {
  const { t } = useTranslation()
  const isFluid = container.stream.kind === 'fluid'
  const moved = (line: Line) => {
    if (compare(line.litres, '0') !== 0) return formatLitresAs(line.litres, unit)
    if (line.pieces !== 0) return t('containers.pieces', { count: line.pieces })
    return `${formatFigure(line.kilograms, 1)}\u00a0kg`
  }
  return (
    <Table
      caption={t('containers.lines.caption')}
      columns={[
        { key: 'day', label: t('containers.lines.day') },
        { key: 'what', label: t('containers.lines.what') },
        { key: 'moved', label: t('containers.lines.moved'), isFigure: true },
        ...(isFluid ? [{ key: 'after', label: t('containers.lines.after'), isFigure: true }] : []),
      ]}
      rows={container.lines.map((line) => ({
        key: line.movementId,
        cells: [
          formatDay(line.occurredOn),
          <What key="what" line={line} />,
          <Text key="moved" kind="figure" struck={line.isReversed || line.isReversal}>
            {moved(line)}
          </Text>,
          ...(isFluid ? [formatLitresAs(line.litresAfter, unit)] : []),
        ],
      }))}
    />
  )
}

function What({ line }: { line: Line }) {
  const { t } = useTranslation()
  const reason = t(`containers.reasons.${line.isReversal ? 'reversal' : line.reason}`)
  if (line.drain !== null)
    return (
      <LinkText href={`/drains/${line.drain.number}`}>{`${reason} ${line.drain.number}`}</LinkText>
    )
  if (line.pickup !== null) {
    const name = line.pickup.number ?? line.other
    return (
      <LinkText
        href={`/pickups/${line.pickup.number ?? line.pickup.id}`}
      >{`${reason} ${name}`}</LinkText>
    )
  }
  return <Text>{`${reason} ${line.other}`}</Text>
}
