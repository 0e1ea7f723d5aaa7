import { useMemo } from 'react'
import { listContainers, readYard, type Container } from '@/shared/contracts/containers'
import type { DrainRow } from '@/shared/contracts/drains'
import type { Catalogue, Machine, Site, Stream } from '@/shared/contracts/set-up'
import { useContract } from '../api/use-contract'
import { useCatalogue } from '../session/use-catalogue'
import { useSession } from '../session/use-session'

export type DrainChoices = {
  catalogue: Catalogue
  machines: Machine[]
  /** Ids of the machines drained last at this site, newest first. */
  lastMachines: readonly string[]
  streams: Stream[]
  containers: readonly Container[]
  latestDrains: readonly DrainRow[]
}

/** What the drain form chooses from at this site, from the cache when there is no signal; undefined until known. */
export function useDrainChoices(site: Site | undefined): {
  choices: DrainChoices | undefined
  isLoading: boolean
  error: Error | undefined
} {
  const { can } = useSession()
  const query = site === undefined ? null : { query: { siteId: site.id } }
  const catalogue = useCatalogue()
  const containers = useContract(listContainers, query)
  const yard = useContract(readYard, can('read-yard') ? query : null)
  const choices = useMemo(() => {
    if (site === undefined || catalogue.data === undefined || containers.data === undefined) {
      return undefined
    }
    return {
      catalogue: catalogue.data,
      machines: catalogue.data.machines.filter(
        (machine) => machine.siteId === site.id && machine.retiredAt === null,
      ),
      lastMachines: yard.data?.lastMachines ?? [],
      streams: catalogue.data.streams.filter(
        ({ kind, retiredAt }) => kind === 'fluid' && !retiredAt,
      ),
      containers: containers.data.rows,
      latestDrains: yard.data?.latestDrains ?? [],
    }
  }, [site, catalogue.data, containers.data, yard.data])
  return {
    choices,
    isLoading: choices === undefined && (catalogue.isLoading || containers.isLoading),
    error: catalogue.error ?? containers.error,
  }
}
