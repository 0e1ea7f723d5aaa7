import type { Transaction } from '@/db/client'
import { listPartyPermits, type listPickupLines } from '@/db/queries/pickups'
import { isPositive } from '@/shared/quantities/decimals'
import type { FoundPickup } from './get-pickup'

export type MissingItem = { code: string; facts: Record<string, string> }

/** What an issue waits for, named so that the screen can say it and lead there. */
export async function missingItems(
  tx: Transaction,
  found: FoundPickup,
  lines: Awaited<ReturnType<typeof listPickupLines>>,
): Promise<MissingItem[]> {
  const items: MissingItem[] = []
  const add = (code: string, facts: Record<string, string> = {}) => items.push({ code, facts })
  if (found.hauler === null) add('no-hauler')
  else {
    const permit = await permitState(tx, found.hauler.id, found.pickup.plannedOn)
    const facts = { party: found.hauler.name, number: permit.number, endedOn: permit.endsOn }
    if (permit.state === 'none') add('permit-missing', { party: found.hauler.name })
    if (permit.state === 'ended') add('permit-expired', facts)
    if (found.hauler.retiredAt !== null) add('party-retired', { party: found.hauler.name })
  }
  if (found.facility === null) add('no-facility')
  else if (found.facility.retiredAt !== null) add('party-retired', { party: found.facility.name })
  if (lines.length === 0) add('no-lines')
  for (const { line, container, holdReason, elsewhere } of lines) {
    const facts = { container: container.code }
    if (holdReason !== null) add('container-held', { ...facts, reason: holdReason })
    if (elsewhere !== null) add('container-elsewhere', { ...facts, pickup: elsewhere })
    if (
      !isPositive(line.shippedLitres) &&
      !isPositive(line.shippedKilograms) &&
      line.pieces === 0
    ) {
      add('nothing-in-container', facts)
    }
  }
  return items
}

/** The permit of a party on a day: current, ended (the last one that had begun), or none at all. */
export async function permitState(tx: Transaction, partyId: string, day: string) {
  const permits = await listPartyPermits(tx, partyId)
  const current = permits.find(({ startsOn, endsOn }) => startsOn <= day && day <= endsOn)
  if (current !== undefined)
    return { state: 'current' as const, number: current.number, endsOn: current.endsOn }
  const last = permits.find(({ startsOn }) => startsOn <= day)
  if (last !== undefined)
    return { state: 'ended' as const, number: last.number, endsOn: last.endsOn }
  return { state: 'none' as const, number: '', endsOn: '' }
}
