import type { z } from 'zod'
import { type filterSizes, type drainFacts, type filterStates } from '@/shared/contracts/drains'
import type { MeasuringMethod } from '@/shared/quantities/methods'
import type { MassUnit, VolumeUnit } from '@/shared/quantities/units'
import { localDay, localTime } from '@/shared/calendar'

export type FactsInput = z.input<typeof drainFacts>
export type FilterSize = (typeof filterSizes)[number]
export type FilterState = (typeof filterStates)[number]

export type DrainMachine =
  { kind: 'listed'; machineId: string } | { kind: 'unlisted'; description: string } | null

export type DrainTime =
  | { kind: 'now' }
  | { kind: 'ago'; minutes: 15 | 60 }
  /** Wall clock of the site, YYYY-MM-DDTHH:mm. */
  | { kind: 'at'; local: string }

/** One container; the last leg takes the exact remainder, so nothing is typed for it. */
export type LegValues = { containerId: string; typed: string }

/** The drain form as a person fills it: text stays text until it is saved. */
export type DrainValues = {
  machine: DrainMachine
  streamId: string
  fluidId: string
  /** The volume as typed; may carry its own unit: `70 l`. */
  typed: string
  unit: VolumeUnit
  legs: LegValues[]
  method: MeasuringMethod
  /** '' is the method's own. */
  spreadPercent: string
  filterCounts: Record<FilterSize, number>
  filterState: FilterState
  absorbentsTyped: string
  massUnit: MassUnit
  breatherCaps: number
  refillTyped: string
  time: DrainTime
  note: string
}

export const noFilters: Record<FilterSize, number> = { small: 0, medium: 0, large: 0, element: 0 }

export function emptyDrain(defaults: {
  unit: VolumeUnit
  massUnit: MassUnit
  method: MeasuringMethod
}): DrainValues {
  return {
    machine: null,
    streamId: '',
    fluidId: '',
    typed: '',
    legs: [{ containerId: '', typed: '' }],
    spreadPercent: '',
    filterCounts: noFilters,
    filterState: 'draining',
    absorbentsTyped: '',
    breatherCaps: 0,
    refillTyped: '',
    time: { kind: 'now' },
    note: '',
    ...defaults,
  }
}

/** The form filled from recorded facts: for an amendment, or for a refused record that is mended. */
export function valuesOfFacts(
  facts: FactsInput,
  timeZone: string,
  massUnit: MassUnit,
): DrainValues {
  const { volume } = facts
  const filters = facts.filters ?? []
  return {
    machine: facts.machine,
    streamId: facts.streamId,
    fluidId: facts.fluidId ?? '',
    typed: volume.value,
    unit: volume.unit,
    legs: facts.legs.map(({ containerId, volume: leg }, position) => ({
      containerId,
      typed:
        leg === undefined || position === facts.legs.length - 1 ? '' : typedOf(leg, volume.unit),
    })),
    method: facts.method,
    spreadPercent: facts.spreadPercent ?? '',
    filterCounts: filters.reduce(
      (counts, { size, count }) => ({ ...counts, [size]: counts[size] + count }),
      noFilters,
    ),
    filterState: filters[0]?.state ?? 'draining',
    absorbentsTyped: facts.absorbents === undefined ? '' : facts.absorbents.mass.value,
    massUnit: facts.absorbents?.mass.unit ?? massUnit,
    breatherCaps: facts.breatherCaps ?? 0,
    refillTyped: facts.refill === undefined ? '' : typedOf(facts.refill.volume, volume.unit),
    time: {
      kind: 'at',
      local: `${localDay(facts.occurredAt, timeZone)}T${localTime(facts.occurredAt, timeZone)}`,
    },
    note: facts.note ?? '',
  }
}

/** A unit other than the form's is written beside the figure, in a way the parser reads back. */
function typedOf(volume: { value: string; unit: VolumeUnit }, formUnit: VolumeUnit): string {
  return volume.unit === formUnit ? volume.value : `${volume.value} ${typedUnit(volume.unit)}`
}

function typedUnit(unit: VolumeUnit): string {
  if (unit === 'gal_us') return 'us gal'
  if (unit === 'gal_imp') return 'imp gal'
  if (unit === 'quart_us') return 'qt'
  return unit === 'pint_us' ? 'pt' : unit
}
