import type { Source } from './read-sources'

/** Loops of imports that bring values, each written once as `a -> b -> a`. */
export function findCycles(sources: readonly Source[]): string[] {
  const next = new Map(
    sources.map(({ path, imports }) => [
      path,
      imports
        .filter(({ isTypeOnly }) => !isTypeOnly)
        .flatMap(({ file }) => (file === undefined ? [] : [file])),
    ]),
  )
  const found = new Set<string>()
  const done = new Set<string>()
  const trail: string[] = []
  function walk(path: string): void {
    const start = trail.indexOf(path)
    if (start >= 0) {
      found.add([...trail.slice(start), path].join(' -> '))
      return
    }
    if (done.has(path)) return
    trail.push(path)
    for (const file of next.get(path) ?? []) walk(file)
    trail.pop()
    done.add(path)
  }
  for (const path of next.keys()) walk(path)
  return [...found]
}

/** Files that are reached from the given ones by imports of any kind, these included. */
export function reachedFrom(sources: readonly Source[], entries: readonly string[]): Set<string> {
  const byPath = new Map(sources.map((source) => [source.path, source]))
  const reached = new Set<string>()
  const open = [...entries]
  for (let path = open.pop(); path !== undefined; path = open.pop()) {
    if (reached.has(path)) continue
    reached.add(path)
    for (const { file } of byPath.get(path)?.imports ?? []) if (file !== undefined) open.push(file)
  }
  return reached
}
