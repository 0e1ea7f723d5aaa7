import { useTranslation } from 'react-i18next'
import type { Pickup } from '@/shared/contracts/pickups'
import { formatFigure, formatTyped } from '@/shared/quantities/format'
import { LinkText } from '../ui/link-text'
import { Table } from '../ui/table'

type Line = Pickup['lines'][number]

/** Lines per stream and container: shipped, mass with its density, received, and the difference. */
export function PickupLines({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const pieces = (count: number) => (count > 0 ? `${t('pickups.pieces', { count })} ` : '')
  const shipped = (line: Line) =>
    pieces(line.pieces) +
    (line.shipped.value === '0' && line.pieces > 0
      ? ''
      : formatTyped(line.shipped.value, line.shipped.unit))
  const received = ({ received: got }: Line) =>
    got === null ? '–' : pieces(got.pieces) + formatTyped(got.quantity.value, got.quantity.unit)
  return (
    <Table
      caption={t('pickups.lines')}
      columns={[
        { key: 'container', label: t('pickups.columns.container') },
        { key: 'stream', label: t('pickups.columns.stream') },
        { key: 'shipped', label: t('pickups.columns.shipped'), isFigure: true },
        { key: 'mass', label: t('pickups.columns.mass'), isFigure: true },
        { key: 'received', label: t('pickups.columns.received'), isFigure: true },
        { key: 'difference', label: t('pickups.columns.difference'), isFigure: true },
      ]}
      rows={pickup.lines.map((line) => ({
        key: line.id,
        cells: [
          <LinkText key="code" href={`/containers/${line.containerCode}`}>
            {line.containerCode}
          </LinkText>,
          line.stream.name,
          shipped(line),
          massOf(line, t),
          received(line),
          line.differencePercent === null
            ? '–'
            : `${formatFigure(line.differencePercent, 1)}\u00a0%`,
        ],
      }))}
    />
  )
}

function massOf(line: Line, t: ReturnType<typeof useTranslation>['t']): string {
  if (line.massKilograms === null)
    return line.stream.kind === 'fluid' ? t('pickups.noDensity') : '–'
  const mass = `${formatFigure(line.massKilograms, line.massIsEstimate ? 0 : 1)}\u00a0kg`
  return line.densityUsed === null ? mass : t('pickups.massAt', { mass, density: line.densityUsed })
}
