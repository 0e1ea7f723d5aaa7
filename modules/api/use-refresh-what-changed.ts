import { useCallback } from 'react'
import { useSWRConfig } from 'swr'
import { isReplyOf } from './keys'

/**
 * After an act: `await refreshWhatChanged(['readYard', 'listDrains'])` fetches again what is on screen of these
 * contracts and lets the rest be fetched when it is next shown.
 */
export function useRefreshWhatChanged(): (names: readonly string[]) => Promise<void> {
  const { mutate } = useSWRConfig()
  return useCallback(
    async (names) => {
      // A refresh that finds no signal is no failure of the act before it.
      await mutate(isReplyOf(names)).catch(() => undefined)
    },
    [mutate],
  )
}

/** What shows quantities in containers, and so changes with every act that pours. */
export const whatPouringChanges = [
  'readYard',
  'listDrains',
  'readDrain',
  'listMarks',
  'listContainers',
  'readContainer',
  'listFlags',
  'listRules',
] as const
