import type { TFunction } from 'i18next'
import { useTranslation } from 'react-i18next'
import type { DrainRow } from '@/shared/contracts/drains'
import { formatTyped } from '@/shared/quantities/format'
import { Row } from '../ui/card'
import { Status } from '../ui/status'

/** `M-05 Ordan 620, wheel loader`, or what was written for a machine that is not on the list. */
export function machineOf(row: Pick<DrainRow, 'machine'>): string {
  const { code, description } = row.machine
  return code === null || description.startsWith(code)
    ? description
    : `${code} ${description}`.trim()
}

export function containersOf(row: Pick<DrainRow, 'legs'>): string {
  return row.legs.map(({ containerCode }) => containerCode).join(', ')
}

/** As typed, with its unit. */
export function volumeOf(row: Pick<DrainRow, 'volume'>): string {
  return formatTyped(row.volume.value, row.volume.unit)
}

/** One line for a screen reader and for a link: number, machine, container, volume. */
export function drainWords(t: TFunction, row: DrainRow): string {
  return [
    row.number,
    machineOf(row),
    containersOf(row),
    volumeOf(row),
    t(`drains.states.${row.needsLook ? 'needs-a-look' : row.state}`),
  ].join(', ')
}

/** State of a drain in words and shapes; more than one where more than one is true. */
export function DrainStates({ row }: { row: DrainRow }) {
  const { t } = useTranslation()
  return (
    <Row>
      {row.state === 'struck' ? (
        <Status kind="voided" label={t('drains.states.struck')} />
      ) : row.needsLook ? (
        <Status kind="check" label={t('drains.states.needs-a-look')} />
      ) : (
        <Status kind="settled" label={t('drains.states.standing')} />
      )}
      {row.isEstimate && <Status kind="note" label={t('drains.states.estimate')} />}
      {row.revision > 1 && row.state !== 'struck' && (
        <Status kind="note" label={t('drains.states.amended')} />
      )}
    </Row>
  )
}
