import { execFileSync, spawn } from 'node:child_process'
import { createHash } from 'node:crypto'
import {
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs'
import { join, resolve } from 'node:path'
import { promisify } from 'node:util'

/** Set-up that `npm start` and `npm test` share. Plain Node: it runs before anything is installed. */

export const root = resolve(import.meta.dirname, '..')
const stamps = join(root, 'node_modules/.cache/ebbmark')

/** Installs what the lock file names, when node_modules is missing or belongs to another lock file. */
export function installWhenNeeded(say) {
  const lock = digestOf(['package-lock.json'])
  if (existsSync(join(root, 'node_modules/.package-lock.json')) && readStamp('install') === lock)
    return
  say('Installing packages (once, about two minutes) ...')
  execFileSync('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    stdio: ['ignore', 'inherit', 'inherit'],
  })
  writeStamp('install', lock)
}

/** Bundles the server's entry points when their sources changed. */
export async function buildServerWhenNeeded(say) {
  const sources = digestOf(['server', 'db', 'shared', 'package-lock.json', 'tsconfig.json'])
  if (existsSync(join(root, 'dist/server/main.mjs')) && readStamp('server') === sources) return
  say('Building the server ...')
  const { build } = await import('esbuild')
  await build({
    absWorkingDir: root,
    entryPoints: { main: 'server/main.ts', 'check-book': 'server/check-book.ts' },
    outdir: 'dist/server',
    outExtension: { '.js': '.mjs' },
    bundle: true,
    splitting: true,
    chunkNames: 'part-[hash]',
    format: 'esm',
    platform: 'node',
    target: 'node20',
    packages: 'external',
    alias: { '@': root },
    sourcemap: 'linked',
    logLevel: 'warning',
  })
  writeStamp('server', sources)
}

/** Exports the web app when its sources changed, and compresses what a browser will ask for. */
export async function buildWebWhenNeeded(say) {
  const sources = digestOf([
    'app',
    'modules',
    'shared',
    'fonts',
    'public',
    'app.json',
    'babel.config.js',
    'metro.config.js',
    'package-lock.json',
  ])
  if (existsSync(join(root, 'dist/web/index.html')) && readStamp('web') === sources) return
  say('Building the web app (once, one to two minutes) ...')
  const out = join(root, 'dist/web')
  rmSync(out, { recursive: true, force: true })
  await run('npx', ['expo', 'export', '-p', 'web', '--output-dir', 'dist/web'], {
    EXPO_NO_TELEMETRY: '1',
    EXPO_OFFLINE: '1',
    CI: '1',
    NODE_ENV: 'production',
  })
  await compress(out)
  writeStamp('web', sources)
}

async function compress(folder) {
  const { brotliCompress, gzip, constants } = await import('node:zlib')
  const brotli = promisify(brotliCompress)
  const zip = promisify(gzip)
  const texts = filesBelow(folder).filter((file) =>
    /\.(js|css|html|json|svg|webmanifest)$/.test(file),
  )
  await Promise.all(
    texts.map(async (file) => {
      const bytes = readFileSync(file)
      if (bytes.length < 1024) return
      const params = {
        [constants.BROTLI_PARAM_QUALITY]: 10,
        [constants.BROTLI_PARAM_SIZE_HINT]: bytes.length,
      }
      writeFileSync(`${file}.br`, await brotli(bytes, { params }))
      writeFileSync(`${file}.gz`, await zip(bytes, { level: 9 }))
    }),
  )
}

/** Runs a command to its end; its output is shown only when it fails. */
function run(command, args, env) {
  return new Promise((done, failed) => {
    const child = spawn(command, args, {
      cwd: root,
      env: { ...process.env, ...env },
      stdio: ['ignore', 'pipe', 'pipe'],
    })
    const output = []
    child.stdout.on('data', (chunk) => output.push(chunk))
    child.stderr.on('data', (chunk) => output.push(chunk))
    child.on('error', failed)
    child.on('exit', (code) => {
      if (code === 0) return done(undefined)
      process.stderr.write(Buffer.concat(output))
      failed(new Error(`${command} ${args.join(' ')} ended with ${code}`))
    })
  })
}

/**
 * Digest over names, sizes and times of the files below the given paths. A checkout sets new times, so the first
 * start after one builds again; a start with nothing changed reads no file at all.
 */
function digestOf(paths) {
  const hash = createHash('sha256')
  for (const path of paths) {
    const full = join(root, path)
    if (!existsSync(full)) continue
    for (const file of statSync(full).isDirectory() ? filesBelow(full) : [full]) {
      const { size, mtimeMs } = statSync(file)
      hash.update(`${file.slice(root.length)}\0${size}\0${mtimeMs}\n`)
    }
  }
  return hash.digest('hex')
}

function filesBelow(folder) {
  return readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath ?? entry.path, entry.name))
    .sort()
}

function readStamp(name) {
  try {
    return readFileSync(join(stamps, name), 'utf8')
  } catch {
    return ''
  }
}

function writeStamp(name, value) {
  mkdirSync(stamps, { recursive: true })
  writeFileSync(join(stamps, name), value)
}
