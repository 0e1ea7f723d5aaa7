import { z } from 'zod'
import { problem } from '../problem'

const keys = z.object({ at: z.iso.datetime(), id: z.uuid() })
export type Cursor = z.infer<typeof keys>

/** Where a page ended, as an opaque word: the keys of its last row. */
export function writeCursor(cursor: Cursor): string {
  return Buffer.from(JSON.stringify(cursor)).toString('base64url')
}

/** @throws Problem fields-refused for a word that is no cursor */
export function readCursor(word: string | undefined): Cursor | undefined {
  if (word === undefined) return undefined
  try {
    return keys.parse(JSON.parse(Buffer.from(word, 'base64url').toString()))
  } catch {
    throw problem('fields-refused', {
      fields: [
        { path: 'query.cursor', code: 'not-a-cursor', detail: 'Ask for the first page again' },
      ],
    })
  }
}

/** Cuts one row too many off a page and says where the next begins. */
export function pageOf<Row>(
  found: Row[],
  limit: number,
  keysOf: (row: Row) => Cursor,
): { rows: Row[]; next: string | null } {
  const rows = found.slice(0, limit)
  const last = rows.at(-1)
  return {
    rows,
    next: found.length > limit && last !== undefined ? writeCursor(keysOf(last)) : null,
  }
}
