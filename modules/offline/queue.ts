import type { Drain } from '@/shared/contracts/drains'
import type { ProblemCode } from '@/shared/problems'
import { OfflineError, ProblemError } from '../api/problem-error'
import { withLock } from '../api/with-lock'
import type { QueueStore } from './queue-store'
import { isUnsent, type QueuedRecord, type RecordedDrain } from './queued-record'

export type QueueParts = {
  personId: string
  store: QueueStore
  send: (body: RecordedDrain) => Promise<Drain>
  now: () => Date
  /** 0 to 1: spreads the retries of many phones that find signal at once. */
  random: () => number
}

export type Queue = ReturnType<typeof createQueue>

type NewRecord = Pick<QueuedRecord, 'body' | 'machineName' | 'containerCodes'>

const dayMs = 24 * 3_600_000
const firstWaitMs = 5_000
const longestWaitMs = 5 * 60_000

/** Refusals that say nothing about the record: it is sent again later. */
const passing: readonly ProblemCode[] = ['internal', 'too-many-requests', 'sign-in-required']

/**
 * The person's unsent records. A record is on the phone before anything is sent; sending is repeated with the same id
 * until the server has answered; an answer, good or bad, is kept with its record. One tab sends at a time.
 */
export function createQueue({ personId, store, send, now, random }: QueueParts) {
  const lock = `ebbmark-queue-${personId}`
  const listeners = new Set<() => void>()
  let records: QueuedRecord[] = []
  const channel =
    typeof BroadcastChannel === 'undefined' ? undefined : new BroadcastChannel('ebbmark-queue')
  if (channel !== undefined) channel.onmessage = () => void reload()

  async function reload(): Promise<void> {
    const found = await store.list(personId)
    records = found.sort((a, b) => a.savedAt.localeCompare(b.savedAt))
    for (const listener of listeners) listener()
  }

  async function keep(record: QueuedRecord): Promise<QueuedRecord> {
    await store.put(record)
    await reload()
    channel?.postMessage('changed')
    return record
  }

  /** Puts a record on the phone; one that was refused or is still waiting is replaced under its id. */
  async function add(given: NewRecord): Promise<QueuedRecord> {
    return keep({
      ...given,
      id: given.body.id,
      personId,
      state: 'queued',
      savedAt: now().toISOString(),
      tries: 0,
      nextTryAt: null,
      lastTriedAt: null,
      number: null,
      acceptedAt: null,
      refusal: null,
    })
  }

  /** Sends what is due; with `all`, also what waits for its next try. Never throws: every answer is in the records. */
  async function flush(options: { all?: boolean } = {}): Promise<void> {
    await withLock(lock, async () => {
      const waiting = (await store.list(personId))
        // One found as `sending` was cut off by a closed tab: the lock says that nobody sends it now.
        .filter(({ state }) => state === 'queued' || state === 'sending')
        .sort((a, b) => a.savedAt.localeCompare(b.savedAt))
      for (const record of waiting) {
        const isDue = record.nextTryAt === null || new Date(record.nextTryAt) <= now()
        if (!options.all && !isDue) continue
        const hasAnswer = await sendOne(record)
        // Without signal the rest would only wait for the same silence.
        if (!hasAnswer) break
      }
    })
  }

  async function sendOne(record: QueuedRecord): Promise<boolean> {
    const tried = { ...record, lastTriedAt: now().toISOString(), tries: record.tries + 1 }
    await keep({ ...tried, state: 'sending' })
    try {
      const drain = await send(record.body)
      await keep({
        ...tried,
        state: drain.needsLook ? 'question' : 'accepted',
        number: drain.number,
        acceptedAt: now().toISOString(),
        refusal: null,
      })
      return true
    } catch (error) {
      if (error instanceof ProblemError && !passing.includes(error.code)) {
        await keep({ ...tried, state: 'refused', refusal: error.document })
        return true
      }
      await keep({ ...tried, state: 'queued', nextTryAt: nextTry(tried.tries) })
      return !(error instanceof OfflineError)
    }
  }

  /** Doubles with every try, up to five minutes, give or take half. */
  function nextTry(tries: number): string {
    const wait = Math.min(longestWaitMs, firstWaitMs * 2 ** Math.min(tries - 1, 10))
    return new Date(now().getTime() + wait * (0.5 + random())).toISOString()
  }

  /**
   * Takes a record off the phone unless the server has it.
   * @returns the record as it stands when it was accepted meanwhile; undefined when it is gone
   */
  async function remove(id: string): Promise<QueuedRecord | undefined> {
    return withLock(lock, async () => {
      const record = await store.get(id)
      if (record !== undefined && !isUnsent(record)) return record
      await store.remove(id)
      await reload()
      channel?.postMessage('changed')
      return undefined
    })
  }

  /** Takes an accepted record off the list: it was undone in the book. */
  async function forget(id: string): Promise<void> {
    await store.remove(id)
    await reload()
    channel?.postMessage('changed')
  }

  /** Accepted records are shown for a day, then only the book has them. */
  async function open(): Promise<void> {
    for (const record of await store.list(personId)) {
      const acceptedMs = record.acceptedAt === null ? undefined : Date.parse(record.acceptedAt)
      if (acceptedMs !== undefined && now().getTime() - acceptedMs > dayMs) {
        await store.remove(record.id)
      }
    }
    await reload()
  }

  return {
    open,
    add,
    flush,
    remove,
    forget,
    /** Newest state of all records, oldest first; a new array after every change. */
    records: () => records,
    subscribe: (listener: () => void) => {
      listeners.add(listener)
      return () => {
        listeners.delete(listener)
      }
    },
    close: () => channel?.close(),
  }
}
