import {
  addDays,
  daysBetween,
  formatDay,
  instantFromLocal,
  isTimeZone,
  localDay,
  localTime,
  monthOf,
  offsetOf,
  withOffset,
} from '@/shared/calendar'

// Clock changes of the IANA time zone database; the dates of 2025 are public.
test.each([
  ['America/Chicago', '2025-03-09T02:10', '2025-03-09T08:10:00.000Z', 'moved-forward'],
  ['America/Chicago', '2025-03-09T01:59', '2025-03-09T07:59:00.000Z', 'none'],
  ['America/Chicago', '2025-03-09T03:00', '2025-03-09T08:00:00.000Z', 'none'],
  ['America/New_York', '2025-11-02T01:30', '2025-11-02T05:30:00.000Z', 'first-of-two'],
  ['America/New_York', '2025-11-02T02:00', '2025-11-02T07:00:00.000Z', 'none'],
  ['Europe/London', '2025-03-30T01:30', '2025-03-30T01:30:00.000Z', 'moved-forward'],
  ['Europe/London', '2025-10-26T01:30', '2025-10-26T00:30:00.000Z', 'first-of-two'],
  ['Europe/London', '2024-02-29T12:00', '2024-02-29T12:00:00.000Z', 'none'],
  ['Pacific/Auckland', '2025-12-31T23:59', '2025-12-31T10:59:00.000Z', 'none'],
  ['Australia/Lord_Howe', '2025-10-05T02:15', '2025-10-04T15:45:00.000Z', 'moved-forward'],
])('%s %s is %s (%s)', (zone, local, instant, adjusted) => {
  expect(instantFromLocal(local, zone)).toEqual({ instant, adjusted })
})

test('the day is the site’s, not the server’s', () => {
  expect(localDay('2026-01-01T05:30:00Z', 'America/Chicago')).toBe('2025-12-31')
  expect(localDay('2026-01-01T06:00:00Z', 'America/Chicago')).toBe('2026-01-01')
  expect(localDay('2025-12-31T23:59:59.999Z', 'Europe/London')).toBe('2025-12-31')
  expect(localTime('2025-03-09T08:10:00Z', 'America/Chicago')).toBe('03:10')
  expect(offsetOf('2025-03-09T07:59:00Z', 'America/Chicago')).toBe('-06:00')
  expect(offsetOf('2025-03-09T08:00:00Z', 'America/Chicago')).toBe('-05:00')
  expect(withOffset('2025-07-01T12:00:00Z', 'Europe/London')).toBe('2025-07-01T13:00:00+01:00')
})

test('days are counted by the calendar, over clock changes and leap days', () => {
  expect(daysBetween('2025-03-08', '2025-03-10')).toBe(2)
  expect(daysBetween('2024-02-28', '2024-03-01')).toBe(2)
  expect(daysBetween('2025-02-28', '2025-03-01')).toBe(1)
  expect(daysBetween('2025-03-10', '2025-03-08')).toBe(-2)
  expect(addDays('2025-12-31', 1)).toBe('2026-01-01')
  expect(addDays('2024-02-28', 1)).toBe('2024-02-29')
  expect(monthOf('2025-03-09')).toBe('2025-03')
})

test('a day is written with its weekday, never as digits alone', () => {
  expect(formatDay('2025-03-09')).toBe('Sun 9 Mar 2025')
})

test('a time zone has a name', () => {
  expect(['America/Chicago', 'Europe/London', 'UTC'].every(isTimeZone)).toBe(true)
  expect(['', '+02:00', 'Mars/Olympus', 'America/'].some(isTimeZone)).toBe(false)
})
