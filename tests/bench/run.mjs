import { spawnSync } from 'node:child_process'
import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { buildWebWhenNeeded, installWhenNeeded } from '../../server/build.mjs'
import { root } from '../../server/source-digest.mjs'

/**
 * `npm run bench`: runs every tests/bench/*.bench.ts, each in a process of its own, so that none warms or burdens
 * another. A bench prints its figures by `report`; `npm run bench -- drain` runs those whose name holds `drain`.
 */
const [wanted = ''] = process.argv.slice(2)

process.chdir(root)
const tell = (line) => process.stderr.write(`${line}\n`)
await installWhenNeeded(tell)
// Built of what is measured, not of what was built last.
await buildWebWhenNeeded(tell)
const benches = readdirSync(join(root, 'tests/bench')).filter(
  (name) => name.endsWith('.bench.ts') && name.includes(wanted),
)
for (const name of benches) {
  process.stderr.write(`${name}\n`)
  const { status } = spawnSync(
    process.execPath,
    ['--expose-gc', '--import', 'tsx', join('tests/bench', name)],
    { stdio: 'inherit' },
  )
  if (status !== 0) process.exitCode = 1
}
