import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import {
  findDrainWithNames,
  listMarkRecords,
  listRevisions,
  type listDrainRecords,
} from '@/db/queries/drains'
import { inArray } from 'drizzle-orm'
import { containers, fluids } from '@/db/schema/sites'
import { drainFacts, type drain, type drainRow, type DrainFacts } from '@/shared/contracts/drains'
import type { mark } from '@/shared/contracts/values'
import { toLitres } from '@/shared/quantities/convert'
import { normalise, subtract, sum } from '@/shared/quantities/decimals'
import type { MeasuringMethod } from '@/shared/quantities/methods'
import type { Unit } from '@/shared/quantities/units'
import { listContainersOfLegs } from '@/db/queries/drains'
import { problem } from '../problem'
import { spreadOfFacts } from './post-drain'

type DrainWithNames = Awaited<ReturnType<typeof listDrainRecords>>[number]
type Revision = Awaited<ReturnType<typeof listRevisions>>[number]

/** Rows of the list; the revisions of all of them are read at once. */
export async function presentDrainRows(
  tx: Transaction,
  found: DrainWithNames[],
): Promise<z.input<typeof drainRow>[]> {
  const revisions = await listRevisions(
    tx,
    found.map(({ drain }) => drain.id),
  )
  const newest = new Map(revisions.map((one) => [one.revision.drainId, one]))
  const codes = await containerCodes(tx, [...newest.values()].map(factsOf))
  return found.map((one) => presentRow(one, newest.get(one.drain.id), codes))
}

/** One drain with everything. @throws Problem not-found */
export async function presentDrain(tx: Transaction, id: string): Promise<z.input<typeof drain>> {
  const found = await findDrainWithNames(tx, id)
  if (found === undefined) throw problem('not-found')
  const revisions = await listRevisions(tx, [id])
  const newest = revisions.at(-1)
  if (newest === undefined) throw problem('not-found')
  const facts = factsOf(newest)
  const codes = await containerCodes(tx, revisions.map(factsOf))
  const row = presentRow(found, newest, codes)
  const fluidIds = [facts.fluidId, facts.refill?.fluidId].filter((one) => one !== undefined)
  const names =
    fluidIds.length === 0 ? [] : await tx.select().from(fluids).where(inArray(fluids.id, fluidIds))
  const fluidOf = (fluidId: string | undefined) => {
    const one = names.find((name) => name.id === fluidId)
    return one === undefined ? null : { id: one.id, name: one.name }
  }
  const after = await listContainersOfLegs(
    tx,
    facts.legs.map(({ containerId }) => containerId),
  )
  return {
    ...row,
    fluid: fluidOf(facts.fluidId),
    spreadPercent: spreadOfFacts(facts),
    filters: facts.filters.map((filters) => ({
      ...filters,
      containerCode: codes.get(filters.containerId ?? '') ?? null,
    })),
    absorbents:
      facts.absorbents === undefined
        ? null
        : {
            mass: facts.absorbents.mass,
            containerCode: codes.get(facts.absorbents.containerId ?? '') ?? null,
          },
    breatherCaps: facts.breatherCaps,
    refill:
      facts.refill === undefined
        ? null
        : { volume: facts.refill.volume, fluid: fluidOf(facts.refill.fluidId) },
    note: facts.note,
    revisions: revisions.map(({ revision, by }) => ({
      revision: revision.revision,
      act: revision.act,
      facts: drainFacts.strip().parse(revision.facts),
      reasonCode: revision.reasonCode,
      reasonText: revision.reasonText,
      by: { id: revision.madeBy, name: by },
      at: revision.madeAt.toISOString(),
    })),
    marks: (await listMarkRecords(tx, { drainId: id })).map(presentMark),
    containersAfter: after.map(({ container, litres }) => ({
      containerId: container.id,
      containerCode: container.code,
      litres: normalise(litres),
      fillLineLitres: normalise(container.fillLineLitres),
      roomLitres: subtract(container.fillLineLitres, litres),
    })),
  }
}

export function presentMark(
  found: Awaited<ReturnType<typeof listMarkRecords>>[number],
): z.input<typeof mark> {
  const { mark: row, drainNumber, containerCode, reviewer } = found
  return {
    ...row,
    drainNumber,
    containerCode,
    raisedAt: row.raisedAt.toISOString(),
    reviewedAt: row.reviewedAt?.toISOString() ?? null,
    reviewedBy: reviewer,
  }
}

function presentRow(
  found: DrainWithNames,
  newest: Revision | undefined,
  codes: Map<string, string>,
): z.input<typeof drainRow> {
  const { drain: row } = found
  const facts = newest === undefined ? undefined : factsOf(newest)
  return {
    id: row.id,
    number: row.number,
    siteId: row.siteId,
    machine: {
      id: row.machineId,
      code: found.machineCode,
      description:
        row.machineText || [found.machineName, found.machineKind].filter(Boolean).join(', '),
    },
    stream: found.stream,
    occurredAt: row.occurredAt.toISOString(),
    occurredOn: row.occurredOn,
    timeZone: found.timeZone,
    volume: { value: row.enteredValue, unit: row.enteredUnit as Unit },
    litres: normalise(row.litres),
    method: row.method as MeasuringMethod,
    isEstimate: row.isEstimate,
    legs: facts === undefined ? [] : legsOf(facts, row.litres, codes),
    filterCount:
      facts === undefined ? 0 : facts.filters.reduce((total, { count }) => total + count, 0),
    state: row.state,
    revision: row.revision,
    needsLook: found.needsLook,
    recordedBy: { id: row.recordedBy, name: found.recordedByName },
    recordedAt: row.recordedAt.toISOString(),
  }
}

function legsOf(facts: DrainFacts, litres: string, codes: Map<string, string>) {
  const given = facts.legs.map((leg) =>
    leg.volume === undefined ? undefined : toLitres(leg.volume.value, leg.volume.unit),
  )
  const remainder = subtract(litres, sum(given.filter((part) => part !== undefined)))
  return facts.legs.map((leg, index) => ({
    containerId: leg.containerId,
    containerCode: codes.get(leg.containerId) ?? '',
    volume: leg.volume ?? null,
    litres: given[index] ?? remainder,
  }))
}

function factsOf({ revision }: Revision): DrainFacts {
  return drainFacts.strip().parse(revision.facts)
}

async function containerCodes(tx: Transaction, all: DrainFacts[]): Promise<Map<string, string>> {
  const ids = new Set(
    all.flatMap((facts) => [
      ...facts.legs.map(({ containerId }) => containerId),
      ...facts.filters.flatMap(({ containerId }) => containerId ?? []),
      ...(facts.absorbents?.containerId === undefined ? [] : [facts.absorbents.containerId]),
    ]),
  )
  if (ids.size === 0) return new Map()
  const rows = await tx
    .select({ id: containers.id, code: containers.code })
    .from(containers)
    .where(inArray(containers.id, [...ids]))
  return new Map(rows.map(({ id, code }) => [id, code]))
}
