import { useSyncExternalStore } from 'react'

/** Does the browser believe it has a network? True says little, false is sure. */
export function useOnline(): boolean {
  return useSyncExternalStore(
    (changed) => {
      window.addEventListener('online', changed)
      window.addEventListener('offline', changed)
      return () => {
        window.removeEventListener('online', changed)
        window.removeEventListener('offline', changed)
      }
    },
    () => navigator.onLine,
  )
}
