import { spawn, type ChildProcess } from 'node:child_process'
import { cpSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { report } from './report'

/** Resident memory of the server with the demo company after some reading, against PGlite alone on the same folder. */
async function main(): Promise<void> {
  const folder = mkdtempSync(join(tmpdir(), 'ebbmark-memory-'))
  const port = 20_000 + (process.pid % 20_000)
  const env = { ...process.env, EBBMARK_DATA: folder, PORT: String(port), LOG_LEVEL: 'error' }
  const start = () => until(spawn(process.execPath, ['server/launch.mjs'], { env }), 'is open at')
  // The first start makes the company; what it took to make it is not what is measured.
  await ended(await start())
  const server = await start()
  for (let round = 0; round < 20; round += 1) {
    await fetch(`http://127.0.0.1:${port}/api/health`)
    await fetch(`http://127.0.0.1:${port}/api/status`)
  }
  const used = residentMegabytes(server)
  await ended(server)
  const copy = join(folder, 'copy')
  cpSync(join(folder, 'database'), copy, { recursive: true })
  const bare = await until(
    spawn(process.execPath, [
      '--input-type=module',
      '-e',
      `import { PGlite } from '@electric-sql/pglite'
       const client = await PGlite.create({ dataDir: ${JSON.stringify(copy)} })
       for (let round = 0; round < 40; round += 1) await client.query('select count(*) from movements')
       console.log('is open at'); setInterval(() => client, 1000)`,
    ]),
    'is open at',
  )
  const floor = residentMegabytes(bare)
  bare.kill('SIGKILL')
  report({
    name: 'memory of the server',
    unit: 'MB',
    median: used,
    floor,
    aim: 'at most 150 MB more',
  })
  rmSync(folder, { recursive: true, force: true })
}

function until(child: ChildProcess, words: string): Promise<ChildProcess> {
  return new Promise((done, failed) => {
    child.stdout?.on('data', (chunk: Buffer) => {
      if (chunk.toString().includes(words)) done(child)
    })
    child.on('exit', (code) => failed(new Error(`ended with ${code}`)))
  })
}

function ended(child: ChildProcess): Promise<unknown> {
  const end = new Promise((done) => child.on('close', done))
  child.kill('SIGTERM')
  return end
}

function residentMegabytes({ pid }: ChildProcess): number {
  const kilobytes = /VmRSS:\s+(\d+)/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))?.[1]
  return Number(kilobytes) / 1024
}

void main()
