import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { sql } from 'drizzle-orm'
import { openDatabase } from '@/db/client'
import { migrateDatabase } from '@/db/migrate'
import { aContainer, aMachine, aSite, drainBody } from '../helpers/factories'
import { testApp } from '../helpers/test-app'

/** `npm run check:book` as a process of its own, on a folder with one drain in it. */
let folder: string
beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'ebbmark-check-'))
  const opened = await openDatabase({ folder })
  await migrateDatabase(opened)
  const product = await testApp({ opened })
  const site = await aSite(product, { code: 'S1' })
  const its = { machine: await aMachine(site), container: await aContainer(site) }
  const reply = await site.organisation.administrator.post('/drains', drainBody(site, its))
  expect(reply.status).toBe(201)
  await opened.close()
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

function checkBookCommand() {
  const env: NodeJS.ProcessEnv = { ...process.env, EBBMARK_DATA: folder }
  delete env.DATABASE_URL
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    ['--import', 'tsx', join(__dirname, '../../server/check-book.ts')],
    { encoding: 'utf8', env },
  )
  return { status, stdout, stderr }
}

test('says that a sound book is sound', () => {
  expect(checkBookCommand()).toEqual({
    status: 0,
    stdout: 'the book is sound: 1 movements, 2 accounts\n',
    stderr: '',
  })
})

test('does not open a folder that a server has open, and says so in one line', async () => {
  const opened = await openDatabase({ folder })
  const { status, stdout, stderr } = checkBookCommand()
  await opened.close()
  expect([status, stdout]).toEqual([1, ''])
  expect(stderr).toMatch(/^The database folder .* is already open in process \d+\.[^\n]*\n$/)
})

test('names what is not sound, and ends with 1', async () => {
  const opened = await openDatabase({ folder })
  await opened.db.transaction(async (tx) => {
    await tx.execute(sql`set local session_replication_role = replica`)
    await tx.execute(sql`update movements set note = 'nothing to see'`)
  })
  await opened.close()
  expect(checkBookCommand()).toEqual({
    status: 1,
    stdout: 'line-changed: S1 line 1\n',
    stderr: '',
  })
})
