import {
  absolute,
  add,
  compare,
  divide,
  isPositive,
  multiply,
  normalise,
  subtract,
} from './quantities/decimals'

/**
 * What is asked before a drain is saved, and marked when it was saved all the same: a drain is never refused for what
 * was poured. Pure, so that a phone without signal asks the same as the server marks. Figures are exact litres.
 */

export type DrainQuestionCode =
  | 'over-fill-line'
  | 'wrong-stream'
  | 'container-held'
  | 'container-retired'
  | 'more-than-machine-holds'
  | 'looks-like-litres'
  | 'looks-like-gallons'
  | 'looks-like-saved'

export type DrainQuestion = {
  code: DrainQuestionCode
  containerId: string | null
  /** Names and exact litres (keys that end in `Litres`) for the words of the question. */
  facts: Record<string, string>
}

export type ContainerInQuestion = {
  id: string
  code: string
  streamId: string
  streamName: string
  litres: string
  fillLineLitres: string
  isHeld: boolean
  holdReason: string
  isRetired: boolean
}

export type DrainInQuestion = {
  id: string
  streamId: string
  streamName: string
  litres: string
  unit: string
  occurredAt: string
  machine: {
    id: string
    code: string
    reservoirLitres: string | null
    systemLitres: string | null
  } | null
  legs: { container: ContainerInQuestion; litres: string }[]
}

/** A drain already recorded that this one may repeat. */
export type RecordedDrain = {
  id: string
  number: string
  machineId: string | null
  containerIds: readonly string[]
  litres: string
  occurredAt: string
  by: string
}

const litresPerGallon = '3.785411784'

/** All questions a drain raises, in the order they are asked. */
export function questionsOf(
  drain: DrainInQuestion,
  recent: readonly RecordedDrain[],
): DrainQuestion[] {
  return [
    ...pouredInto(drain.legs).flatMap((leg) => containerQuestionsOf(drain, leg)),
    ...unitSlip(drain),
    ...overMachine(drain),
    ...lookAlikes(drain, recent),
  ]
}

/** One entry a container, however many legs name it: what counts is what it then holds. */
function pouredInto(legs: DrainInQuestion['legs']): DrainInQuestion['legs'] {
  const byContainer = new Map<string, DrainInQuestion['legs'][number]>()
  for (const { container, litres } of legs) {
    const before = byContainer.get(container.id)
    byContainer.set(container.id, { container, litres: add(before?.litres ?? '0', litres) })
  }
  return [...byContainer.values()]
}

/** What pouring a fluid into a container raises, be it drained or transferred. */
export function containerQuestionsOf(
  fluid: Pick<DrainInQuestion, 'streamId' | 'streamName'>,
  { container, litres }: DrainInQuestion['legs'][number],
): DrainQuestion[] {
  const asked: DrainQuestion[] = []
  const ask = (code: DrainQuestionCode, facts: Record<string, string>) =>
    asked.push({ code, containerId: container.id, facts: { container: container.code, ...facts } })
  if (container.isRetired) ask('container-retired', {})
  if (container.isHeld) ask('container-held', { reason: container.holdReason })
  if (container.streamId !== fluid.streamId) {
    ask('wrong-stream', { containerStream: container.streamName, drainStream: fluid.streamName })
  }
  const room = subtract(container.fillLineLitres, container.litres)
  const over = subtract(litres, room)
  if (isPositive(over)) ask('over-fill-line', { overLitres: over, roomLitres: room })
  return asked
}

/**
 * A figure in the other unit: the volume is within 12 % of 3.785 times (or a 3.785th of) what the machine gives,
 * taking 95 % of a reservoir refill as what is expected. Common practice in the trade, not from a standard.
 */
function unitSlip(drain: DrainInQuestion): DrainQuestion[] {
  const reservoir = drain.machine?.reservoirLitres
  if (
    drain.machine === null ||
    reservoir === null ||
    reservoir === undefined ||
    !isPositive(reservoir)
  )
    return []
  const expected = multiply(reservoir, '0.95')
  const ratio = divide(drain.litres, expected, 6)
  const facts = { machine: drain.machine.code, expectedLitres: expected, typedLitres: drain.litres }
  const isAmerican = drain.unit === 'gal_us'
  if (isAmerican && isWithin(ratio, litresPerGallon)) {
    return [
      {
        code: 'looks-like-litres',
        containerId: null,
        facts: { ...facts, meantLitres: divide(drain.litres, litresPerGallon, 6) },
      },
    ]
  }
  if (drain.unit === 'L' && isWithin(ratio, divide('1', litresPerGallon, 6))) {
    return [
      {
        code: 'looks-like-gallons',
        containerId: null,
        facts: { ...facts, meantLitres: multiply(drain.litres, litresPerGallon) },
      },
    ]
  }
  return []
}

function isWithin(ratio: string, aim: string): boolean {
  const off = divide(absolute(subtract(ratio, aim)), aim, 6)
  return compare(off, '0.12') <= 0
}

/** More than 1.05 of the whole system (or, where only that is known, twice the reservoir). */
function overMachine(drain: DrainInQuestion): DrainQuestion[] {
  const { machine } = drain
  if (machine === null) return []
  const holds =
    machine.systemLitres ??
    (machine.reservoirLitres === null ? null : multiply(machine.reservoirLitres, '2'))
  if (holds === null || compare(drain.litres, multiply(holds, '1.05')) <= 0) return []
  return [
    {
      code: 'more-than-machine-holds',
      containerId: null,
      facts: { machine: machine.code, holdsLitres: normalise(holds), typedLitres: drain.litres },
    },
  ]
}

/** Same machine, a container in common, volume within 2 %, within two hours, whoever typed it. */
function lookAlikes(drain: DrainInQuestion, recent: readonly RecordedDrain[]): DrainQuestion[] {
  const twoHours = 2 * 3_600_000
  const poured = new Set(drain.legs.map(({ container }) => container.id))
  return recent
    .filter(
      (other) =>
        other.id !== drain.id &&
        other.machineId !== null &&
        other.machineId === (drain.machine?.id ?? null) &&
        other.containerIds.some((id) => poured.has(id)) &&
        Math.abs(Date.parse(other.occurredAt) - Date.parse(drain.occurredAt)) <= twoHours &&
        compare(absolute(subtract(other.litres, drain.litres)), multiply(other.litres, '0.02')) <=
          0,
    )
    .map((other) => ({
      code: 'looks-like-saved' as const,
      containerId: null,
      facts: {
        number: other.number,
        by: other.by,
        otherLitres: normalise(other.litres),
        otherAt: other.occurredAt,
        otherId: other.id,
      },
    }))
}
