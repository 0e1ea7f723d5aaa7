import { execFileSync } from 'node:child_process'
import {
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs'
import { join } from 'node:path'
import { brotliCompressSync } from 'node:zlib'
import { report } from './report'

/** What a browser loads first, in kB of brotli, against an Expo Router app of one empty screen, exported alike. */
function main(): void {
  const empty = mkdtempSync(join(process.cwd(), 'dist/empty-'))
  try {
    mkdirSync(join(empty, 'app'))
    writeFileSync(
      join(empty, 'app/index.js'),
      'export default function Empty() {\n  return null\n}\n',
    )
    for (const name of ['package.json', 'app.json', 'babel.config.js']) {
      writeFileSync(join(empty, name), readFileSync(name))
    }
    symlinkSync(join(process.cwd(), 'node_modules'), join(empty, 'node_modules'))
    execFileSync('npx', ['expo', 'export', '-p', 'web', '--output-dir', 'out'], {
      cwd: empty,
      env: {
        ...process.env,
        EXPO_NO_TELEMETRY: '1',
        EXPO_OFFLINE: '1',
        CI: '1',
        NODE_ENV: 'production',
      },
      stdio: 'ignore',
    })
    report({
      name: 'entry of the web app',
      unit: 'kB brotli',
      median: entryKilobytes('dist/web'),
      floor: entryKilobytes(join(empty, 'out')),
      aim: 'ratio at most 1.6, routes split',
    })
  } finally {
    rmSync(empty, { recursive: true, force: true })
  }
}

/** The scripts that index.html names. */
function entryKilobytes(folder: string): number {
  const page = readFileSync(join(folder, 'index.html'), 'utf8')
  const scripts = [...page.matchAll(/src="([^"]+\.js)"/g)].map(([, src]) => src ?? '')
  if (scripts.length === 0)
    throw new Error(`no script in ${folder}: ${readdirSync(folder).join(', ')}`)
  const sizes = scripts.map((src) => brotliCompressSync(readFileSync(join(folder, src))).length)
  return sizes.reduce((total, size) => total + size, 0) / 1000
}

main()
