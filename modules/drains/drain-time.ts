import { instantFromLocal, localDay, localTime, withOffset } from '@/shared/calendar'
import type { DrainTime } from './drain-values'

/** The instant of the drain with the site's offset, as it is sent; `adjusted` when the clocks changed that night. */
export function instantOf(
  time: DrainTime,
  now: Date,
  timeZone: string,
): { occurredAt: string; adjusted: 'none' | 'moved-forward' | 'first-of-two' } {
  if (time.kind === 'now') return { occurredAt: withOffset(now, timeZone), adjusted: 'none' }
  if (time.kind === 'ago') {
    const then = new Date(now.getTime() - time.minutes * 60_000)
    return { occurredAt: withOffset(then, timeZone), adjusted: 'none' }
  }
  const { instant, adjusted } = instantFromLocal(time.local, timeZone)
  return { occurredAt: withOffset(instant, timeZone), adjusted }
}

/** Wall clock of the site, as a date-and-time field wants it. */
export function localNow(now: Date, timeZone: string): string {
  return `${localDay(now, timeZone)}T${localTime(now, timeZone)}`
}

/** Is this a whole date and time? A field half filled in by hand is not. */
export function isWholeLocal(local: string): boolean {
  return /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}$/.test(local)
}
