import { filterSizes } from '@/shared/contracts/drains'
import { isPositive } from '@/shared/quantities/decimals'
import { parseQuantity } from '@/shared/quantities/parse'
import { litresOf, readVolume, shareLegs } from './drain-legs'
import { instantOf, isWholeLocal } from './drain-time'
import type { DrainValues, FactsInput } from './drain-values'

/** A field that stops the save, with a code whose words are `drains.fields.<field>.<code>`. */
export type FieldRefusal = { path: string; code: string }

type Surroundings = { now: Date; timeZone: string; locale?: string }

export type FactsReading = { ok: true; facts: FactsInput } | { ok: false; fields: FieldRefusal[] }

/** Reads the form: the facts as the contract wants them, or every field that cannot be read yet, in form order. */
export function factsOfValues(values: DrainValues, around: Surroundings): FactsReading {
  const fields: FieldRefusal[] = []
  const refuse = (path: string, code: string) => fields.push({ path, code })
  const volume = readVolume(values.typed, values.unit, around.locale)

  if (values.machine === null) refuse('machine', 'required')
  else if (values.machine.kind === 'unlisted' && values.machine.description.trim() === '') {
    refuse('machine', 'description-required')
  }
  if (values.streamId === '') refuse('streamId', 'required')
  if (values.legs[0]?.containerId === '') refuse('legs', 'required')
  if (!volume.ok) refuse('typed', volume.code)
  else refuseLegs(values, around, refuse)
  if (values.time.kind === 'at' && !isWholeLocal(values.time.local)) refuse('time', 'required')
  const absorbents = optionalMass(values, around)
  if (absorbents !== undefined && !absorbents.ok) refuse('absorbentsTyped', absorbents.code)
  const refill =
    values.refillTyped.trim() === ''
      ? undefined
      : readVolume(values.refillTyped, values.unit, around.locale)
  if (refill !== undefined && !refill.ok) refuse('refillTyped', refill.code)
  if (values.spreadPercent !== '' && !/^\d{1,3}(\.\d{1,3})?$/.test(values.spreadPercent)) {
    refuse('spreadPercent', 'not-a-percentage')
  }
  if (fields.length > 0 || !volume.ok || values.machine === null) return { ok: false, fields }

  return {
    ok: true,
    facts: {
      machine: values.machine,
      streamId: values.streamId,
      ...(values.fluidId === '' ? {} : { fluidId: values.fluidId }),
      occurredAt: instantOf(values.time, around.now, around.timeZone).occurredAt,
      volume: { value: volume.value, unit: volumeUnitOf(volume.unit) },
      method: values.method,
      ...(values.spreadPercent === '' ? {} : { spreadPercent: values.spreadPercent }),
      legs: legsOf(values, around),
      filters: filterSizes.flatMap((size) => {
        const count = values.filterCounts[size]
        return count === 0 ? [] : [{ size, count, state: values.filterState }]
      }),
      ...(absorbents?.ok ? { absorbents: { mass: massOf(absorbents) } } : {}),
      breatherCaps: values.breatherCaps,
      ...(refill?.ok
        ? { refill: { volume: { value: refill.value, unit: volumeUnitOf(refill.unit) } } }
        : {}),
      note: values.note,
    },
  }
}

function refuseLegs(
  values: DrainValues,
  around: Surroundings,
  refuse: (path: string, code: string) => void,
): void {
  const drainLitres = litresOf(values.typed, values.unit, around.locale) ?? '0'
  const shares = shareLegs(values.legs, drainLitres, values.unit, around.locale)
  values.legs.forEach((leg, position) => {
    const isLast = position === values.legs.length - 1
    if (position > 0 && leg.containerId === '') refuse(`legs.${position}.containerId`, 'required')
    const read = readVolume(leg.typed, values.unit, around.locale)
    if (!isLast && !read.ok) refuse(`legs.${position}.typed`, read.code)
  })
  const remainder = shares.at(-1)?.litres
  if (values.legs.length > 1 && remainder !== undefined && !isPositive(remainder)) {
    refuse(`legs.${values.legs.length - 1}.typed`, 'nothing-left')
  }
}

/** Every leg but the last says its volume; the last takes the exact remainder on the server as well. */
function legsOf(values: DrainValues, around: Surroundings): FactsInput['legs'] {
  return values.legs.map((leg, position) => {
    const read = readVolume(leg.typed, values.unit, around.locale)
    const isLast = position === values.legs.length - 1
    if (isLast || !read.ok) return { containerId: leg.containerId }
    return {
      containerId: leg.containerId,
      volume: { value: read.value, unit: volumeUnitOf(read.unit) },
    }
  })
}

function optionalMass(values: DrainValues, { locale }: Surroundings) {
  if (values.absorbentsTyped.trim() === '') return undefined
  return parseQuantity(values.absorbentsTyped, {
    defaultUnit: values.massUnit,
    measure: 'mass',
    locale,
    maxDecimals: 3,
  })
}

type VolumeUnitOfFacts = FactsInput['volume']['unit']
type MassOfFacts = NonNullable<FactsInput['absorbents']>['mass']

/** The parser was asked for a volume (a mass), so its unit is one; the types say so here. */
function volumeUnitOf(unit: string): VolumeUnitOfFacts {
  return unit as VolumeUnitOfFacts
}

function massOf(read: { value: string; unit: string }): MassOfFacts {
  return { value: read.value, unit: read.unit as MassOfFacts['unit'] }
}
