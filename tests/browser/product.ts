import { spawn } from 'node:child_process'
import { cpSync, existsSync, mkdtempSync, rmSync } from 'node:fs'
import { createServer, type AddressInfo, type Socket } from 'node:net'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'

const root = resolve(__dirname, '../..')

/** Where the demo company lies, made once in a run; told through the environment. */
export const demoFolderVariable = 'EBBMARK_TEST_DEMO_FOLDER'

export type Product = {
  url: string
  dataFolder: string
  /** Ends it by a signal (SIGTERM stops in order) and tells the exit code; the folder stays. */
  stop: (signal?: NodeJS.Signals) => Promise<number | null>
  /** Ends it and removes its folder. */
  remove: () => Promise<void>
}

/**
 * Starts the built product as a process of its own, on a free port, with its own copy of the demo company; with
 * `isEmpty` on a new folder without it. A `dataFolder` given is used as it lies there.
 */
export async function startProduct(
  options: { isEmpty?: boolean; dataFolder?: string; env?: Record<string, string> } = {},
): Promise<Product> {
  const dataFolder = options.dataFolder ?? mkdtempSync(join(tmpdir(), 'ebbmark-browser-'))
  const demo = process.env[demoFolderVariable]
  const isDemo = options.isEmpty !== true
  if (options.dataFolder === undefined && isDemo && demo !== undefined) {
    cpSync(demo, dataFolder, { recursive: true })
  }
  return start(dataFolder, { EBBMARK_DEMO: isDemo ? '1' : '0', ...options.env })
}

async function start(dataFolder: string, env: Record<string, string>): Promise<Product> {
  const main = join(root, 'dist/server/main.mjs')
  if (!existsSync(main)) throw new Error('Nothing is built yet: npm test -- browser builds first')
  const port = await freePort()
  const child = spawn(process.execPath, ['--enable-source-maps', main], {
    cwd: root,
    env: {
      ...process.env,
      // The folder it is, whatever the person running the tests uses otherwise.
      DATABASE_URL: undefined,
      PORT: String(port),
      HOST: '127.0.0.1',
      EBBMARK_DATA: dataFolder,
      LOG_LEVEL: 'error',
      ...env,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  const ended = new Promise<number | null>((done) => child.on('close', done))
  // A test that fails before it stops the product must neither leave it running nor keep the run from ending.
  globalThis.atEndOfFile?.(() => child.kill('SIGKILL'))
  const said: string[] = []
  child.stderr.on('data', (chunk: Buffer) => said.push(chunk.toString()))
  await new Promise<void>((ready, failed) => {
    child.stdout.on('data', (chunk: Buffer) => {
      said.push(chunk.toString())
      if (said.join('').includes('is open at http')) ready()
    })
    void ended.then((code) => failed(new Error(`The product ended with ${code}: ${said.join('')}`)))
  })
  const handles = [child, child.stdout as Socket, child.stderr as Socket]
  for (const handle of handles) handle.unref()
  const stop = (signal: NodeJS.Signals = 'SIGTERM') => {
    for (const handle of handles) handle.ref()
    if (child.exitCode === null && child.signalCode === null) child.kill(signal)
    return ended
  }
  return {
    url: `http://127.0.0.1:${port}`,
    dataFolder,
    stop,
    remove: async () => {
      await stop()
      rmSync(dataFolder, { recursive: true, force: true })
    },
  }
}

function freePort(): Promise<number> {
  return new Promise((done) => {
    const probe = createServer()
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as AddressInfo
      probe.close(() => done(port))
    })
  })
}
