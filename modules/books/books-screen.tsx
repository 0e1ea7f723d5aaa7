import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { formatMonth } from '@/shared/calendar'
import {
  exportTotals,
  groupings,
  listYears,
  readTotals,
  shownUnits,
} from '@/shared/contracts/books'
import { formatFigure } from '@/shared/quantities/format'
import { CouldNotLoad } from '../api/could-not-load'
import { download } from '../api/download'
import { useContract } from '../api/use-contract'
import { Button } from '../ui/button'
import { Row } from '../ui/card'
import { ChoiceChips } from '../ui/choice'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Table } from '../ui/table'

type Grouping = (typeof groupings)[number]
type ShownUnit = (typeof shownUnits)[number]

/** The newest year with lines, month by month. */
export function BooksScreen() {
  const { t } = useTranslation()
  const [by, setBy] = useState<Grouping>('stream')
  const [unit, setUnit] = useState<ShownUnit>('gal_us')
  const years = useContract(listYears, { query: {} })
  const year = years.data?.years[0]
  const query = year === undefined ? null : { year, by, unit }
  const reply = useContract(readTotals, query === null ? null : { query })
  const show = (figure: { shown: string | null }, decimals: number) =>
    figure.shown === null ? '–' : formatFigure(figure.shown, decimals)
  return (
    <Screen title={t('books.title')} width="full">
      <Row space={24}>
        <ChoiceChips
          label={t('books.by')}
          value={by}
          onChange={(value) => setBy(groupings.find((one) => one === value) ?? 'stream')}
          options={groupings.map((value) => ({ value, label: t(`books.groupings.${value}`) }))}
        />
        <ChoiceChips
          label={t('books.unit')}
          value={unit}
          onChange={(value) => setUnit(shownUnits.find((one) => one === value) ?? 'gal_us')}
          options={shownUnits.map((value) => ({ value, label: t(`units.${value}`, { count: 2 }) }))}
        />
        {query !== null && (
          <Button
            icon="download"
            label={t('books.csv')}
            onPress={() => void download(exportTotals, { query }, `ebbmark-${year}.csv`)}
          />
        )}
      </Row>
      {years.data?.years.length === 0 && <EmptyState title={t('books.empty')} />}
      {reply.data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {reply.data?.groups.map((group) => (
        <Table
          key={group.id}
          caption={`${year}: ${[group.label, group.streamName].filter((name, index, all) => all.indexOf(name) === index).join(', ')}`}
          columns={[
            { key: 'month', label: t('books.columns.month') },
            { key: 'in', label: t('books.columns.in'), isFigure: true },
            { key: 'out', label: t('books.columns.out'), isFigure: true },
            { key: 'adjusted', label: t('books.columns.adjusted'), isFigure: true },
            { key: 'closing', label: t('books.columns.closing'), isFigure: true },
          ]}
          rows={[
            ...group.months.map((month) => ({
              key: month.month,
              cells: [
                formatMonth(month.month),
                ...[month.in, month.out, month.adjusted, month.closing].map((figure) =>
                  show(figure, group.decimals),
                ),
              ],
            })),
            {
              key: 'year',
              isTotal: true,
              cells: [
                t('books.year'),
                ...[group.total.in, group.total.out, group.total.adjusted, group.closing].map(
                  (figure) => show(figure, group.decimals),
                ),
              ],
            },
          ]}
        />
      ))}
    </Screen>
  )
}
