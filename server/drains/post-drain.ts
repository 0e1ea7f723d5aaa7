import type { Transaction } from '@/db/client'
import type { DrainFacts } from '@/shared/contracts/drains'
import { toKilograms } from '@/shared/quantities/convert'
import { isEstimate, spreadOf } from '@/shared/quantities/methods'
import type { ActContext } from '../act-context'
import { accountOf } from '../book/account-of'
import { postMovements, type MovementDraft } from '../book/post-movements'
import type { ResolvedDrain } from './resolve-drain'

/**
 * Posts the lines of one revision of a drain: the fluid, leg by leg, and what came out with it. Breather caps are
 * counted as pieces among the spent filters: they go into the same bin.
 */
export async function postDrain(
  tx: Transaction,
  context: ActContext,
  drain: { id: string; revision: number },
  resolved: ResolvedDrain,
): Promise<void> {
  const { site, facts, machine, stream, occurredAt } = resolved
  const from = await accountOf(
    tx,
    context,
    site.id,
    machine === undefined
      ? { kind: 'outside', place: 'unlisted-machine' }
      : { kind: 'machine', machineId: machine.id },
  )
  const into = (containerId: string | undefined) =>
    accountOf(
      tx,
      context,
      site.id,
      containerId === undefined
        ? { kind: 'outside', place: 'floor' }
        : { kind: 'container', containerId },
    )
  const shared = {
    fromAccountId: from,
    reason: 'drain' as const,
    drainId: drain.id,
    drainRevision: drain.revision,
    occurredAt,
  }
  const fluid = { litres: '0', kilograms: '0', pieces: 0 }
  const drafts: MovementDraft[] = []
  for (const leg of resolved.legs) {
    drafts.push({
      ...shared,
      ...fluid,
      streamId: stream.id,
      toAccountId: await into(leg.containerId),
      litres: leg.litres,
      enteredValue:
        leg.volume?.value ?? (resolved.legs.length === 1 ? facts.volume.value : leg.litres),
      enteredUnit: leg.volume?.unit ?? (resolved.legs.length === 1 ? facts.volume.unit : 'L'),
      method: facts.method,
      spreadPercent: spreadOfFacts(facts),
      isEstimate: isEstimate(facts.method),
    })
  }
  const count = {
    ...shared,
    ...fluid,
    method: 'count',
    spreadPercent: null,
    isEstimate: false,
    enteredUnit: 'pieces',
  }
  if (resolved.filterStream !== undefined) {
    for (const filters of resolved.filters) {
      const toAccountId = await into(filters.container?.id)
      drafts.push({
        ...count,
        streamId: resolved.filterStream.id,
        toAccountId,
        pieces: filters.count,
        enteredValue: String(filters.count),
        note: `${filters.size}, ${filters.state}`,
      })
    }
    if (facts.breatherCaps > 0) {
      drafts.push({
        ...count,
        streamId: resolved.filterStream.id,
        toAccountId: await into(resolved.filterBin?.id),
        pieces: facts.breatherCaps,
        enteredValue: String(facts.breatherCaps),
        note: 'breather caps',
      })
    }
  }
  if (facts.absorbents !== undefined && resolved.absorbentStream !== undefined) {
    const { mass } = facts.absorbents
    drafts.push({
      ...shared,
      ...fluid,
      streamId: resolved.absorbentStream.id,
      toAccountId: await into(resolved.absorbentContainer?.id),
      kilograms: toKilograms(mass.value, mass.unit),
      enteredValue: mass.value,
      enteredUnit: mass.unit,
      method: 'weighed',
      spreadPercent: spreadOf('weighed'),
      isEstimate: false,
    })
  }
  await postMovements(tx, context, site.id, drafts)
}

export function spreadOfFacts(facts: Pick<DrainFacts, 'method' | 'spreadPercent'>): string {
  return facts.spreadPercent ?? spreadOf(facts.method)
}
