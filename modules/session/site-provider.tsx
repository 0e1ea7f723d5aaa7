import { createContext, use, useCallback, useMemo, useState, type ReactNode } from 'react'
import type { Site } from '@/shared/contracts/set-up'
import { useCatalogue } from './use-catalogue'
import { useSession } from './use-session'

type SiteValue = {
  /** The site whose yard is on screen; undefined while loading or when the person has none. */
  site: Site | undefined
  /** Sites the person may see, retired ones left out. */
  sites: Site[]
  chooseSite: (siteId: string) => void
  isLoading: boolean
}

const SiteContext = createContext<SiteValue | undefined>(undefined)

/** The site choice of this person on this phone. */
export function SiteProvider({ children }: { children: ReactNode }) {
  const { person, can } = useSession()
  const { catalogue, isLoading } = useCatalogue()
  const storageKey = `ebbmark.site.${person.id}`
  const [chosenId, setChosenId] = useState(() => localStorage.getItem(storageKey))

  const chooseSite = useCallback(
    (siteId: string) => {
      localStorage.setItem(storageKey, siteId)
      setChosenId(siteId)
    },
    [storageKey],
  )

  const value = useMemo(() => {
    const sites = (catalogue?.sites ?? []).filter(
      (site) => site.retiredAt === null && can('read-containers', { siteId: site.id }),
    )
    const site = sites.find(({ id }) => id === chosenId) ?? sites[0]
    return { site, sites, chooseSite, isLoading }
  }, [catalogue, can, chosenId, chooseSite, isLoading])
  return <SiteContext value={value}>{children}</SiteContext>
}

export function useSite(): SiteValue {
  const value = use(SiteContext)
  if (value === undefined) throw new Error('SiteProvider is missing')
  return value
}
