import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import {
  listContainerLines,
  listContainersWithContents,
  listFillings,
  listHolds,
  listOpenPickupsOfContainers,
} from '@/db/queries/containers'
import { listMarkRecords } from '@/db/queries/drains'
import { daysBetween, localDay } from '@/shared/calendar'
import type { container, containerDetail, containerLine, hold } from '@/shared/contracts/containers'
import {
  compare,
  isNegative,
  multiply,
  negate,
  normalise,
  subtract,
} from '@/shared/quantities/decimals'
import { isUnit } from '@/shared/quantities/units'
import { presentMark } from '../drains/present-drain'
import { problem } from '../problem'
import { presentContainerRecord } from '../set-up/present-set-up'

type Found = Awaited<ReturnType<typeof listContainersWithContents>>[number]
type Shown = z.input<typeof container>

/** Containers with contents, age and level: five queries for any number of them. */
export async function presentContainers(
  tx: Transaction,
  found: Found[],
  now: Date,
): Promise<Shown[]> {
  const ids = found.map((row) => row.container.id)
  const fillings = new Map((await listFillings(tx, ids)).map((row) => [row.containerId, row]))
  const onPickups = new Map(
    (await listOpenPickupsOfContainers(tx, ids)).map((row) => [row.containerId, row]),
  )
  return found.map((row) => {
    const filling = fillings.get(row.container.id)
    const onPickup = onPickups.get(row.container.id)
    const firstFilledOn = filling?.firstFilledOn ?? null
    const { stream } = row
    return {
      ...presentContainerRecord(row.container),
      siteCode: row.siteCode,
      stream: {
        id: stream.id,
        code: stream.code,
        name: stream.name,
        kind: stream.kind,
        labelWords: stream.labelWords,
      },
      litres: normalise(row.litres),
      kilograms: normalise(row.kilograms),
      pieces: row.pieces,
      roomLitres: subtract(row.container.fillLineLitres, row.litres),
      level: levelOf(row.litres, row.container.fillLineLitres),
      hold:
        row.hold === null
          ? null
          : presentHold({ hold: row.hold, heldByName: row.heldByName ?? '', releasedByName: null }),
      firstFilledOn,
      ageDays:
        firstFilledOn === null ? null : daysBetween(firstFilledOn, localDay(now, row.timeZone)),
      hasEstimates: filling?.hasEstimates ?? false,
      openMarks: row.openMarks,
      onPickup: onPickup === undefined ? null : { id: onPickup.id, number: onPickup.number },
    }
  })
}

/** One container with its newest lines. @throws Problem not-found */
export async function presentContainerDetail(
  tx: Transaction,
  by: { id: string } | { code: string },
  siteIds: readonly string[] | null,
  now: Date,
  lineLimit = 50,
): Promise<z.input<typeof containerDetail>> {
  const found = await listContainersWithContents(tx, {
    siteIds,
    ...('id' in by ? { ids: [by.id] } : { code: by.code }),
  })
  const [shown] = await presentContainers(tx, found, now)
  if (shown === undefined) throw problem('not-found')
  const lines = await listContainerLines(tx, shown.id, lineLimit + 1)
  return {
    ...shown,
    holds: (await listHolds(tx, shown.id)).map(presentHold),
    marks: (await listMarkRecords(tx, { containerId: shown.id, limit: 50 })).map(presentMark),
    lines: lines.slice(0, lineLimit).map(presentLine),
    hasMoreLines: lines.length > lineLimit,
  }
}

/** Near is above nine tenths of the fill line. */
function levelOf(litres: string, fillLine: string): Shown['level'] {
  if (isNegative(litres)) return 'below-zero'
  if (compare(litres, fillLine) > 0) return 'over'
  return compare(litres, multiply(fillLine, '0.9')) >= 0 ? 'near' : 'room'
}

function presentHold(row: {
  hold: Awaited<ReturnType<typeof listHolds>>[number]['hold']
  heldByName: string
  releasedByName: string | null
}): z.input<typeof hold> {
  const one = row.hold
  return {
    id: one.id,
    reason: one.reason,
    halogensPpm: one.halogensPpm,
    heldBy: { id: one.heldBy, name: row.heldByName },
    heldAt: one.heldAt.toISOString(),
    releasedBy:
      one.releasedBy === null || row.releasedByName === null
        ? null
        : { id: one.releasedBy, name: row.releasedByName },
    releasedAt: one.releasedAt?.toISOString() ?? null,
    releaseNote: one.releaseNote,
  }
}

function presentLine(
  row: Awaited<ReturnType<typeof listContainerLines>>[number],
): z.input<typeof containerLine> {
  const { movement } = row
  const signed = (value: string) => normalise(row.isIn ? value : negate(value))
  return {
    movementId: movement.id,
    lineNo: movement.lineNo,
    occurredOn: movement.occurredOn,
    recordedAt: movement.recordedAt.toISOString(),
    reason: movement.reason === 'reversal' ? movement.countsAs : movement.reason,
    isReversal: movement.reason === 'reversal',
    isReversed: row.isReversed,
    litres: signed(movement.litres),
    kilograms: signed(movement.kilograms),
    pieces: row.isIn ? movement.pieces : -movement.pieces,
    entered: isUnit(movement.enteredUnit)
      ? { value: movement.enteredValue, unit: movement.enteredUnit }
      : null,
    other: row.otherCode ?? row.otherPlace ?? row.otherKind,
    stream: row.streamName,
    drain:
      movement.drainId === null || row.drainNumber === null
        ? null
        : { id: movement.drainId, number: row.drainNumber },
    pickup: movement.pickupId === null ? null : { id: movement.pickupId, number: row.pickupNumber },
    litresAfter: normalise(row.litresAfter),
  }
}
