import type { listContainersOfLegs } from '@/db/queries/drains'
import type { ContainerInQuestion } from '@/shared/drain-questions'

/** A container as the shared questions see it: what stands in it before the pour, its line, its hold. */
export function presentInQuestion(
  of: Awaited<ReturnType<typeof listContainersOfLegs>>[number],
): ContainerInQuestion {
  return {
    id: of.container.id,
    code: of.container.code,
    streamId: of.container.streamId,
    streamName: of.streamName,
    litres: of.litres,
    fillLineLitres: of.container.fillLineLitres,
    isHeld: of.hold !== null,
    holdReason: of.hold?.reason ?? '',
    isRetired: of.container.retiredAt !== null,
  }
}
