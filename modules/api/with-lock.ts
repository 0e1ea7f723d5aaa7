/** Chains of work per name, for places without the Web Locks API: one tab only. */
const chains = new Map<string, Promise<unknown>>()

/** Runs the work while no other tab of this browser holds the lock of that name. */
export function withLock<T>(name: string, work: () => Promise<T>): Promise<T> {
  if (typeof navigator !== 'undefined' && 'locks' in navigator) {
    return navigator.locks.request(name, work) as Promise<T>
  }
  const before = chains.get(name) ?? Promise.resolve()
  const mine = before.then(work, work)
  chains.set(
    name,
    mine.catch(() => undefined),
  )
  return mine
}
