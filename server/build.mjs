import { spawn } from 'node:child_process'
import { existsSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { promisify } from 'node:util'
import { compareSources, filesBelow, root } from './source-digest.mjs'

/** Set-up that `npm start` and `npm test` share. Plain Node: it runs before anything is installed. */

/** Installs what the lock file names, when node_modules is missing or belongs to another lock file. */
export async function installWhenNeeded(tell) {
  const lock = compareSources('install', ['package-lock.json'])
  const installed = join(root, 'node_modules/.package-lock.json')
  if (existsSync(installed) && (!lock.isChanged || isInstalled(installed))) return lock.keep()
  tell('Installing packages (once, about two minutes) ...')
  await run('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'])
  lock.keep()
}

/** Somebody ran npm themselves: everything that is not optional is there, in the version the lock file names. */
function isInstalled(installed) {
  const { packages: wanted } = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8'))
  const { packages: found } = JSON.parse(readFileSync(installed, 'utf8'))
  return Object.entries(wanted).every(
    ([path, { version, optional, peer, link }]) =>
      path === '' || optional || peer || link || found[path]?.version === version,
  )
}

/** Bundles the server's entry points when their sources changed. */
export async function buildServerWhenNeeded(tell) {
  const sources = compareSources('server', [
    'server',
    'db',
    'shared',
    'package.json',
    'package-lock.json',
    'tsconfig.json',
  ])
  if (existsSync(join(root, 'dist/server/main.mjs')) && !sources.isChanged) return
  tell('Building the server ...')
  const { build } = await import('esbuild')
  rmSync(join(root, 'dist/server'), { recursive: true, force: true })
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
  sources.keep()
}

/** Exports the web app when its sources changed, and compresses what a browser will ask for. */
export async function buildWebWhenNeeded(tell) {
  const sources = compareSources('web', [
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
  const folder = join(root, 'dist/web')
  if (existsSync(join(folder, 'index.html')) && !sources.isChanged) return
  tell('Building the web app (once, one to two minutes) ...')
  // Made beside the old one: a build that fails, or is stopped, leaves what works in place.
  const draft = join(root, 'dist/web-draft')
  rmSync(draft, { recursive: true, force: true })
  await run(
    process.execPath,
    ['node_modules/expo/bin/cli', 'export', '-p', 'web', '--output-dir', 'dist/web-draft'],
    { EXPO_NO_TELEMETRY: '1', EXPO_OFFLINE: '1', CI: '1', NODE_ENV: 'production' },
  )
  await compress(draft)
  rmSync(folder, { recursive: true, force: true })
  renameSync(draft, folder)
  sources.keep()
}

/** Writes .br and .gz beside every file that shrinks by it. */
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
        // 11 takes about three times as long for two percent less.
        [constants.BROTLI_PARAM_QUALITY]: 10,
        [constants.BROTLI_PARAM_SIZE_HINT]: bytes.length,
      }
      const [br, gz] = await Promise.all([brotli(bytes, { params }), zip(bytes, { level: 9 })])
      writeFileSync(`${file}.br`, br)
      writeFileSync(`${file}.gz`, gz)
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
      failed(new Error(`${[command, ...args].join(' ')} ended with ${code}`))
    })
  })
}
