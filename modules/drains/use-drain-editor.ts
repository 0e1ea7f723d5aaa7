import { useState } from 'react'
import { useWatch, type UseFormReturn } from 'react-hook-form'
import type { Container } from '@/shared/contracts/containers'
import type { Site } from '@/shared/contracts/set-up'
import { isNegative, isPositive, subtract } from '@/shared/quantities/decimals'
import type { VolumeUnit } from '@/shared/quantities/units'
import { bestContainer } from './best-container'
import { fillingShare, litresOf, readVolume, shareLegs } from './drain-legs'
import { unitsOffered } from './drain-preferences'
import type { DrainMachine, DrainValues } from './drain-values'
import type { DrainChoices } from './use-drain-choices'

/** Which list is open to choose from: the machine, or the container of a leg. */
export type Picking = { what: 'machine' } | { what: 'container'; leg: number } | undefined

/** A guess for choosing the container before a volume is typed, where the machine's reservoir is not known. */
const usualLitres = '20'

/** What a person can do to the drain form, and what follows from each: defaults fill gaps, never a volume. */
export function useDrainEditor(
  form: UseFormReturn<DrainValues>,
  site: Site,
  choices: DrainChoices,
) {
  const values = useWatch({ control: form.control }) as DrainValues
  const [picking, setPicking] = useState<Picking>()
  const [unitSaid, setUnitSaid] = useState<VolumeUnit>()
  const drainLitres = litresOf(values.typed, values.unit) ?? '0'
  const shares = shareLegs(values.legs, drainLitres, values.unit)
  const chosen = values.machine
  const machine =
    chosen?.kind === 'listed'
      ? choices.machines.find(({ id }) => id === chosen.machineId)
      : undefined
  const containerOf = (leg: number): Container | undefined =>
    choices.containers.find(({ id }) => id === values.legs[leg]?.containerId)

  /** What leg `leg` takes, for choosing its container and for its picture. */
  function litresOfLeg(leg: number): string {
    const litres = shares[leg]?.litres
    return litres === undefined || isNegative(litres) ? '0' : litres
  }

  const dirty = { shouldDirty: true } as const

  function chooseMachine(next: NonNullable<DrainMachine>) {
    form.setValue('machine', next, dirty)
    form.clearErrors('machine')
    setPicking(undefined)
    const listed =
      next.kind === 'listed' ? choices.machines.find(({ id }) => id === next.machineId) : undefined
    if (listed === undefined) return
    form.setValue('fluidId', listed.fluidId, dirty)
    form.setValue('streamId', listed.streamId, dirty)
    form.clearErrors('streamId')
    const now = containerOf(0)
    const isKept = now !== undefined && now.streamId === listed.streamId && now.hold === null
    if (isKept || values.legs.length > 1) return
    const litres = isPositive(drainLitres) ? drainLitres : (listed.reservoirLitres ?? usualLitres)
    const best = bestContainer(choices.containers, { streamId: listed.streamId, litres })
    if (best !== undefined) form.setValue('legs', [{ containerId: best.id, typed: '' }], dirty)
  }

  function chooseContainer(leg: number, container: Container) {
    form.setValue(`legs.${leg}.containerId`, container.id, dirty)
    form.clearErrors('legs')
    if (values.streamId === '') form.setValue('streamId', container.streamId, dirty)
    setPicking(undefined)
  }

  /** The first container is filled to its line, the rest goes into the next best one. */
  function split() {
    const [first = { containerId: '', typed: '' }, ...rest] = values.legs
    const container = containerOf(0)
    const share =
      container === undefined ? '' : fillingShare(container.roomLitres, drainLitres, values.unit)
    const left = subtract(drainLitres, litresOf(share, values.unit) ?? '0')
    const taken = values.legs.map(({ containerId }) => containerId)
    const best = bestContainer(
      choices.containers.filter(({ id }) => !taken.includes(id)),
      { streamId: values.streamId, litres: left },
    )
    const legs =
      rest.length === 0
        ? [
            { ...first, typed: share },
            { containerId: best?.id ?? '', typed: '' },
          ]
        : [...values.legs, { containerId: best?.id ?? '', typed: '' }]
    form.setValue('legs', legs, dirty)
  }

  function removeLeg(leg: number) {
    const legs = values.legs.filter((_leg, position) => position !== leg)
    // The last one takes the rest: what stood typed in it before no longer says anything.
    const last = legs.length - 1
    form.setValue(
      'legs',
      legs.map((kept, position) => (position === last ? { ...kept, typed: '' } : kept)),
      dirty,
    )
  }

  function type(typed: string) {
    form.setValue('typed', typed, dirty)
    form.clearErrors('typed')
    if (typed === '') setUnitSaid(undefined)
  }

  function unitTyped(unit: VolumeUnit) {
    form.setValue('unit', unit, dirty)
    setUnitSaid(unit)
  }

  /** The unit button: what was typed stays the same figure, in the next unit; a typed unit is taken off it. */
  function nextUnit() {
    const offered = unitsOffered(site)
    const next = offered[(offered.indexOf(values.unit) + 1) % offered.length] ?? site.volumeUnit
    const read = readVolume(values.typed, values.unit)
    if (read.ok && read.unitWasTyped) form.setValue('typed', read.value, dirty)
    form.setValue('unit', next, dirty)
    setUnitSaid(undefined)
  }

  return {
    values,
    machine,
    containerOf,
    drainLitres,
    shares,
    litresOfLeg,
    picking,
    pick: setPicking,
    unitSaid,
    chooseMachine,
    chooseContainer,
    split,
    removeLeg,
    type,
    unitTyped,
    nextUnit,
    setVolume: (typed: string, unit: VolumeUnit) => {
      form.setValue('typed', typed, dirty)
      form.setValue('unit', unit, dirty)
    },
  }
}
