/** 2025-03-09T03:10:00-05:00 as `2025-03-09 03:10 -05:00`: one way for every reader, with its offset. */
export function shownInstant(instant: string): string {
  return `${instant.slice(0, 10)} ${instant.slice(11, 16)} ${instant.slice(19)}`
}
