import { openDB, type DBSchema, type IDBPDatabase } from 'idb'
import type { QueuedRecord } from './queued-record'

/** Where records wait. Kept apart from the queue so that it can be tried without a browser. */
export type QueueStore = {
  list: (personId: string) => Promise<QueuedRecord[]>
  get: (id: string) => Promise<QueuedRecord | undefined>
  put: (record: QueuedRecord) => Promise<void>
  remove: (id: string) => Promise<void>
}

export type KeptDraft = { key: string; keptAt: number; value: unknown }

interface PhoneStore extends DBSchema {
  records: { key: string; value: QueuedRecord; indexes: { byPerson: string } }
  drafts: { key: string; value: KeptDraft }
}

let opened: Promise<IDBPDatabase<PhoneStore>> | undefined

/** The phone's own database of what was not sent; it is never cleared by the product. */
export function phoneStore(): Promise<IDBPDatabase<PhoneStore>> {
  opened ??= openDB<PhoneStore>('ebbmark-unsent', 1, {
    upgrade: (db) => {
      db.createObjectStore('records', { keyPath: 'id' }).createIndex('byPerson', 'personId')
      db.createObjectStore('drafts', { keyPath: 'key' })
    },
    terminated: () => {
      opened = undefined
    },
  }).catch((error: unknown) => {
    opened = undefined
    throw error
  })
  return opened
}

export const queueStore: QueueStore = {
  list: async (personId) => (await phoneStore()).getAllFromIndex('records', 'byPerson', personId),
  get: async (id) => (await phoneStore()).get('records', id),
  put: async (record) => {
    // Strict: the browser answers when the record is on the disk, not when it is about to be.
    const tx = (await phoneStore()).transaction('records', 'readwrite', { durability: 'strict' })
    await tx.store.put(record)
    await tx.done
  },
  remove: async (id) => (await phoneStore()).delete('records', id),
}
