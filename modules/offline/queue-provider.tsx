import {
  createContext,
  use,
  useEffect,
  useRef,
  useState,
  useSyncExternalStore,
  type ReactNode,
} from 'react'
import { recordDrain } from '@/shared/contracts/drains'
import { call } from '../api/call'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'
import { createQueue, type Queue } from './queue'
import { queueStore } from './queue-store'
import { isUnsent, type QueuedRecord } from './queued-record'

const QueueContext = createContext<Queue | undefined>(undefined)

/** While the page is visible the queue is tried this often; when it is hidden nobody waits for it. */
const everyMs = 60_000

/** The queue of this person, sent on open, on focus, when signal is back and every minute while visible. */
export function QueueProvider({ personId, children }: { personId: string; children: ReactNode }) {
  const [queue] = useState(() =>
    createQueue({
      personId,
      store: queueStore,
      send: (body) => call(recordDrain, { body }),
      now: () => new Date(),
      random: Math.random,
    }),
  )

  useEffect(() => {
    const send = () => void queue.flush().catch(() => undefined)
    const sendAll = () => void queue.flush({ all: true }).catch(() => undefined)
    const sendWhenSeen = () => {
      if (document.visibilityState === 'visible') send()
    }
    void queue
      .open()
      .then(send)
      .catch(() => undefined)
    // Asks the browser not to clear the phone's store when space runs low; it may refuse, nothing hangs on it.
    if ('storage' in navigator) void navigator.storage.persist?.().catch(() => false)
    const timer = setInterval(sendWhenSeen, everyMs)
    window.addEventListener('online', sendAll)
    window.addEventListener('focus', send)
    document.addEventListener('visibilitychange', sendWhenSeen)
    return () => {
      clearInterval(timer)
      window.removeEventListener('online', sendAll)
      window.removeEventListener('focus', send)
      document.removeEventListener('visibilitychange', sendWhenSeen)
    }
  }, [queue])

  return (
    <QueueContext value={queue}>
      <RefreshWhenAccepted />
      {children}
    </QueueContext>
  )
}

export function useQueue(): Queue {
  const queue = use(QueueContext)
  if (queue === undefined) throw new Error('QueueProvider is missing')
  return queue
}

/** All records of the person on this phone, oldest first; accepted ones for a day. */
export function useQueuedRecords(): QueuedRecord[] {
  const queue = useQueue()
  return useSyncExternalStore(queue.subscribe, queue.records)
}

export function useUnsentCount(): number {
  return useQueuedRecords().filter(isUnsent).length
}

/** The server's answer carries the new levels: what shows them is fetched again, no row is guessed. */
function RefreshWhenAccepted() {
  const accepted = useQueuedRecords().filter((record) => !isUnsent(record)).length
  const refreshWhatChanged = useRefreshWhatChanged()
  const seen = useRef<number>(undefined)
  useEffect(() => {
    if (seen.current !== undefined && accepted > seen.current) {
      void refreshWhatChanged(whatPouringChanges)
    }
    seen.current = accepted
  }, [accepted, refreshWhatChanged])
  return null
}
