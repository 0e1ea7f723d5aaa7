import type { Container } from '@/shared/contracts/containers'
import { compare, isPositive } from '@/shared/quantities/decimals'

/** Why a container is not among the first choices; words: drains.container.why.<reason>. */
export type UnfitReason = 'other-stream' | 'held' | 'not-enough-room' | 'on-pickup'

export type ContainerChoice = { container: Container; unfit: UnfitReason | undefined }

export function whyUnfit(
  container: Container,
  wanted: { streamId: string; litres: string },
): UnfitReason | undefined {
  if (container.hold !== null) return 'held'
  if (wanted.streamId !== '' && container.streamId !== wanted.streamId) return 'other-stream'
  // A plan has no number yet and may still change; an issued manifest states what is in it.
  if (container.onPickup !== null && container.onPickup.number !== null) return 'on-pickup'
  const fits = isPositive(container.roomLitres) && compare(container.roomLitres, wanted.litres) >= 0
  return fits ? undefined : 'not-enough-room'
}

/**
 * Containers for fluid of this site in the order to offer them: those that fit, the one with the smallest sufficient
 * room first so that a part-filled drum is finished before a new one is begun, a van's pails after what stands in the
 * yard; then the others with the reason.
 */
export function rankContainers(
  containers: readonly Container[],
  wanted: { streamId: string; litres: string },
): ContainerChoice[] {
  const order: (UnfitReason | undefined)[] = [
    undefined,
    'not-enough-room',
    'on-pickup',
    'held',
    'other-stream',
  ]
  return containers
    .filter(({ stream, retiredAt }) => stream.kind === 'fluid' && retiredAt === null)
    .map((container) => ({ container, unfit: whyUnfit(container, wanted) }))
    .sort((a, b) => {
      const byReason = order.indexOf(a.unfit) - order.indexOf(b.unfit)
      if (byReason !== 0) return byReason
      const byPlace = Number(a.container.type === 'van') - Number(b.container.type === 'van')
      if (byPlace !== 0) return byPlace
      const byRoom = compare(a.container.roomLitres, b.container.roomLitres)
      // Among those that cannot take it all, the one with most room is nearest to enough.
      return a.unfit === undefined ? byRoom : -byRoom
    })
}

/** The container to fill in before anybody chose one: one that fits, else the right stream with most room. */
export function bestContainer(
  containers: readonly Container[],
  wanted: { streamId: string; litres: string },
): Container | undefined {
  return rankContainers(containers, wanted).find(
    ({ unfit }) => unfit === undefined || unfit === 'not-enough-room',
  )?.container
}
