import { openDB, type DBSchema, type IDBPDatabase } from 'idb'
import type { State } from 'swr'

/** Replies kept on the phone so that screens work without signal; one person's never mix with another's. */
interface KeptReplies extends DBSchema {
  replies: { key: string; value: { state: State; keptAt: number } }
}

/** Older than this nobody wants to read as today's yard. */
const keptForMs = 14 * 24 * 3_600_000

let opened: Promise<IDBPDatabase<KeptReplies> | undefined> | undefined

function database(): Promise<IDBPDatabase<KeptReplies> | undefined> {
  if (typeof indexedDB === 'undefined') return Promise.resolve(undefined)
  opened ??= openDB<KeptReplies>('ebbmark-replies', 1, {
    upgrade: (db) => {
      db.createObjectStore('replies')
    },
    // A browser that refuses storage (private window) still works with signal.
  }).catch(() => undefined)
  return opened
}

function rangeOf(personId: string): IDBKeyRange {
  return IDBKeyRange.bound(`${personId} `, `${personId} \uffff`)
}

export async function loadReplies(personId: string): Promise<Map<string, State>> {
  const db = await database()
  const found = new Map<string, State>()
  if (db === undefined) return found
  const oldest = Date.now() - keptForMs
  const tx = db.transaction('replies', 'readwrite')
  for (
    let cursor = await tx.store.openCursor(rangeOf(personId));
    cursor !== null;
    cursor = await cursor.continue()
  ) {
    if (cursor.value.keptAt < oldest) await cursor.delete()
    else found.set(String(cursor.key).slice(personId.length + 1), cursor.value.state)
  }
  await tx.done
  return found
}

export async function keepReplies(personId: string, states: Map<string, State>): Promise<void> {
  const db = await database()
  if (db === undefined) return
  const tx = db.transaction('replies', 'readwrite')
  for (const [key, state] of states) {
    await tx.store.put({ state, keptAt: Date.now() }, `${personId} ${key}`)
  }
  await tx.done
}

/** At sign-out: nothing read by this person stays on the phone. */
export async function forgetReplies(personId: string): Promise<void> {
  const db = await database()
  await db?.delete('replies', rangeOf(personId))
}
