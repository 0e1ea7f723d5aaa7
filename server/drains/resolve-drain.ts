import type { Transaction } from '@/db/client'
import {
  findFluid,
  findMachine,
  listBins,
  listContainersOfLegs,
  listStreams,
} from '@/db/queries/drains'
import type { SiteRow } from '@/db/queries/sites'
import type { DrainFacts } from '@/shared/contracts/drains'
import { absorbentStreamCode, filterStreamCode } from '@/shared/default-streams'
import { toLitres } from '@/shared/quantities/convert'
import { compare, isPositive, subtract, sum } from '@/shared/quantities/decimals'
import type { ActContext } from '../act-context'
import { fieldProblem } from '../problem'

/** A clock on a phone may be a little ahead. */
const futureAllowance = 5 * 60_000

export type ResolvedDrain = Awaited<ReturnType<typeof resolveDrain>>

/**
 * Looks up everything a drain names and turns what was typed into exact litres. Refuses only what cannot be a fact:
 * a time to come, parts that do not sum, records that are not this site's.
 * @throws Problem time-in-future, legs-do-not-sum, wrong-site, fields-refused (each naming the field)
 */
export async function resolveDrain(
  tx: Transaction,
  context: ActContext,
  site: SiteRow,
  facts: DrainFacts,
) {
  const occurredAt = new Date(facts.occurredAt)
  if (occurredAt.getTime() > context.clock().getTime() + futureAllowance) {
    throw fieldProblem(
      'time-in-future',
      'occurredAt',
      'in-future',
      'Time of the drain must be now or in the past',
    )
  }
  const found =
    facts.machine.kind === 'listed' ? await findMachine(tx, facts.machine.machineId) : undefined
  if (facts.machine.kind === 'listed' && found === undefined) throw unknown('machine.machineId')
  if (found !== undefined && found.machine.siteId !== site.id)
    throw wrongSite('machine.machineId', found.machine.code)
  const streams = await listStreams(tx)
  const stream = streams.find(({ id }) => id === facts.streamId)
  if (stream === undefined) throw unknown('streamId')
  if (stream.kind !== 'fluid')
    throw fieldProblem('fields-refused', 'streamId', 'not-a-fluid', 'Choose a stream of fluid')
  const fluidId = facts.fluidId ?? found?.fluid.id
  const fluid =
    fluidId === undefined
      ? undefined
      : found?.fluid.id === fluidId
        ? found.fluid
        : await findFluid(tx, fluidId)
  if (facts.fluidId !== undefined && fluid === undefined) throw unknown('fluidId')
  const litres = toLitres(facts.volume.value, facts.volume.unit)
  const wanted = [
    ...facts.legs.map(({ containerId }) => containerId),
    ...facts.filters.flatMap(({ containerId }) => containerId ?? []),
    ...(facts.absorbents?.containerId === undefined ? [] : [facts.absorbents.containerId]),
  ]
  const containers = await listContainersOfLegs(tx, [...new Set(wanted)])
  const containerAt = (id: string, field: string) => {
    const of = containers.find(({ container }) => container.id === id)
    if (of === undefined) throw unknown(field)
    if (of.container.siteId !== site.id) throw wrongSite(field, of.container.code)
    return of
  }
  const legs = splitExactly(facts, litres).map((leg, index) => ({
    ...leg,
    of: containerAt(leg.containerId, `legs.${index}.containerId`),
  }))
  const bins =
    facts.filters.length > 0 || facts.absorbents || facts.breatherCaps > 0
      ? await listBins(tx, site.id)
      : []
  const streamCalled = (code: string) =>
    streams.find((one) => one.code === code && one.kind === 'solid')
  const filterStream = streamCalled(filterStreamCode)
  const absorbentStream = streamCalled(absorbentStreamCode)
  const binOf = (streamId: string | undefined) => bins.find((bin) => bin.streamId === streamId)
  return {
    site,
    facts,
    occurredAt,
    machine: found?.machine,
    stream,
    fluid,
    litres,
    legs,
    filters: facts.filters.map((filters, index) => ({
      ...filters,
      container:
        filters.containerId === undefined
          ? binOf(filterStream?.id)
          : containerAt(filters.containerId, `filters.${index}.containerId`).container,
    })),
    filterStream,
    filterBin: binOf(filterStream?.id),
    absorbentStream,
    absorbentContainer:
      facts.absorbents?.containerId === undefined
        ? binOf(absorbentStream?.id)
        : containerAt(facts.absorbents.containerId, 'absorbents.containerId').container,
  }
}

/** Legs in exact litres: the one without a volume takes the exact remainder, so the parts are the whole. */
function splitExactly(facts: DrainFacts, litres: string) {
  const given = facts.legs.map((leg) =>
    leg.volume === undefined ? undefined : toLitres(leg.volume.value, leg.volume.unit),
  )
  const parts = sum(given.filter((part) => part !== undefined))
  const open = given.filter((part) => part === undefined).length
  const remainder = subtract(litres, parts)
  const doNotSum = (path: string) =>
    fieldProblem(
      'legs-do-not-sum',
      path,
      'do-not-sum',
      'The parts must sum to the volume drained',
      { parts, whole: litres },
    )
  if (open > 1) throw doNotSum('legs')
  if (open === 1 && !isPositive(remainder)) throw doNotSum('legs')
  if (open === 0 && compare(remainder, '0') !== 0)
    throw doNotSum(`legs.${facts.legs.length - 1}.volume.value`)
  return facts.legs.map((leg, index) => ({ ...leg, litres: given[index] ?? remainder }))
}

function unknown(path: string) {
  return fieldProblem('fields-refused', path, 'unknown', 'There is no such record')
}

function wrongSite(path: string, name: string) {
  return fieldProblem('wrong-site', path, 'wrong-site', 'That belongs to another site', { name })
}
