import { useRouter } from 'expo-router'
import { useTranslation } from 'react-i18next'
import { formatMonth } from '@/shared/calendar'
import type { Figure, sides, TotalsGroup } from '@/shared/contracts/books'
import { formatFigure } from '@/shared/quantities/format'
import { Stack } from '../ui/card'
import { FigureButton, Table } from '../ui/table'
import { Text } from '../ui/text'
import { linesHref, type BooksAddress } from './books-address'
import { unitWords } from './figure-words'

type Side = (typeof sides)[number]
type Group = Pick<
  TotalsGroup,
  'id' | 'unit' | 'decimals' | 'opening' | 'months' | 'total' | 'closing'
>

/** One group's year: opening, twelve months, the year, closing; and the sum that joins them. */
export function GroupTable({
  address,
  group,
  caption,
}: {
  address: BooksAddress
  group: Group
  caption: string
}) {
  const { t } = useTranslation()
  const router = useRouter()
  const unit = unitWords(t, group.unit)
  const shown = (figure: Figure) =>
    figure.shown === null ? '–' : formatFigure(figure.shown, group.decimals)
  const open = (figure: Figure, side: Side, month?: string) => {
    if (figure.lineCount === 0) return shown(figure)
    const when = month === undefined ? String(address.year) : formatMonth(month)
    return (
      <FigureButton
        shown={shown(figure)}
        label={t('books.open', {
          side: t(`books.sides.${side}`),
          when,
          figure: `${shown(figure)} ${unit}`,
          count: figure.lineCount,
        })}
        onPress={() =>
          router.push(
            linesHref(address, {
              groupId: group.id,
              side,
              ...(month === undefined ? {} : { month }),
            }),
          )
        }
      />
    )
  }
  return (
    <Stack space={4}>
      <Table
        caption={caption}
        columns={[
          { key: 'month', label: t('books.month') },
          { key: 'in', label: t('books.sides.in'), isFigure: true },
          { key: 'out', label: t('books.sides.out'), isFigure: true },
          { key: 'adjusted', label: t('books.sides.adjusted'), isFigure: true },
          { key: 'closing', label: t('books.sides.closing'), isFigure: true },
        ]}
        rows={[
          {
            key: 'opening',
            cells: [t('books.sides.opening'), '', '', '', open(group.opening, 'opening')],
          },
          ...group.months.map((month) => ({
            key: month.month,
            cells: [
              formatMonth(month.month),
              open(month.in, 'in', month.month),
              open(month.out, 'out', month.month),
              open(month.adjusted, 'adjusted', month.month),
              open(month.closing, 'closing', month.month),
            ],
          })),
          {
            key: 'year',
            isTotal: true,
            cells: [
              t('books.wholeYear'),
              open(group.total.in, 'in'),
              open(group.total.out, 'out'),
              open(group.total.adjusted, 'adjusted'),
              open(group.closing, 'closing'),
            ],
          },
        ]}
      />
      <Text kind="hint">
        {t('books.formula', {
          opening: shown(group.opening),
          in: shown(group.total.in),
          out: shown(group.total.out),
          adjusted: shown(group.total.adjusted),
          closing: shown(group.closing),
          unit,
        })}
      </Text>
    </Stack>
  )
}
