import type { Transaction } from '@/db/client'
import { findPickup } from '@/db/queries/pickups'
import type { Act } from '@/shared/policies'
import { stepAllowed, type PickupStep } from '@/shared/pickup-stages'
import { demand, type ActContext } from '../act-context'
import { problem } from '../problem'

export type FoundPickup = NonNullable<Awaited<ReturnType<typeof findPickup>>>

/** A pickup of a site the person may act at. @throws Problem not-found, not-allowed */
export async function getPickup(
  tx: Transaction,
  context: ActContext,
  act: Act,
  id: string,
): Promise<FoundPickup> {
  const found = await findPickup(tx, { id })
  if (found === undefined) throw problem('not-found')
  demand(context, act, { siteId: found.pickup.siteId })
  return found
}

/** @throws Problem wrong-stage, changed-under-you */
export function demandStep(found: FoundPickup, step: PickupStep, version: number): void {
  if (!stepAllowed(step, found.pickup.stage)) {
    throw problem('wrong-stage', { facts: { stage: found.pickup.stage } })
  }
  if (found.pickup.version !== version) throw problem('changed-under-you')
}
