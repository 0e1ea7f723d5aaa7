import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import {
  findPickup,
  listAuditOf,
  listDocuments,
  listPickupLines,
  listSignatures,
  type listPickupRecords,
} from '@/db/queries/pickups'
import { daysBetween, localDay } from '@/shared/calendar'
import type { pickup, pickupLine, pickupRow } from '@/shared/contracts/pickups'
import { shownStage } from '@/shared/pickup-stages'
import { isZero, normalise, subtract, sum } from '@/shared/quantities/decimals'
import type { Unit } from '@/shared/quantities/units'
import { profileOf } from '@/shared/rules/profiles'
import { problem } from '../problem'
import { differencePercent, differsByRule, percent } from './difference'
import { missingItems } from './missing-items'
import { massOf } from './pdf/gather-manifest-facts'

type Found = Awaited<ReturnType<typeof listPickupRecords>>[number]
type Line = Awaited<ReturnType<typeof listPickupLines>>[number]

export async function presentPickupRows(
  tx: Transaction,
  found: Found[],
  now: Date,
): Promise<z.input<typeof pickupRow>[]> {
  const lines = await listPickupLines(
    tx,
    found.map(({ pickup: row }) => row.id),
  )
  return found.map((one) =>
    presentRow(
      one,
      lines.filter(({ line }) => line.pickupId === one.pickup.id),
      now,
    ),
  )
}

/** One pickup with everything. @throws Problem not-found */
export async function presentPickup(
  tx: Transaction,
  id: string,
  now: Date,
): Promise<z.input<typeof pickup>> {
  const found = await findPickup(tx, { id })
  if (found === undefined) throw problem('not-found')
  const { pickup: row, site } = found
  const lines = await listPickupLines(tx, [id])
  return {
    ...presentRow(found, lines, now),
    version: row.version,
    timeZone: site.timeZone,
    orderNumber: row.orderNumber,
    note: row.note,
    createdAt: row.createdAt.toISOString(),
    createdBy: { id: row.createdBy, name: found.createdByName ?? '' },
    issuedAt: row.issuedAt?.toISOString() ?? null,
    issuedBy: named(row.issuedBy, found.issuedByName),
    lines: lines.map(presentLine),
    missing: row.stage === 'planned' ? await missingItems(tx, found, lines) : [],
    signatures: (await listSignatures(tx, id)).map((one) => ({
      ...one,
      isDrawn: one.strokes !== null,
      signedAt: one.signedAt.toISOString(),
    })),
    documents: (await listDocuments(tx, id)).map((one) => ({
      ...one,
      madeAt: one.madeAt.toISOString(),
    })),
    received:
      row.receivedAt === null || row.receivedOn === null || row.receivedBy === null
        ? null
        : {
            at: row.receivedAt.toISOString(),
            on: row.receivedOn,
            by: { id: row.receivedBy, name: found.receivedByName ?? '' },
            ticket: row.receivedTicket,
            note: row.receivedNote,
          },
    difference: differenceOf(
      row.receivedAt !== null,
      lines,
      profileOf(site.profile).differsPercent,
    ),
    settled:
      row.settledAt === null || row.settledBy === null
        ? null
        : {
            at: row.settledAt.toISOString(),
            by: { id: row.settledBy, name: found.settledByName ?? '' },
            cause: row.settleCause ?? '',
            note: row.settleNote,
          },
    voided:
      row.voidedAt === null || row.voidedBy === null
        ? null
        : {
            at: row.voidedAt.toISOString(),
            by: { id: row.voidedBy, name: found.voidedByName ?? '' },
            reason: row.voidReason,
          },
    history: (await listAuditOf(tx, id)).map(({ entry, by }) => ({
      at: entry.at.toISOString(),
      by,
      act: entry.act,
      details: entry.details,
    })),
  }
}

function presentRow(found: Found, lines: Line[], now: Date): z.input<typeof pickupRow> {
  const { pickup: row, site } = found
  const today = localDay(now, site.timeZone)
  return {
    id: row.id,
    number: row.number,
    siteId: row.siteId,
    siteCode: site.code,
    stage: shownStage({
      stage: row.stage,
      returnDueOn: row.returnDueOn,
      hasReceived: row.receivedAt !== null,
      today,
    }),
    hauler: found.hauler && { id: found.hauler.id, name: found.hauler.name },
    facility: found.facility && { id: found.facility.id, name: found.facility.name },
    plannedOn: row.plannedOn,
    signedOutAt: row.signedOutAt?.toISOString() ?? null,
    returnDueOn: row.returnDueOn,
    daysSinceSigned:
      row.signedOutAt === null
        ? null
        : daysBetween(localDay(row.signedOutAt, site.timeZone), today),
    streams: [...new Set(lines.map(({ stream }) => stream.name))],
    totalLitres: sum(lines.map(({ line }) => line.shippedLitres)),
    totalKilograms: sum(lines.map(({ line }) => line.shippedKilograms)),
    lineCount: lines.length,
  }
}

function presentLine({
  line,
  container,
  stream,
  bookLitres,
  bookKilograms,
  bookPieces,
}: Line): z.input<typeof pickupLine> {
  const isFluid = stream.kind === 'fluid'
  const density = isFluid ? stream.density : null
  return {
    id: line.id,
    position: line.position,
    containerId: container.id,
    containerCode: container.code,
    containerType: container.type,
    containerDescription: container.description,
    containerCount: line.containerCount,
    stream: {
      id: stream.id,
      code: stream.code,
      name: stream.name,
      kind: stream.kind,
      wasteCode: stream.wasteCode,
    },
    shipped: { value: line.shippedValue, unit: line.shippedUnit as Unit },
    shippedLitres: normalise(line.shippedLitres),
    shippedKilograms: normalise(line.shippedKilograms),
    pieces: line.pieces,
    massKilograms: massOf(isFluid, line.shippedLitres, line.shippedKilograms, density),
    massIsEstimate: isFluid,
    densityUsed: density === null ? null : normalise(density),
    bookLitres: normalise(bookLitres),
    bookKilograms: normalise(bookKilograms),
    bookPieces,
    received:
      line.receivedValue === null || line.receivedUnit === null || line.receivedMethod === null
        ? null
        : {
            quantity: { value: line.receivedValue, unit: line.receivedUnit as Unit },
            litres: normalise(line.receivedLitres ?? '0'),
            kilograms: normalise(line.receivedKilograms ?? '0'),
            pieces: line.receivedPieces ?? 0,
            method: line.receivedMethod as NonNullable<
              z.input<typeof pickupLine>['received']
            >['method'],
            densityUsed: line.receivedDensity === null ? null : normalise(line.receivedDensity),
            note: line.receivedNote,
          },
    differencePercent: differencePercent(line),
  }
}

function differenceOf(
  hasReceived: boolean,
  lines: Line[],
  rulePercent: string,
): z.input<typeof pickup>['difference'] {
  if (!hasReceived) return null
  const rows = lines.map(({ line }) => line)
  const shipped = sum(rows.map(({ shippedLitres }) => shippedLitres))
  const received = sum(rows.map(({ receivedLitres }) => receivedLitres ?? '0'))
  const kilograms = (pick: 'shippedKilograms' | 'receivedKilograms') =>
    sum(rows.map((row) => row[pick] ?? '0'))
  return {
    litres: subtract(received, shipped),
    kilograms: subtract(kilograms('receivedKilograms'), kilograms('shippedKilograms')),
    percent: isZero(shipped) ? null : percent(received, shipped),
    rulePercent,
    exceeds: differsByRule(rows, rulePercent),
  }
}

function named(id: string | null, name: string | null): { id: string; name: string } | null {
  return id === null || name === null ? null : { id, name }
}
