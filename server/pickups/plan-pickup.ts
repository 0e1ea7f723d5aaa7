import { and, eq } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { listContentsToShip } from '@/db/queries/pickups'
import type { SiteRow } from '@/db/queries/sites'
import { pickupLines, pickups } from '@/db/schema/pickups'
import { parties } from '@/db/schema/sites'
import type { changePickupBody, PlanPickupBody } from '@/shared/contracts/pickups'
import { convert, toKilograms, toLitres } from '@/shared/quantities/convert'
import { isPositive, normalise, roundHalfEven } from '@/shared/quantities/decimals'
import { measureOf, type VolumeUnit } from '@/shared/quantities/units'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { contentHash } from '../content-hash'
import { fieldProblem, problem } from '../problem'
import { getSite } from '../sites-seen'
import { getPickup } from './get-pickup'

type Plan = Pick<
  PlanPickupBody,
  'haulerId' | 'facilityId' | 'plannedOn' | 'orderNumber' | 'note' | 'lines'
>

/** Plans a pickup: nothing has left, everything may still change. @throws Problem id-reused, not-found, wrong-site, retired */
export async function planPickup(
  tx: Transaction,
  context: ActContext,
  body: PlanPickupBody,
): Promise<{ isRepeated: boolean }> {
  demand(context, 'plan-pickup', { siteId: body.siteId })
  const hash = contentHash(body)
  const [before] = await tx.select().from(pickups).where(eq(pickups.id, body.id)).limit(1)
  if (before !== undefined) {
    if (before.contentHash !== hash) throw problem('id-reused')
    return { isRepeated: true }
  }
  const site = await getSite(tx, context, body.siteId)
  if (site.retiredAt !== null) throw problem('retired')
  await checkParties(tx, body)
  await tx.insert(pickups).values({
    id: body.id,
    organisationId: context.person.organisationId,
    siteId: site.id,
    stage: 'planned',
    ...planColumns(body),
    version: 1,
    createdAt: context.clock(),
    createdBy: context.person.id,
    contentHash: hash,
  })
  await insertLines(tx, context, site, body.id, body)
  await writeAudit(tx, context, {
    act: 'plan-pickup',
    subjectKind: 'pickup',
    subjectId: body.id,
    siteId: site.id,
    details: { lines: body.lines.length, plannedOn: body.plannedOn },
  })
  return { isRepeated: false }
}

/** Changes a plan as a whole. @throws Problem not-found, wrong-stage, changed-under-you, wrong-site */
export async function changePickup(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: z.output<typeof changePickupBody>,
): Promise<void> {
  const { pickup, site } = await getPickup(tx, context, 'plan-pickup', id)
  if (pickup.stage !== 'planned') throw problem('wrong-stage', { facts: { stage: pickup.stage } })
  await checkParties(tx, body)
  const changed = await tx
    .update(pickups)
    .set({ ...planColumns(body), version: body.version + 1 })
    .where(and(eq(pickups.id, id), eq(pickups.version, body.version), eq(pickups.stage, 'planned')))
    .returning({ id: pickups.id })
  if (changed.length === 0) throw problem('changed-under-you')
  // Line ids are the client's; those of the old plan stay as removed so that an id names one thing for ever.
  await tx.update(pickupLines).set({ removed: true }).where(eq(pickupLines.pickupId, id))
  await insertLines(tx, context, site, id, body)
  await writeAudit(tx, context, {
    act: 'plan-pickup',
    subjectKind: 'pickup',
    subjectId: id,
    siteId: site.id,
    details: { what: 'change', lines: body.lines.length, plannedOn: body.plannedOn },
  })
}

function planColumns({ haulerId, facilityId, plannedOn, orderNumber, note }: Plan) {
  return { haulerId, facilityId, plannedOn, orderNumber, note }
}

async function checkParties(tx: Transaction, body: Plan): Promise<void> {
  for (const [field, id, kind] of [
    ['haulerId', body.haulerId, 'hauler'],
    ['facilityId', body.facilityId, 'facility'],
  ] as const) {
    if (id === null) continue
    const [party] = await tx
      .select()
      .from(parties)
      .where(and(eq(parties.id, id), eq(parties.kind, kind)))
    if (party === undefined)
      throw fieldProblem('fields-refused', field, 'unknown', 'There is no such party')
    if (party.retiredAt !== null)
      throw fieldProblem('retired', field, 'retired', 'This party is retired')
  }
}

async function insertLines(
  tx: Transaction,
  context: ActContext,
  site: SiteRow,
  pickupId: string,
  body: Plan,
): Promise<void> {
  const contents = await listContentsToShip(
    tx,
    body.lines.map(({ containerId }) => containerId),
  )
  const seen = new Set<string>()
  const rows = body.lines.map((line, index) => {
    const path = `lines.${index}.containerId`
    const found = contents.find(({ container }) => container.id === line.containerId)
    if (found === undefined)
      throw fieldProblem('fields-refused', path, 'unknown', 'There is no such container')
    if (found.container.siteId !== site.id) {
      throw fieldProblem('wrong-site', path, 'wrong-site', 'That belongs to another site', {
        name: found.container.code,
      })
    }
    if (seen.has(line.containerId))
      throw fieldProblem('fields-refused', path, 'twice', 'This container is on the plan already')
    seen.add(line.containerId)
    return {
      id: line.id,
      organisationId: context.person.organisationId,
      pickupId,
      position: index + 1,
      containerId: line.containerId,
      streamId: found.stream.id,
      containerCount: line.containerCount,
      ...shippedColumns(line, found, site.volumeUnit as VolumeUnit, `lines.${index}.quantity.unit`),
    }
  })
  await tx.insert(pickupLines).values(rows)
}

type Contents = Awaited<ReturnType<typeof listContentsToShip>>[number]

/**
 * What a line ships. Left out, it is exactly what the book holds; the figure shown beside it is that rounded to three
 * decimals in the site's unit, because litres recur in gallons.
 */
function shippedColumns(
  line: Plan['lines'][number],
  found: Contents,
  unit: VolumeUnit,
  unitPath: string,
) {
  const isFluid = found.stream.kind === 'fluid'
  if (line.quantity === undefined) {
    const litres = isPositive(found.litres) && isFluid ? normalise(found.litres) : '0'
    const kilograms = isPositive(found.kilograms) && !isFluid ? normalise(found.kilograms) : '0'
    return {
      shippedValue: isFluid ? normalise(roundHalfEven(convert(litres, 'L', unit), 3)) : kilograms,
      shippedUnit: isFluid ? unit : 'kg',
      shippedLitres: litres,
      shippedKilograms: kilograms,
      pieces: isFluid ? 0 : line.pieces || Math.max(0, found.pieces),
    }
  }
  const { value, unit: given } = line.quantity
  if ((measureOf(given) === 'volume') !== isFluid) {
    throw fieldProblem(
      'fields-refused',
      unitPath,
      'unit-does-not-fit',
      isFluid ? 'Choose a unit of volume' : 'Choose a unit of mass',
    )
  }
  return {
    shippedValue: value,
    shippedUnit: given,
    shippedLitres: isFluid ? toLitres(value, given) : '0',
    shippedKilograms: isFluid ? '0' : toKilograms(value, given),
    pieces: isFluid ? 0 : line.pieces || Math.max(0, found.pieces),
  }
}
