import { useRouter } from 'expo-router'
import { useTranslation } from 'react-i18next'
import { formatMonth } from '@/shared/calendar'
import { exportLines, exportTotals, readTotals, type Totals } from '@/shared/contracts/books'
import { sum } from '@/shared/quantities/decimals'
import { formatFigure } from '@/shared/quantities/format'
import { AsOf } from '../api/as-of'
import { CouldNotLoad } from '../api/could-not-load'
import { download } from '../api/download'
import { useContract } from '../api/use-contract'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Row } from '../ui/card'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { MonthBars } from '../ui/month-bars'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Table } from '../ui/table'
import { Text } from '../ui/text'
import { hrefOf, queryOf, readAddress, type BooksAddress, type BooksParams } from './books-address'
import { BookCheckCard } from './book-check-card'
import { BooksFilters } from './books-filters'
import { nameOfGroup, unitWords } from './figure-words'
import { GroupTable } from './group-table'
import { useAct } from './use-act'

/** A year's totals: months as rows, and every figure opens to the lines it sums. */
export function YearScreen({ params }: { params: BooksParams }) {
  const { t } = useTranslation()
  const router = useRouter()
  const { sites } = useSite()
  const usualUnit = sites.some(({ volumeUnit }) => volumeUnit === 'gal_us') ? 'gal_us' : 'L'
  const address = readAddress(params, usualUnit)
  const query = queryOf(address)
  const reply = useContract(readTotals, { query })
  const act = useAct()
  const { data } = reply
  const change = (more: Partial<BooksAddress>) => router.replace(hrefOf({ ...address, ...more }))
  return (
    <Screen
      title={t('books.yearTitle', { year: address.year })}
      width="full"
      before={<LinkText href="/books/limits">{t('books.toLimits')}</LinkText>}
      actions={
        <>
          <Button
            icon="download"
            label={t('books.totalsCsv')}
            busy={act.isBusy}
            onPress={() =>
              act.run(() => download(exportTotals, { query }, `ebbmark-totals-${address.year}.csv`))
            }
          />
          <Button
            icon="download"
            label={t('books.linesCsv')}
            busy={act.isBusy}
            onPress={() =>
              act.run(() =>
                download(
                  exportLines,
                  {
                    query: {
                      year: address.year,
                      ...(query.siteId === undefined ? {} : { siteId: query.siteId }),
                    },
                  },
                  `ebbmark-lines-${address.year}.csv`,
                ),
              )
            }
          />
          <Button icon="print" label={t('books.print')} onPress={() => window.print()} />
        </>
      }
    >
      <BooksFilters address={address} onChange={change} />
      {act.problem !== undefined && (
        <Notice kind="stop" title={act.problem.title}>
          {act.problem.detail}
        </Notice>
      )}
      <AsOf reply={reply} />
      {data === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {data?.groups.length === 0 && (
        <EmptyState title={t('books.noLines', { year: address.year })} />
      )}
      {data?.allFluids != null && (
        <GroupTable
          address={address}
          group={data.allFluids}
          caption={t('books.caption', {
            year: address.year,
            name: t('books.everyFluid'),
            unit: unitWords(t, data.allFluids.unit),
          })}
        />
      )}
      {data?.groups.map((group) => (
        <GroupTable
          key={group.id}
          address={address}
          group={group}
          caption={captionOf(t, address.year, group)}
        />
      ))}
      {data !== undefined && data.groups.length > 0 && (
        <>
          {data.roundingShows && <Text kind="hint">{t('books.rounding')}</Text>}
          <DrainCounts totals={data} />
          <BookCheckCard />
        </>
      )}
    </Screen>
  )
}

function captionOf(
  t: ReturnType<typeof useTranslation>['t'],
  year: number,
  group: Totals['groups'][number],
): string {
  const name = nameOfGroup(t, group)
  const unit = unitWords(t, group.unit)
  const parts = [
    t('books.caption', { year, name, unit }),
    ...(group.densityUsed === null ? [] : [t('books.density', { density: group.densityUsed })]),
    ...(group.estimatePercent === null
      ? []
      : [t('books.estimates', { percent: group.estimatePercent })]),
  ]
  return parts.join(' · ')
}

/** How many drains stand behind the year, with the filters and absorbents that came with them. */
function DrainCounts({ totals }: { totals: Totals }) {
  const { t } = useTranslation()
  const rows = totals.drainCounts
  const sumOf = (pick: (row: (typeof rows)[number]) => number) =>
    rows.reduce((total, row) => total + pick(row), 0)
  const busiest = [...rows].sort((a, b) => b.count - a.count)[0]
  return (
    <Row align="flex-start" space={24}>
      <Table
        caption={t('books.drains.caption', { year: totals.year })}
        columns={[
          { key: 'month', label: t('books.month') },
          { key: 'count', label: t('books.drains.count'), isFigure: true },
          { key: 'filters', label: t('books.drains.filters'), isFigure: true },
          { key: 'absorbents', label: t('books.drains.absorbents'), isFigure: true },
        ]}
        rows={[
          ...rows.map((row) => ({
            key: row.month,
            cells: [
              formatMonth(row.month),
              String(row.count),
              String(row.filters),
              formatFigure(row.absorbentKilograms, 1),
            ],
          })),
          {
            key: 'year',
            isTotal: true,
            cells: [
              t('books.wholeYear'),
              String(sumOf(({ count }) => count)),
              String(sumOf(({ filters }) => filters)),
              formatFigure(sum(rows.map(({ absorbentKilograms }) => absorbentKilograms)), 1),
            ],
          },
        ]}
      />
      {busiest !== undefined && (
        <MonthBars
          label={t('books.drains.sentence', {
            month: formatMonth(busiest.month),
            count: busiest.count,
          })}
          bars={rows.map((row) => ({
            key: row.month,
            label: formatMonth(row.month).slice(0, 3),
            value: row.count,
            shown: String(row.count),
          }))}
        />
      )}
    </Row>
  )
}
