import { buildServerWhenNeeded, buildWebWhenNeeded, installWhenNeeded } from './build.mjs'
import { root } from './source-digest.mjs'

/**
 * `npm start`: installs and builds what is missing, then runs the product in this very process, so that a signal
 * reaches it. `node server/launch.mjs check-book` runs that entry instead.
 */
const entry = process.argv[2] ?? 'main'
const say = (line) => process.stderr.write(`${line}\n`)

process.chdir(root)
try {
  await installWhenNeeded(say)
  await buildServerWhenNeeded(say)
  if (entry === 'main') await buildWebWhenNeeded(say)
} catch (error) {
  say(`Could not be made ready: ${error.message}`)
  process.exit(1)
}
await import(`../dist/server/${entry}.mjs`)
