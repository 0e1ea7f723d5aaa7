import { and, eq, inArray } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { listStandingMovements } from '@/db/queries/book'
import { listPickupLines } from '@/db/queries/pickups'
import { pickupLines, pickups } from '@/db/schema/pickups'
import { instantFromLocal, localDay } from '@/shared/calendar'
import type { ReceivePickupBody } from '@/shared/contracts/pickups'
import { stagesBefore } from '@/shared/pickup-stages'
import { toKilograms, toLitres } from '@/shared/quantities/convert'
import { divide, isPositive } from '@/shared/quantities/decimals'
import { measureOf } from '@/shared/quantities/units'
import { profileOf } from '@/shared/rules/profiles'
import type { ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { accountOf } from '../book/account-of'
import { postMovements, type MovementDraft } from '../book/post-movements'
import { reverseMovements } from '../book/reverse-movements'
import { fieldProblem, problem } from '../problem'
import { differsByRule } from './difference'
import { demandStep, getPickup } from './get-pickup'

/**
 * Enters what the facility received. Entered again before settling, the old receipts are mirrored: the newest stands.
 * @throws Problem fields-refused, time-in-future, wrong-stage, changed-under-you
 */
export async function receivePickup(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: ReceivePickupBody,
): Promise<void> {
  const found = await getPickup(tx, context, 'receive-pickup', id)
  demandStep(found, 'receive', body.version)
  const { pickup, site, hauler, facility } = found
  if (hauler === null || facility === null) throw problem('pickup-incomplete')
  const today = localDay(context.clock(), site.timeZone)
  if (body.receivedOn > today)
    throw fieldProblem(
      'time-in-future',
      'receivedOn',
      'in-future',
      'The day must be today or earlier',
    )
  if (
    pickup.signedOutAt !== null &&
    body.receivedOn < localDay(pickup.signedOutAt, site.timeZone)
  ) {
    throw fieldProblem(
      'fields-refused',
      'receivedOn',
      'before-shipped',
      'The day must not be before the pickup left',
    )
  }
  const lines = await listPickupLines(tx, [id])
  const received = lines.map(({ line, stream, container }) => {
    const index = body.lines.findIndex(({ lineId }) => lineId === line.id)
    const given = body.lines[index]
    if (given === undefined)
      throw fieldProblem(
        'fields-refused',
        'lines',
        'line-missing',
        `Say what was received from ${container.code}; 0 when nothing`,
      )
    return { line, stream, given, ...receivedFigures(given, stream, index) }
  })
  const unknown = body.lines.findIndex(
    ({ lineId }) => !lines.some(({ line }) => line.id === lineId),
  )
  if (unknown >= 0)
    throw fieldProblem(
      'fields-refused',
      `lines.${unknown}.lineId`,
      'unknown',
      'This line is not on the manifest',
    )

  const old = (await listStandingMovements(tx, { pickupId: id })).filter(
    ({ reason }) => reason === 'receipt',
  )
  await reverseMovements(tx, context, site.id, old, 'Received quantities entered again')
  const from = await accountOf(tx, context, site.id, { kind: 'hauler', partyId: hauler.id })
  const to = await accountOf(tx, context, site.id, { kind: 'facility', partyId: facility.id })
  const occurredAt = receivedAt(body.receivedOn, site.timeZone, pickup.signedOutAt, context.clock())
  const drafts: MovementDraft[] = []
  for (const { line, given, litres, kilograms, pieces, density } of received) {
    await tx
      .update(pickupLines)
      .set({
        receivedValue: given.quantity.value,
        receivedUnit: given.quantity.unit,
        receivedLitres: litres,
        receivedKilograms: kilograms,
        receivedPieces: pieces,
        receivedMethod: given.method,
        receivedNote: given.note,
        receivedDensity: density,
      })
      .where(eq(pickupLines.id, line.id))
    if (!isPositive(litres) && !isPositive(kilograms) && pieces === 0) continue
    drafts.push({
      streamId: line.streamId,
      fromAccountId: from,
      toAccountId: to,
      litres,
      kilograms,
      pieces,
      enteredValue: given.quantity.value,
      enteredUnit: given.quantity.unit,
      method: given.method,
      spreadPercent: null,
      isEstimate: given.method === 'estimate' || density !== null,
      reason: 'receipt',
      pickupId: id,
      pickupLineId: line.id,
      occurredAt,
      occurredOn: body.receivedOn,
      note: given.note,
    })
  }
  await postMovements(tx, context, site.id, drafts)
  const shown = received.map(({ line, litres, kilograms, pieces }) => ({
    ...line,
    receivedLitres: litres,
    receivedKilograms: kilograms,
    receivedPieces: pieces,
  }))
  const differs = differsByRule(shown, profileOf(site.profile).differsPercent)
  const changed = await tx
    .update(pickups)
    .set({
      stage: differs ? 'differs' : 'signed-out',
      receivedAt: context.clock(),
      receivedOn: body.receivedOn,
      receivedBy: context.person.id,
      receivedTicket: body.ticket,
      receivedNote: body.note,
      version: body.version + 1,
    })
    .where(
      and(
        eq(pickups.id, id),
        eq(pickups.version, body.version),
        inArray(pickups.stage, stagesBefore('receive')),
      ),
    )
    .returning({ id: pickups.id })
  if (changed.length === 0) throw problem('changed-under-you')
  await writeAudit(tx, context, {
    act: 'receive-pickup',
    subjectKind: 'pickup',
    subjectId: id,
    siteId: site.id,
    details: { receivedOn: body.receivedOn, ticket: body.ticket, differs, again: old.length > 0 },
  })
}

/**
 * The weigh ticket names a day; noon is that day in every season. On the day it left: not before it left, and never
 * later than now.
 */
function receivedAt(day: string, zone: string, leftAt: Date | null, now: Date): Date {
  const noon = new Date(instantFromLocal(`${day}T12:00`, zone).instant)
  const afterLeaving = leftAt !== null && leftAt > noon ? leftAt : noon
  return afterLeaving < now ? afterLeaving : now
}

/** Litres of a fluid (a weighed one through its density, rounded once to a millionth), kilograms of a solid. */
function receivedFigures(
  given: ReceivePickupBody['lines'][number],
  stream: { kind: 'fluid' | 'solid'; density: string | null; name: string },
  index: number,
): { litres: string; kilograms: string; pieces: number; density: string | null } {
  const { value, unit } = given.quantity
  const path = `lines.${index}.quantity.unit`
  if (stream.kind === 'solid') {
    if (measureOf(unit) !== 'mass')
      throw fieldProblem('fields-refused', path, 'unit-does-not-fit', 'Choose a unit of mass')
    return { litres: '0', kilograms: toKilograms(value, unit), pieces: given.pieces, density: null }
  }
  if (measureOf(unit) === 'volume')
    return { litres: toLitres(value, unit), kilograms: '0', pieces: 0, density: null }
  if (stream.density === null) {
    throw fieldProblem(
      'fields-refused',
      path,
      'no-density',
      `${stream.name} has no density on record: enter a volume`,
    )
  }
  return {
    litres: divide(toKilograms(value, unit), stream.density, 6),
    kilograms: '0',
    pieces: 0,
    density: stream.density,
  }
}
