import { useTranslation } from 'react-i18next'
import type { DrainRow } from '@/shared/contracts/drains'
import { localTime } from '@/shared/calendar'
import { LinkText } from '../ui/link-text'
import { Table } from '../ui/table'
import { containersOf, DrainStates, machineOf, volumeOf } from './drain-summary'

/** One day's drains at a desk: a real table, each number opening its drain. */
export function DrainsTable({ caption, rows }: { caption: string; rows: readonly DrainRow[] }) {
  const { t } = useTranslation()
  return (
    <Table
      caption={caption}
      isCaptionHidden
      columns={[
        { key: 'number', label: t('drains.list.columns.number') },
        { key: 'time', label: t('drains.list.columns.time') },
        { key: 'machine', label: t('drains.list.columns.machine') },
        { key: 'stream', label: t('drains.list.columns.stream') },
        { key: 'containers', label: t('drains.list.columns.containers') },
        { key: 'volume', label: t('drains.list.columns.volume'), isFigure: true },
        { key: 'by', label: t('drains.list.columns.by') },
        { key: 'state', label: t('drains.list.columns.state') },
      ]}
      rows={rows.map((row) => ({
        key: row.id,
        cells: [
          <LinkText key="number" href={`/drains/${row.number}`}>
            {row.number}
          </LinkText>,
          localTime(row.occurredAt, row.timeZone),
          machineOf(row),
          row.stream.name,
          containersOf(row),
          row.state === 'struck' ? <s key="volume">{volumeOf(row)}</s> : volumeOf(row),
          row.recordedBy.name,
          <DrainStates key="state" row={row} />,
        ],
      }))}
    />
  )
}
