import { and, count, desc, eq, inArray, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { listContainersWithContents } from '@/db/queries/containers'
import { listDrainRecords, listMarkRecords } from '@/db/queries/drains'
import { drains } from '@/db/schema/drains'
import { flags } from '@/db/schema/limits'
import { pickups } from '@/db/schema/pickups'
import { parties } from '@/db/schema/sites'
import { localDay } from '@/shared/calendar'
import type { readYard } from '@/shared/contracts/containers'
import { shownStage } from '@/shared/pickup-stages'
import { normalise } from '@/shared/quantities/decimals'
import { demand, type ActContext } from '../act-context'
import { presentDrainRows, presentMark } from '../drains/present-drain'
import { getSite } from '../sites-seen'
import { presentContainers } from './present-container'

const waitingStages = ['planned', 'ready', 'at-the-gate', 'signed-out', 'differs'] as const

/** Today at one site. @throws Problem not-found */
export async function readYardOf(
  tx: Transaction,
  context: ActContext,
  siteId: string,
): Promise<z.input<typeof readYard.reply>> {
  demand(context, 'read-yard', { siteId })
  const site = await getSite(tx, context, siteId)
  const now = context.clock()
  const today = localDay(now, site.timeZone)
  const found = await listContainersWithContents(tx, { siteIds: [siteId], isRetired: false })
  const latest = await listDrainRecords(tx, { siteIds: [siteId], limit: 8 })
  const [todays] = await tx
    .select({ drains: count(), litres: sql<string>`coalesce(sum(${drains.litres}), 0)::text` })
    .from(drains)
    .where(
      and(eq(drains.siteId, siteId), eq(drains.occurredOn, today), eq(drains.state, 'standing')),
    )
  const [open] = await tx
    .select({ flags: count() })
    .from(flags)
    .where(and(eq(flags.siteId, siteId), eq(flags.state, 'open')))
  const waiting = await tx
    .select({ pickup: pickups, hauler: parties.name })
    .from(pickups)
    .leftJoin(parties, eq(parties.id, pickups.haulerId))
    .where(and(eq(pickups.siteId, siteId), inArray(pickups.stage, [...waitingStages])))
    .orderBy(pickups.plannedOn)
    .limit(20)
  return {
    today,
    containers: await presentContainers(tx, found, now),
    marks: (await listMarkRecords(tx, { siteIds: [siteId], isOpen: true, limit: 20 })).map(
      presentMark,
    ),
    openFlags: open?.flags ?? 0,
    latestDrains: await presentDrainRows(tx, latest),
    drainsToday: todays?.drains ?? 0,
    litresToday: normalise(todays?.litres ?? '0'),
    pickups: waiting.map(({ pickup, hauler }) => ({
      id: pickup.id,
      number: pickup.number,
      stage: shownStage({
        stage: pickup.stage,
        returnDueOn: pickup.returnDueOn,
        hasReceived: pickup.receivedAt !== null,
        today,
      }),
      hauler,
      plannedOn: pickup.plannedOn,
    })),
    lastMachines: await lastMachinesOf(tx, context, siteId),
  }
}

/** The three machines this person drained last at the site. */
async function lastMachinesOf(
  tx: Transaction,
  context: ActContext,
  siteId: string,
): Promise<string[]> {
  const rows = await tx
    .select({ machineId: drains.machineId })
    .from(drains)
    .where(and(eq(drains.siteId, siteId), eq(drains.recordedBy, context.person.id)))
    .orderBy(desc(drains.recordedAt))
    .limit(30)
  return [...new Set(rows.flatMap(({ machineId }) => machineId ?? []))].slice(0, 3)
}
