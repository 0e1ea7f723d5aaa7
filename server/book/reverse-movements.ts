import type { Transaction } from '@/db/client'
import type { MovementRow } from '@/db/queries/book'
import type { ActContext } from '../act-context'
import { postMovements } from './post-movements'

/** Answers lines by their exact mirrors, on the same day; the database refuses a second mirror. */
export async function reverseMovements(
  tx: Transaction,
  context: ActContext,
  siteId: string,
  targets: readonly MovementRow[],
  note: string,
): Promise<MovementRow[]> {
  return postMovements(
    tx,
    context,
    siteId,
    targets.map((target) => mirrorOf(target, note)),
  )
}

/** The draft that undoes a line. */
export function mirrorOf(target: MovementRow, note: string) {
  const { id, fromAccountId, toAccountId } = target
  return {
    streamId: target.streamId,
    fromAccountId: toAccountId,
    toAccountId: fromAccountId,
    litres: target.litres,
    kilograms: target.kilograms,
    pieces: target.pieces,
    enteredValue: target.enteredValue,
    enteredUnit: target.enteredUnit,
    method: target.method,
    spreadPercent: target.spreadPercent,
    isEstimate: target.isEstimate,
    reason: 'reversal' as const,
    countsAs: target.countsAs,
    reverses: id,
    drainId: target.drainId,
    drainRevision: target.drainRevision,
    pickupId: target.pickupId,
    pickupLineId: target.pickupLineId,
    transferId: target.transferId,
    occurredAt: target.occurredAt,
    occurredOn: target.occurredOn,
    note,
  }
}
