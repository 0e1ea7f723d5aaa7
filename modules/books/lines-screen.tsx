import { useTranslation } from 'react-i18next'
import { formatDay } from '@/shared/calendar'
import { listBookLines, readTotals, sides, type BookLine } from '@/shared/contracts/books'
import { formatFigure, formatTyped } from '@/shared/quantities/format'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { usePages } from '../api/use-pages'
import { useCatalogue } from '../session/use-catalogue'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Row } from '../ui/card'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Table } from '../ui/table'
import { Text } from '../ui/text'
import { hrefOf, queryOf, readAddress, type BooksParams } from './books-address'
import { figureOf, nameOfGroup, shownAs, unitSign, unitWords } from './figure-words'
import { useAct } from './use-act'

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
  const totals = useContract(readTotals, { query: queryOf(address) }).data
  const more = useAct()
  const group =
    totals?.groups.find(({ id }) => id === params.group) ??
    (params.group === 'all-fluids' ? totals?.allFluids : undefined) ??
    undefined
  const figure = group && figureOf(group, side, params.month ?? '')
  const unit = group?.unit ?? 'L'
  const densityOf = (streamId: string) =>
    catalogue?.streams.find(({ id }) => id === streamId)?.density?.kilogramsPerLitre
  // The figure as its table shows it; an address without a group has none to repeat.
  const sumWords = (sum: string) => {
    if (group === undefined || figure === undefined) return formatFigure(sum, 1)
    return figure.shown === null ? '–' : formatFigure(figure.shown, group.decimals)
  }
  const counted = (line: BookLine) =>
    group === undefined
      ? formatFigure(line.counted, 1)
      : shownAs(group, line.counted, densityOf(line.stream.id))
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
      {group !== undefined && (
        <Text>
          {[
            nameOfGroup(t, group),
            ...(totals?.site == null ? [] : [totals.site.name]),
            ...('densityUsed' in group && group.densityUsed !== null
              ? [t('books.density', { density: group.densityUsed })]
              : []),
          ].join(' · ')}
        </Text>
      )}
      {whole !== undefined && totals !== undefined && (
        <Text kind="strong">
          {t('books.lines.sum', {
            sum: `${sumWords(whole.sum)}\u00a0${unitSign(t, unit)}`,
            exact: exactWords(whole.sum, group?.kind === 'solid' ? unitSign(t, unit) : 'L'),
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
            {
              key: 'counted',
              label: t('books.lines.counted', { unit: unitWords(t, unit) }),
              isFigure: true,
            },
            { key: 'by', label: t('books.lines.by') },
            { key: 'marks', label: t('books.lines.marks') },
          ]}
          rows={pages.rows.map((line) => ({
            key: line.movementId,
            cells: [
              <Whole key="line">{`${line.siteCode} ${line.lineNo}`}</Whole>,
              <Whole key="day">{formatDay(line.occurredOn)}</Whole>,
              <What key="what" line={line} />,
              <Whole key="from">{line.from}</Whole>,
              <Whole key="to">{line.to}</Whole>,
              line.entered === null
                ? `${line.pieces}`
                : formatTyped(line.entered.value, line.entered.unit),
              counted(line),
              line.recordedBy,
              <Marks key="marks" line={line} />,
            ],
          }))}
        />
      )}
      {more.problem !== undefined && (
        <Notice kind="stop" title={more.problem.title}>
          {more.problem.detail}
        </Notice>
      )}
      {pages.hasMore && (
        <Button
          label={t('books.lines.more')}
          busy={pages.isLoadingMore}
          onPress={() => more.run(pages.loadMore)}
        />
      )}
    </Screen>
  )
}

/** Codes and days are read in one go, on a phone as well. */
function Whole({ children }: { children: string }) {
  return <span style={{ whiteSpace: 'nowrap' }}>{children}</span>
}

/** `2,441.590475 L`: every digit of the exact sum. */
function exactWords(sum: string, unit: string): string {
  return `${formatFigure(sum, sum.split('.')[1]?.length ?? 0)} ${unit}`
}

function What({ line }: { line: BookLine }) {
  const { t } = useTranslation()
  const reason = t(`books.reasons.${line.countsAs}`)
  if (line.drain !== null) {
    return (
      <LinkText href={`/drains/${line.drain.number}`}>
        <Whole>{`${reason} ${line.drain.number}`}</Whole>
      </LinkText>
    )
  }
  if (line.pickup !== null) {
    return (
      <LinkText href={`/pickups/${line.pickup.number ?? line.pickup.id}`}>
        <Whole>{`${reason} ${line.pickup.number ?? ''}`}</Whole>
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
