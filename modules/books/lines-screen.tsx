import { useTranslation } from 'react-i18next'
import { formatDay } from '@/shared/calendar'
import { listBookLines, sides, type BookLine } from '@/shared/contracts/books'
import { convert } from '@/shared/quantities/convert'
import { formatFigure, formatQuantity, formatTyped } from '@/shared/quantities/format'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { usePages } from '../api/use-pages'
import { useCatalogue } from '../session/use-catalogue'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Row } from '../ui/card'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Table } from '../ui/table'
import { Text } from '../ui/text'
import { hrefOf, queryOf, readAddress, type BooksParams } from './books-address'

/** The lines one figure sums; what each adds stands beside it, and the sum is the figure. */
export function LinesScreen({ params }: { params: BooksParams }) {
  const { t } = useTranslation()
  const { sites } = useSite()
  const { catalogue } = useCatalogue()
  const usualUnit = sites.some(({ volumeUnit }) => volumeUnit === 'gal_us') ? 'gal_us' : 'L'
  const address = readAddress(params, usualUnit)
  const side = sides.find((one) => one === params.side) ?? 'in'
  const input = {
    query: {
      ...queryOf(address),
      side,
      ...(params.group === undefined || params.group === '' ? {} : { groupId: params.group }),
      ...(params.month === undefined || params.month === '' ? {} : { month: params.month }),
    },
  }
  const pages = usePages(listBookLines, input)
  const whole = useContract(listBookLines, input).data
  const streamId = params.group?.split('.').at(-1) ?? address.streamId
  const stream = catalogue?.streams.find(({ id }) => id === streamId)
  const base = stream?.code === 'filters' ? 'pieces' : stream?.kind === 'solid' ? 'kg' : 'L'
  const show = (figure: string) => {
    if (base === 'pieces') return formatFigure(figure, 0)
    if (base === 'kg') return formatQuantity(figure, 'kg', { decimals: 1 })
    const unit = address.unit === 'kg' ? 'L' : address.unit
    return formatQuantity(convert(figure, 'L', unit), unit)
  }
  return (
    <Screen
      title={t('books.lines.title', {
        side: t(`books.sides.${side}`),
        when: whole?.title ?? address.year,
      })}
      width="full"
      before={
        <LinkText href={hrefOf(address)}>{t('books.lines.back', { year: address.year })}</LinkText>
      }
    >
      {whole !== undefined && (
        <Text kind="strong">
          {t('books.lines.sum', {
            sum: show(whole.sum),
            exact: `${formatFigure(whole.sum, Math.min(18, whole.sum.split('.')[1]?.length ?? 0))} ${base === 'pieces' ? t('books.pieces') : base}`,
            count: whole.lineCount,
          })}
        </Text>
      )}
      {pages.rows === undefined &&
        (pages.error === undefined ? <Loading /> : <CouldNotLoad reply={pages} />)}
      {pages.rows?.length === 0 && <EmptyState title={t('books.lines.none')} />}
      {pages.rows !== undefined && pages.rows.length > 0 && (
        <Table
          caption={t('books.lines.caption')}
          columns={[
            { key: 'line', label: t('books.lines.line') },
            { key: 'day', label: t('books.lines.day') },
            { key: 'what', label: t('books.lines.what') },
            { key: 'from', label: t('books.lines.from') },
            { key: 'to', label: t('books.lines.to') },
            { key: 'typed', label: t('books.lines.typed'), isFigure: true },
            { key: 'counted', label: t('books.lines.counted'), isFigure: true },
            { key: 'by', label: t('books.lines.by') },
            { key: 'marks', label: t('books.lines.marks') },
          ]}
          rows={pages.rows.map((line) => ({
            key: line.movementId,
            cells: [
              `${line.siteCode} ${line.lineNo}`,
              formatDay(line.occurredOn),
              <What key="what" line={line} />,
              line.from,
              line.to,
              line.entered === null
                ? `${line.pieces}`
                : formatTyped(line.entered.value, line.entered.unit),
              show(line.counted),
              line.recordedBy,
              <Marks key="marks" line={line} />,
            ],
          }))}
        />
      )}
      {pages.hasMore && (
        <Button
          label={t('books.lines.more')}
          busy={pages.isLoadingMore}
          onPress={() => void pages.loadMore()}
        />
      )}
    </Screen>
  )
}

function What({ line }: { line: BookLine }) {
  const { t } = useTranslation()
  const reason = t(`books.reasons.${line.countsAs}`)
  if (line.drain !== null) {
    return (
      <LinkText href={`/drains/${line.drain.number}`}>{`${reason} ${line.drain.number}`}</LinkText>
    )
  }
  if (line.pickup !== null) {
    return (
      <LinkText href={`/pickups/${line.pickup.number ?? line.pickup.id}`}>
        {`${reason} ${line.pickup.number ?? ''}`}
      </LinkText>
    )
  }
  return <Text>{reason}</Text>
}

function Marks({ line }: { line: BookLine }) {
  const { t } = useTranslation()
  return (
    <Row space={4}>
      {line.isReversal && <Status kind="note" label={t('books.lines.mirror')} />}
      {line.isReversed && <Status kind="voided" label={t('books.lines.mirrored')} />}
      {line.isEstimate && <Status kind="note" label={t('books.lines.estimate')} />}
    </Row>
  )
}
