import type { Href } from 'expo-router'
import { groupings, shownUnits, type sides, type TotalsQuery } from '@/shared/contracts/books'

/** What a table of totals is cut by lives in its address, so that a view can be sent to a colleague. */
export type BooksAddress = {
  year: number
  by: (typeof groupings)[number]
  unit: (typeof shownUnits)[number]
  siteId: string
  streamId: string
}

export type BooksParams = Partial<
  Record<'year' | 'by' | 'unit' | 'site' | 'stream' | 'group' | 'month' | 'side', string>
>

/** The address as typed; what is not known there falls back to the usual. */
export function readAddress(params: BooksParams, usualUnit: BooksAddress['unit']): BooksAddress {
  return {
    year: /^\d{4}$/.test(params.year ?? '') ? Number(params.year) : new Date().getFullYear(),
    by: groupings.find((one) => one === params.by) ?? 'stream',
    unit: shownUnits.find((one) => one === params.unit) ?? usualUnit,
    siteId: params.site ?? '',
    streamId: params.stream ?? '',
  }
}

export function queryOf({ year, by, unit, siteId, streamId }: BooksAddress): TotalsQuery {
  return {
    year,
    by,
    unit,
    ...(siteId === '' ? {} : { siteId }),
    ...(streamId === '' ? {} : { streamId }),
  }
}

export function hrefOf(address: BooksAddress): Href {
  return `/books/${address.year}?${searchOf(address)}` as Href
}

/** The lines behind one figure. */
export function linesHref(
  address: BooksAddress,
  figure: { groupId: string; month?: string; side: (typeof sides)[number] },
): Href {
  const month = figure.month === undefined ? '' : `&month=${figure.month}`
  return `/books/${address.year}/lines?${searchOf(address)}&group=${figure.groupId}&side=${figure.side}${month}` as Href
}

function searchOf({ by, unit, siteId, streamId }: BooksAddress): string {
  return `by=${by}&unit=${unit}&site=${siteId}&stream=${streamId}`
}
