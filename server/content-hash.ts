import { createHash } from 'node:crypto'

/** SHA-256 over a body with its keys in order: the same content has the same hash, however it was written. */
export function contentHash(body: unknown): string {
  return createHash('sha256')
    .update(JSON.stringify(inOrder(body)))
    .digest('hex')
}

function inOrder(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(inOrder)
  if (typeof value !== 'object' || value === null) return value
  const entries = Object.entries(value).filter(([, part]) => part !== undefined)
  return Object.fromEntries(
    entries.sort(([a], [b]) => (a < b ? -1 : 1)).map(([key, part]) => [key, inOrder(part)]),
  )
}
