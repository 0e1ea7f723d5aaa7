import type { Container } from '@/shared/contracts/containers'
import { askAboutDrain, type DrainRow, type Question } from '@/shared/contracts/drains'
import type { Catalogue } from '@/shared/contracts/set-up'
import { questionsOf, type RecordedDrain as KnownDrain } from '@/shared/drain-questions'
import { convert } from '@/shared/quantities/convert'
import { subtract, sum } from '@/shared/quantities/decimals'
import { call } from '../api/call'
import { OfflineError } from '../api/problem-error'
import type { QueuedRecord, RecordedDrain } from '../offline/queued-record'

/** What this phone knows, for asking without signal. */
export type KnownFacts = {
  catalogue: Catalogue
  containers: readonly Container[]
  latestDrains: readonly DrainRow[]
  waiting: readonly QueuedRecord[]
}

export type Asked = { questions: Question[]; byPhone: boolean }

/** A person at a drum does not wait longer for the server's view: the phone asks then, the server marks later. */
const patienceMs = 4_000

/**
 * What to ask before saving: the server's questions, or the same rules on cached facts where no answer comes in time.
 * @throws ProblemError when the server cannot read the drain as typed
 */
export async function askBeforeSaving(body: RecordedDrain, known: KnownFacts): Promise<Asked> {
  try {
    const { questions } = await withinPatience(call(askAboutDrain, { body }))
    return { questions, byPhone: false }
  } catch (error) {
    if (!(error instanceof OfflineError)) throw error
    return { questions: questionsOnPhone(body, known), byPhone: true }
  }
}

function withinPatience<T>(work: Promise<T>): Promise<T> {
  let timer: ReturnType<typeof setTimeout> | undefined
  const patience = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new OfflineError()), patienceMs)
  })
  return Promise.race([work, patience]).finally(() => clearTimeout(timer))
}

export function questionsOnPhone(body: RecordedDrain, known: KnownFacts): Question[] {
  const { catalogue, containers } = known
  const machineId = body.machine.kind === 'listed' ? body.machine.machineId : undefined
  const machine = catalogue.machines.find(({ id }) => id === machineId)
  const streamName = catalogue.streams.find(({ id }) => id === body.streamId)?.name ?? ''
  const litres = convert(body.volume.value, body.volume.unit, 'L')
  const asked = questionsOf(
    {
      id: body.id,
      streamId: body.streamId,
      streamName,
      litres,
      unit: body.volume.unit,
      occurredAt: body.occurredAt,
      machine: machine === undefined ? null : { ...machine },
      legs: legLitres(body, litres).flatMap((leg) => {
        const container = containers.find(({ id }) => id === leg.containerId)
        if (container === undefined) return []
        return [{ litres: leg.litres, container: inQuestion(container) }]
      }),
    },
    [...known.latestDrains.map(asKnown), ...known.waiting.map(asKnownWaiting)],
  )
  return asked.map(({ code, facts }) => ({ code, facts }))
}

function inQuestion(container: Container) {
  return {
    id: container.id,
    code: container.code,
    streamId: container.streamId,
    streamName: container.stream.name,
    litres: container.litres,
    fillLineLitres: container.fillLineLitres,
    isHeld: container.hold !== null,
    holdReason: container.hold?.reason ?? '',
    isRetired: container.retiredAt !== null,
  }
}

/** Exact litres of each leg; the last takes what the others leave. */
export function legLitres(
  body: Pick<RecordedDrain, 'legs'>,
  drainLitres: string,
): { containerId: string; litres: string }[] {
  const typed = body.legs.map(({ volume }) =>
    volume === undefined ? undefined : convert(volume.value, volume.unit, 'L'),
  )
  const rest = subtract(drainLitres, sum(typed.filter((litres) => litres !== undefined)))
  return body.legs.map(({ containerId }, position) => ({
    containerId,
    litres: typed[position] ?? rest,
  }))
}

function asKnown(row: DrainRow): KnownDrain {
  return {
    id: row.id,
    number: row.number,
    machineId: row.machine.id,
    containerIds: row.legs.map(({ containerId }) => containerId),
    litres: row.litres,
    occurredAt: row.occurredAt,
    by: row.recordedBy.name,
  }
}

function asKnownWaiting({ id, body, number }: QueuedRecord): KnownDrain {
  return {
    id,
    number: number ?? '–',
    machineId: body.machine.kind === 'listed' ? body.machine.machineId : null,
    containerIds: body.legs.map(({ containerId }) => containerId),
    litres: convert(body.volume.value, body.volume.unit, 'L'),
    occurredAt: body.occurredAt,
    by: '–',
  }
}
