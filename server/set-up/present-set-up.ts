import type { z } from 'zod'
import type {
  containers,
  fluids,
  machines,
  parties,
  permits,
  sites,
  streams,
} from '@/db/schema/sites'
import type * as contracts from '@/shared/contracts/set-up'
import { normalise } from '@/shared/quantities/decimals'

type Input<S extends z.ZodType> = z.input<S>

function retired(row: { retiredAt: Date | null }): string | null {
  return row.retiredAt?.toISOString() ?? null
}

export function presentSite(row: typeof sites.$inferSelect): Input<typeof contracts.site> {
  return { ...row, retiredAt: retired(row) } as Input<typeof contracts.site>
}

export function presentStream(row: typeof streams.$inferSelect): Input<typeof contracts.stream> {
  const density =
    row.density === null || row.densityBasis === null
      ? null
      : { kilogramsPerLitre: normalise(row.density), basis: row.densityBasis }
  return { ...row, density, retiredAt: retired(row) }
}

export function presentFluid(row: typeof fluids.$inferSelect): Input<typeof contracts.fluid> {
  return { ...row, retiredAt: retired(row) }
}

export function presentMachine(
  row: typeof machines.$inferSelect,
  fluid: { name: string; streamId: string },
): Input<typeof contracts.machine> {
  return {
    ...row,
    reservoir: quantityOf(row.reservoirValue, row.reservoirUnit),
    system: quantityOf(row.systemValue, row.systemUnit),
    fluidName: fluid.name,
    streamId: fluid.streamId,
    retiredAt: retired(row),
  } as Input<typeof contracts.machine>
}

export function presentContainerRecord(
  row: typeof containers.$inferSelect,
): Input<typeof contracts.containerRecord> {
  return {
    ...row,
    capacity: quantityOf(row.capacityValue, row.capacityUnit),
    capacityLitres: normalise(row.capacityLitres),
    fillLineLitres: normalise(row.fillLineLitres),
    tareKilograms: row.tareKilograms === null ? null : normalise(row.tareKilograms),
    retiredAt: retired(row),
  } as Input<typeof contracts.containerRecord>
}

export function presentParty(
  row: typeof parties.$inferSelect,
  permitRows: (typeof permits.$inferSelect)[],
): Input<typeof contracts.party> {
  const own = permitRows.filter(({ partyId }) => partyId === row.id)
  return {
    ...row,
    permits: own.map((permit) => ({ ...permit, retiredAt: retired(permit) })),
    retiredAt: retired(row),
  }
}

function quantityOf(
  value: string | null,
  unit: string | null,
): { value: string; unit: string } | null {
  return value === null || unit === null ? null : { value, unit }
}
