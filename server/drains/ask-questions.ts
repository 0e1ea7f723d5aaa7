import type { Transaction } from '@/db/client'
import { listDrainsAround } from '@/db/queries/drains'
import { questionsOf, type DrainQuestion } from '@/shared/drain-questions'
import type { ResolvedDrain } from './resolve-drain'

const twoHours = 2 * 3_600_000

/**
 * What a drain raises, against the containers as they stand before it.
 */
export async function askQuestions(
  tx: Transaction,
  drainId: string,
  resolved: ResolvedDrain,
): Promise<DrainQuestion[]> {
  const { machine, occurredAt } = resolved
  const around =
    machine === undefined
      ? []
      : await listDrainsAround(
          tx,
          machine.id,
          new Date(occurredAt.getTime() - twoHours),
          new Date(occurredAt.getTime() + twoHours),
          drainId,
        )
  return questionsOf(
    {
      id: drainId,
      streamId: resolved.stream.id,
      streamName: resolved.stream.name,
      litres: resolved.litres,
      unit: resolved.facts.volume.unit,
      occurredAt: occurredAt.toISOString(),
      machine:
        machine === undefined
          ? null
          : {
              id: machine.id,
              code: machine.code,
              reservoirLitres: machine.reservoirLitres,
              systemLitres: machine.systemLitres,
            },
      legs: resolved.legs.map(({ litres, of }) => ({
        litres,
        container: {
          id: of.container.id,
          code: of.container.code,
          streamId: of.container.streamId,
          streamName: of.streamName,
          litres: of.litres,
          fillLineLitres: of.container.fillLineLitres,
          isHeld: of.hold !== null,
          holdReason: of.hold?.reason ?? '',
          isRetired: of.container.retiredAt !== null,
        },
      })),
    },
    around.map((other) => ({ ...other, occurredAt: other.occurredAt.toISOString() })),
  )
}
