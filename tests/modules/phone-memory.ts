import type { QueuedRecord } from '@/modules/offline/queued-record'

/** The phone's store for a test: what a browser keeps in IndexedDB. */
function phoneMemory() {
  const records = new Map<string, QueuedRecord>()
  const drafts = new Map<string, unknown>()
  return {
    records,
    drafts,
    module: {
      queueStore: {
        list: async () => [...records.values()],
        get: async (id: string) => records.get(id),
        put: async (record: QueuedRecord) => void records.set(record.id, record),
        remove: async (id: string) => void records.delete(id),
      },
      phoneStore: async () => ({
        get: async (_store: string, key: string) => drafts.get(key),
        put: async (_store: string, value: { key: string }) => void drafts.set(value.key, value),
        delete: async (_store: string, key: string) => void drafts.delete(key),
      }),
    },
  }
}

export const phone = phoneMemory()

// What the offline module's store is replaced by: `jest.mock('@/modules/offline/queue-store', ...)`.
export const { queueStore, phoneStore } = phone.module
