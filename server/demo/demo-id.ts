import { createHash } from 'node:crypto'

/**
 * The id of a thing of the demo company, always the same for the same name: a UUID of version 8 (RFC 9562, 5.8) whose
 * bits are the first of the name's SHA-256.
 */
export function demoId(name: string): string {
  const hex = createHash('sha256').update(`quillbrook ${name}`).digest('hex')
  const variant = ((parseInt(hex.slice(16, 17), 16) & 0x3) | 0x8).toString(16)
  return [
    hex.slice(0, 8),
    hex.slice(8, 12),
    `8${hex.slice(13, 16)}`,
    `${variant}${hex.slice(17, 20)}`,
    hex.slice(20, 32),
  ].join('-')
}
