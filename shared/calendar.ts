import { TZDate, tzOffset } from '@date-fns/tz'
// By the file: the package's index brings all of it into the web app.
import { addDays as addDaysTo } from 'date-fns/addDays'
import { differenceInCalendarDays } from 'date-fns/differenceInCalendarDays'
import { format } from 'date-fns/format'
import { parseISO } from 'date-fns/parseISO'

/** Local days and times of a site. Days are strings, YYYY-MM-DD; instants are Dates or ISO strings. */

type Instant = Date | string

function at(instant: Instant, zone: string): TZDate {
  return new TZDate(instant instanceof Date ? instant : new Date(instant), zone)
}

/** Is this an IANA time zone that the runtime knows? */
export function isTimeZone(zone: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone })
    // Intl also takes bare offsets like +02:00: those have no summer time and are refused.
    return /^[A-Za-z]/.test(zone)
  } catch {
    return false
  }
}

/** The calendar day at the site in that instant. */
export function localDay(instant: Instant, zone: string): string {
  return format(at(instant, zone), 'yyyy-MM-dd')
}

/** The wall clock at the site in that instant, HH:mm. */
export function localTime(instant: Instant, zone: string): string {
  return format(at(instant, zone), 'HH:mm')
}

/** Offset of the site's clock from UTC in that instant, like -06:00. */
export function offsetOf(instant: Instant, zone: string): string {
  return format(at(instant, zone), 'xxx')
}

/** The instant with the site's offset: 2025-03-09T03:10:00-05:00. */
export function withOffset(instant: Instant, zone: string): string {
  return format(at(instant, zone), "yyyy-MM-dd'T'HH:mm:ssxxx")
}

export type LocalInstant = {
  /** ISO, UTC. */
  instant: string
  /** A time the clocks skip moves forward by the skip; of a time that comes twice, the first is taken. */
  adjusted: 'none' | 'moved-forward' | 'first-of-two'
}

/**
 * The instant of a wall-clock time at a site.
 * @param local YYYY-MM-DDTHH:mm
 */
export function instantFromLocal(local: string, zone: string): LocalInstant {
  const asUtc = Date.parse(`${local}:00Z`)
  const hour = 3_600_000
  // Clocks change by at most a few hours: the offsets a day before and after are the only candidates.
  const offsets = [
    tzOffset(zone, new Date(asUtc - 24 * hour)),
    tzOffset(zone, new Date(asUtc + 24 * hour)),
  ]
  const fitting = [...new Set(offsets)]
    .map((minutes) => asUtc - minutes * 60_000)
    .filter(
      (candidate) =>
        localDay(new Date(candidate), zone) + 'T' + localTime(new Date(candidate), zone) === local,
    )
    .sort((a, b) => a - b)
  const [first, second] = fitting
  if (first === undefined) {
    // A skipped time: reading it with the offset before the change moves it forward by the skip.
    const moved = asUtc - (offsets[0] ?? 0) * 60_000
    return { instant: new Date(moved).toISOString(), adjusted: 'moved-forward' }
  }
  return {
    instant: new Date(first).toISOString(),
    adjusted: second === undefined ? 'none' : 'first-of-two',
  }
}

/** YYYY-MM of a day. */
export function monthOf(day: string): string {
  return day.slice(0, 7)
}

export function yearOf(day: string): number {
  return Number(day.slice(0, 4))
}

/** Whole days from a to b; negative when b is earlier. */
export function daysBetween(a: string, b: string): number {
  return differenceInCalendarDays(parseISO(b), parseISO(a))
}

export function addDays(day: string, count: number): string {
  return format(addDaysTo(parseISO(day), count), 'yyyy-MM-dd')
}

/** The twelve months of a year, YYYY-MM. */
export function monthsOf(year: number): string[] {
  return Array.from({ length: 12 }, (_, month) => `${year}-${String(month + 1).padStart(2, '0')}`)
}

/** `Sun 9 Mar 2025`: the weekday helps to catch a slip. */
export function formatDay(day: string, locale = 'en-GB'): string {
  const date = new Date(`${day}T12:00:00Z`)
  const part = (options: Intl.DateTimeFormatOptions) =>
    new Intl.DateTimeFormat(locale, { ...options, timeZone: 'UTC' }).format(date)
  return `${part({ weekday: 'short' })} ${part({ day: 'numeric' })} ${part({ month: 'short' })} ${day.slice(0, 4)}`
}

/** `Mar 2025` of 2025-03. */
export function formatMonth(month: string, locale = 'en-GB'): string {
  const date = new Date(`${month}-15T12:00:00Z`)
  return new Intl.DateTimeFormat(locale, {
    month: 'short',
    year: 'numeric',
    timeZone: 'UTC',
  }).format(date)
}
