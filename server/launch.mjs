import { buildServerWhenNeeded, buildWebWhenNeeded, installWhenNeeded, root } from './build.mjs'

/**
 * `npm start`: installs and builds what is missing, then runs the product in this very process, so that a signal
 * reaches it. `node server/launch.mjs check-book` runs that entry instead.
 */
const entry = process.argv[2] ?? 'main'
const say = (line) => process.stderr.write(`${line}\n`)

process.chdir(root)
installWhenNeeded(say)
await buildServerWhenNeeded(say)
if (entry === 'main') await buildWebWhenNeeded(say)
await import(`../dist/server/${entry}.mjs`)
