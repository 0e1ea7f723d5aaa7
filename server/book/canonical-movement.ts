import { createHash } from 'node:crypto'
import type { movements } from '@/db/schema/book'
import { normalise } from '@/shared/quantities/decimals'

type Movement = Omit<typeof movements.$inferSelect, 'hash'>

/** Hash before the first line of every book. */
export const firstHash = '0'.repeat(64)

/**
 * The canonical form of a line, which its hash is taken over: these fields in this order, one a line, UTF-8.
 * Decimals without trailing zeros, instants in UTC with milliseconds, nothing for what is not set. Text is escaped as
 * a JSON string, so that a line break in a note cannot pass for the next field.
 */
export function canonicalMovement(movement: Movement): string {
  return [
    'ebbmark-movement/1',
    movement.siteId,
    String(movement.lineNo),
    movement.id,
    movement.organisationId,
    movement.streamId,
    movement.fromAccountId,
    movement.toAccountId,
    normalise(movement.litres),
    normalise(movement.kilograms),
    String(movement.pieces),
    movement.enteredValue,
    movement.enteredUnit,
    movement.method,
    movement.spreadPercent ?? '',
    movement.isEstimate ? 'estimate' : 'measured',
    movement.reason,
    movement.countsAs,
    movement.reverses ?? '',
    movement.drainId ?? '',
    movement.drainRevision === null ? '' : String(movement.drainRevision),
    movement.pickupId ?? '',
    movement.pickupLineId ?? '',
    movement.transferId ?? '',
    movement.occurredAt.toISOString(),
    movement.occurredOn,
    movement.recordedAt.toISOString(),
    movement.recordedBy,
    JSON.stringify(movement.note),
    movement.previousHash,
  ].join('\n')
}

/** SHA-256 of the canonical form, in hex. */
export function hashOfMovement(movement: Movement): string {
  return createHash('sha256').update(canonicalMovement(movement)).digest('hex')
}
