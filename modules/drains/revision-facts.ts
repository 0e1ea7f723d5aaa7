import type { TFunction } from 'i18next'
import type { Drain } from '@/shared/contracts/drains'
import type { Catalogue } from '@/shared/contracts/set-up'
import { formatTyped } from '@/shared/quantities/format'
import { momentAt } from './drain-facts-card'
import type { FactsInput } from './drain-values'
import { machineName } from './machine-name'

/** Where names of ids come from: the catalogue, and the containers' codes. */
export type Names = {
  catalogue: Catalogue | undefined
  containerCode: (id: string) => string
  timeZone: string
}

export type NamedValue = { name: string; value: string }

/** A drain's facts in words, in the order they are read. */
export function factsInWords(
  t: TFunction,
  facts: FactsInput,
  { catalogue, containerCode, timeZone }: Names,
): NamedValue[] {
  const none = t('drains.detail.none')
  const nameIn = (rows: readonly { id: string; name: string }[] | undefined, id?: string) =>
    rows?.find((row) => row.id === id)?.name ?? none
  const chosen = facts.machine
  const machine =
    chosen.kind === 'listed'
      ? catalogue?.machines.find(({ id }) => id === chosen.machineId)
      : undefined
  const filters = facts.filters ?? []
  return [
    {
      name: t('drains.detail.machine'),
      value:
        chosen.kind === 'unlisted'
          ? chosen.description
          : machine === undefined
            ? none
            : machineName(machine),
    },
    {
      name: t('drains.detail.volume'),
      value: formatTyped(facts.volume.value, facts.volume.unit),
    },
    {
      name: t('drains.detail.legs'),
      value: facts.legs
        .map(({ containerId, volume }) =>
          [
            containerCode(containerId),
            volume === undefined ? '' : formatTyped(volume.value, volume.unit),
          ]
            .filter(Boolean)
            .join(' '),
        )
        .join(', '),
    },
    { name: t('drains.detail.when'), value: momentAt(facts.occurredAt, timeZone) },
    { name: t('drains.detail.stream'), value: nameIn(catalogue?.streams, facts.streamId) },
    { name: t('drains.detail.fluid'), value: nameIn(catalogue?.fluids, facts.fluidId) },
    { name: t('drains.detail.method'), value: t(`drains.methods.${facts.method}`) },
    {
      name: t('drains.detail.filters'),
      value:
        filters
          .map(({ count, size, state }) =>
            t('drains.detail.filterLine', {
              count,
              size: t(`drains.form.filterSizes.${size}`),
              state: t(`drains.form.filterStates.${state}`),
            }),
          )
          .join('; ') || none,
    },
    {
      name: t('drains.detail.absorbents'),
      value:
        facts.absorbents === undefined
          ? none
          : formatTyped(facts.absorbents.mass.value, facts.absorbents.mass.unit),
    },
    { name: t('drains.detail.breatherCaps'), value: String(facts.breatherCaps ?? 0) },
    {
      name: t('drains.detail.refill'),
      value:
        facts.refill === undefined
          ? none
          : formatTyped(facts.refill.volume.value, facts.refill.volume.unit),
    },
    { name: t('drains.detail.note'), value: facts.note || none },
  ]
}

/** Codes of containers that this drain names, now or in an earlier revision; others come from the list. */
export function codesOf(
  drain: Pick<Drain, 'legs'>,
  containers: readonly { id: string; code: string }[],
): (id: string) => string {
  const codes = new Map(containers.map(({ id, code }) => [id, code]))
  for (const { containerId, containerCode } of drain.legs) codes.set(containerId, containerCode)
  return (id) => codes.get(id) ?? '–'
}
