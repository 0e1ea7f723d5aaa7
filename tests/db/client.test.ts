import { spawn } from 'node:child_process'
import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { sql } from 'drizzle-orm'
import { openDatabase } from '@/db/client'

let folder: string
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'ebbmark-client-'))
})
afterEach(() => rmSync(folder, { recursive: true, force: true }))

/** Lets another process write until it has said `count` rows, then kills it without warning. */
function killedAfter(count: number): Promise<{ lastSaid: number }> {
  const child = spawn(
    process.execPath,
    ['--import', 'tsx', join(__dirname, 'write-until-killed.ts'), folder],
    { stdio: ['ignore', 'pipe', 'inherit'] },
  )
  let lastSaid = 0
  child.stdout.on('data', (chunk: Buffer) => {
    lastSaid = Number(chunk.toString().trim().split('\n').at(-1))
    if (lastSaid >= count) child.kill('SIGKILL')
  })
  return new Promise((done) => child.on('close', () => done({ lastSaid })))
}

test('what was acknowledged is there after kill -9, and the folder opens again', async () => {
  const { lastSaid } = await killedAfter(60)
  const opened = await openDatabase({ folder })
  const result = (await opened.db.execute(
    sql`select count(*)::int as n, max(n)::int as last from acknowledged`,
  )) as unknown as { rows: { n: number; last: number }[] }
  await opened.close()
  expect(lastSaid).toBeGreaterThanOrEqual(60)
  expect(result.rows[0]?.n).toBeGreaterThanOrEqual(lastSaid)
  expect(result.rows[0]?.n).toBe(result.rows[0]?.last)
})

test('a closed folder holds the database and no lock', async () => {
  const opened = await openDatabase({ folder })
  expect(readdirSync(folder).filter((name) => name.startsWith('lock-'))).toHaveLength(2)
  await opened.close()
  expect(readdirSync(folder)).toEqual(['database'])
})

test('a second opening is refused while the first goes on', async () => {
  const opened = await openDatabase({ folder })
  await expect(openDatabase({ folder })).rejects.toThrow(
    `The database folder ${folder} is already open in process ${process.pid}.`,
  )
  const result = (await opened.db.execute(sql`select 1 as one`)) as unknown as { rows: unknown[] }
  expect(result.rows).toEqual([{ one: 1 }])
  await opened.close()
})

test('a PostgreSQL that does not answer is told as such, in time', async () => {
  const opened = await openDatabase({ url: 'postgres://nobody@127.0.0.1:9/none', folder })
  await expect(opened.db.execute(sql`select 1`)).rejects.toThrow()
  await opened.close()
  expect(readdirSync(folder)).toEqual([])
})
