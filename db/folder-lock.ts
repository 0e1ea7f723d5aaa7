import { mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
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

type Claim = { file: string; pid: number; started: string; isHeld: boolean }

const longestWaitMs = 40
const attempts = 50

/**
 * Takes the folder for this process. PGlite itself has no lock, and two writers lose data silently.
 *
 * Every starter first shows its own claim (a file whose name says everything: pid, start time, held or not) and only
 * then looks for others, so of any two at least one sees the other. Two that see each other while neither holds step
 * back and try again; nobody ever moves or replaces a living process's file. What a dead process left (its pid is gone,
 * or is another process by now) is removed. Processes that cannot see each other's pids (two containers) are not told
 * apart from dead ones: share a PostgreSQL between those, not a folder.
 * @throws FolderInUse
 */
export function lockFolder(folder: string): { release: () => void } {
  mkdirSync(folder, { recursive: true, mode: 0o700 })
  const claim = join(folder, nameOf('claim'))
  const held = join(folder, nameOf('held'))
  let rival: Claim | undefined
  for (let attempt = 0; attempt < attempts; attempt += 1) {
    rival = rivalIn(folder)
    if (rival === undefined) {
      writeFileSync(claim, '', { mode: 0o600 })
      rival = rivalIn(folder, claim)
      if (rival === undefined) {
        writeFileSync(held, '', { mode: 0o600 })
        return {
          release: () => {
            rmSync(held, { force: true })
            rmSync(claim, { force: true })
          },
        }
      }
      rmSync(claim, { force: true })
    }
    if (rival.isHeld) break
    pause(1 + Math.random() * longestWaitMs)
  }
  throw new FolderInUse(folder, rival?.pid ?? 0)
}

/** A living process's file in the folder: one that holds it if there is one, else one that claims it. */
function rivalIn(folder: string, own?: string): Claim | undefined {
  const others = livingClaims(folder).filter(({ file }) => join(folder, file) !== own)
  return others.find(({ isHeld }) => isHeld) ?? others[0]
}

function nameOf(state: 'claim' | 'held'): string {
  return `lock-${process.pid}-${startTimeOf(process.pid)}-${state}`
}

function livingClaims(folder: string): Claim[] {
  const living: Claim[] = []
  for (const file of readdirSync(folder)) {
    const found = /^lock-(\d+)-(\w*)-(claim|held)$/.exec(file)
    if (found === null) continue
    const [, pid = '', started = '', state] = found
    const claim = { file, pid: Number(pid), started, isHeld: state === 'held' }
    if (isAlive(claim)) living.push(claim)
    else rmSync(join(folder, file), { force: true })
  }
  return living
}

function isAlive({ pid, started }: Claim): boolean {
  try {
    process.kill(pid, 0)
  } catch (error) {
    // EPERM: it lives, as somebody else's.
    if ((error as NodeJS.ErrnoException).code !== 'EPERM') return false
  }
  const startedNow = startTimeOf(pid)
  return startedNow === '' || started === '' || startedNow === started
}

/**
 * Start of a process as boot id and clock ticks since that boot, so that a pid used again is not mistaken for its
 * first owner; '' where /proc does not tell, 'dead' of a killed process that its parent has not collected yet.
 */
function startTimeOf(pid: number): string {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    const boot = readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim()
    // The command in parentheses may hold spaces: what follows the last one is field 3, the state, and so on.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    if (fields[0] === 'Z' || fields[0] === 'X') return 'dead'
    return `${boot.replaceAll('-', '')}_${fields[19] ?? ''}`
  } catch {
    return ''
  }
}

function pause(milliseconds: number): void {
  Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, milliseconds)
}
