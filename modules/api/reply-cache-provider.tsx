import { useEffect, useState, type ReactNode } from 'react'
import { SWRConfig } from 'swr'
import { loadReplies } from './kept-replies'
import { OfflineError } from './problem-error'
import { ReplyCache } from './reply-cache'

type Props = { personId: string; children: ReactNode }

/** Gives the screens below the cached replies of this person; shows nothing for the moment they take to load. */
export function ReplyCacheProvider({ personId, children }: Props) {
  const [cache, setCache] = useState<ReplyCache>()

  useEffect(() => {
    let isCurrent = true
    let made: ReplyCache | undefined
    loadReplies(personId)
      .catch(() => new Map())
      .then((kept) => {
        made = new ReplyCache(personId, kept)
        if (isCurrent) setCache(made)
      })
    return () => {
      isCurrent = false
      made?.close()
      setCache(undefined)
    }
  }, [personId])

  if (cache === undefined) return null
  return (
    <SWRConfig
      value={{
        provider: () => cache,
        dedupingInterval: 2_000,
        focusThrottleInterval: 10_000,
        // A refusal stays one; only silence is worth asking again.
        shouldRetryOnError: (error) => error instanceof OfflineError,
        errorRetryInterval: 15_000,
        errorRetryCount: 20,
      }}
    >
      {children}
    </SWRConfig>
  )
}
