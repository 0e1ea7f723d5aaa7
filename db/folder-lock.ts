import { linkSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'

/** Another living process has the database folder open. */
export class FolderInUse extends Error {
  constructor(folder: string, pid: number) {
    super(
      `The database folder ${folder} is already open in process ${pid}. Stop that process first.`,
    )
    this.name = 'FolderInUse'
  }
}

type Holder = { pid: number; started: string }

/**
 * Takes the folder for this process. PGlite itself has no lock, and two writers lose data silently.
 * The lock is a file naming pid and start time; a holder that is no longer alive (or whose pid now is another
 * process) is taken over. Making the file complete elsewhere and linking it in place lets only one of two starters win.
 * @throws FolderInUse
 */
export function lockFolder(folder: string): { release: () => void } {
  const path = join(folder, 'lock')
  const mine: Holder = { pid: process.pid, started: startTimeOf(process.pid) }
  const draft = join(folder, `lock.${process.pid}`)
  writeFileSync(draft, JSON.stringify(mine), { mode: 0o600 })
  try {
    for (let attempt = 0; attempt < 20; attempt += 1) {
      if (linked(draft, path)) return { release: () => release(path, mine) }
      const holder = readHolder(path)
      if (holder !== undefined && isAlive(holder)) throw new FolderInUse(folder, holder.pid)
      setStaleAside(path, holder)
    }
    throw new FolderInUse(folder, readHolder(path)?.pid ?? 0)
  } finally {
    rmSync(draft, { force: true })
  }
}

function linked(draft: string, path: string): boolean {
  try {
    linkSync(draft, path)
    return true
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'EEXIST') return false
    throw error
  }
}

/** Renaming takes the stale file away exactly once; whoever renames a fresh one by mistake puts it back. */
function setStaleAside(path: string, stale: Holder | undefined): void {
  const aside = `${path}.stale.${process.pid}`
  try {
    renameSync(path, aside)
  } catch {
    return
  }
  const taken = readHolder(aside)
  const isTheSame = taken?.pid === stale?.pid && taken?.started === stale?.started
  if (!isTheSame && taken !== undefined && isAlive(taken)) linked(aside, path)
  rmSync(aside, { force: true })
}

function release(path: string, mine: Holder): void {
  const holder = readHolder(path)
  if (holder?.pid === mine.pid && holder.started === mine.started) rmSync(path, { force: true })
}

function readHolder(path: string): Holder | undefined {
  try {
    const read: unknown = JSON.parse(readFileSync(path, 'utf8'))
    if (typeof read !== 'object' || read === null || !('pid' in read) || !('started' in read))
      return undefined
    return { pid: Number(read.pid), started: String(read.started) }
  } catch {
    return undefined
  }
}

function isAlive(holder: Holder): boolean {
  try {
    process.kill(holder.pid, 0)
  } catch (error) {
    // EPERM: it lives, as somebody else's.
    if ((error as NodeJS.ErrnoException).code !== 'EPERM') return false
  }
  const started = startTimeOf(holder.pid)
  return started === '' || holder.started === '' || started === holder.started
}

/** Start time of a process in clock ticks since boot, with the boot's id; '' where /proc does not tell. */
function startTimeOf(pid: number): string {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    const boot = readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim()
    // The command in parentheses may hold spaces: field 22 is the 20th after it.
    const ticks = stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? ''
    return `${boot}:${ticks}`
  } catch {
    return ''
  }
}
