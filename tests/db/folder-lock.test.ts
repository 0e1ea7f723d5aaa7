import { spawn, type ChildProcess } from 'node:child_process'
import { mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { FolderInUse, lockFolder } from '@/db/folder-lock'

let folder: string
const children: ChildProcess[] = []
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'ebbmark-lock-'))
})
afterEach(async () => {
  for (const child of children.splice(0)) await stopped(child)
  rmSync(folder, { recursive: true, force: true })
})

/** Another process that tries to take the folder, says what came of it, and then stays. */
function anotherProcess(): { child: ChildProcess; answer: Promise<string> } {
  const child = spawn(
    process.execPath,
    ['--import', 'tsx', join(__dirname, 'lock-and-stay.ts'), folder],
    { stdio: ['pipe', 'pipe', 'inherit'] },
  )
  children.push(child)
  const answer = new Promise<string>((told) => {
    let said = ''
    child.stdout?.on('data', (chunk: Buffer) => {
      said += chunk.toString()
      if (said.includes('\n')) told(said.trim())
    })
    child.on('exit', () => told(said.trim()))
  })
  return { child, answer }
}

function stopped(child: ChildProcess, signal: NodeJS.Signals = 'SIGKILL'): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return Promise.resolve()
  return new Promise((done) => {
    child.on('exit', () => done())
    child.kill(signal)
  })
}

test('a second process is refused with the folder and the pid that has it', async () => {
  const first = anotherProcess()
  expect(await first.answer).toBe('locked')
  const second = anotherProcess()
  expect(await second.answer).toBe(
    `The database folder ${folder} is already open in process ${first.child.pid}. Stop that process first.`,
  )
})

test('a released folder is taken again, and leaves nothing behind', () => {
  lockFolder(folder).release()
  const lock = lockFolder(folder)
  lock.release()
  expect(readdirSync(folder)).toEqual([])
})

test('the same process does not open a folder twice', () => {
  const lock = lockFolder(folder)
  expect(() => lockFolder(folder)).toThrow(FolderInUse)
  lock.release()
})

test('after kill -9 the next process takes over', async () => {
  const first = anotherProcess()
  expect(await first.answer).toBe('locked')
  await stopped(first.child)
  const second = anotherProcess()
  expect(await second.answer).toBe('locked')
})

test('a pid that belongs to another process by now does not hold the folder', () => {
  writeFileSync(join(folder, `lock-${process.pid}-anotherboot_1-held`), '')
  const lock = lockFolder(folder)
  expect(readdirSync(folder).every((name) => !name.includes('anotherboot'))).toBe(true)
  lock.release()
})

test('of six that start together over what a dead one left, exactly one takes the folder', async () => {
  mkdirSync(folder, { recursive: true })
  writeFileSync(join(folder, 'lock-4194301-gone_1-held'), '')
  writeFileSync(join(folder, 'lock-4194301-gone_1-claim'), '')
  const answers = await Promise.all(Array.from({ length: 6 }, () => anotherProcess().answer))
  expect(answers.filter((answer) => answer === 'locked')).toHaveLength(1)
  expect(answers.filter((answer) => answer.includes('is already open in process'))).toHaveLength(5)
})
