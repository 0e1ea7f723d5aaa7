import type { Transaction } from '@/db/client'
import { listDrainsAround } from '@/db/queries/drains'
import { subtract } from '@/shared/quantities/decimals'
import { questionsOf, type DrainQuestion } from '@/shared/drain-questions'
import { presentInQuestion } from './present-in-question'
import type { ResolvedDrain } from './resolve-drain'

const twoHours = 2 * 3_600_000

/**
 * What a drain raises, against the containers as they stand before it.
 * @param poured litres by container that stand for this very drain already: they are not there before it
 */
export async function askQuestions(
  tx: Transaction,
  drainId: string,
  resolved: ResolvedDrain,
  poured: ReadonlyMap<string, string> = new Map(),
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
      legs: resolved.legs.map(({ litres, of }) => {
        const container = presentInQuestion(of)
        const before = subtract(container.litres, poured.get(container.id) ?? '0')
        return { litres, container: { ...container, litres: before } }
      }),
    },
    around.map((other) => ({ ...other, occurredAt: other.occurredAt.toISOString() })),
  )
}
