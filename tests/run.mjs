import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { buildServerWhenNeeded, buildWebWhenNeeded, installWhenNeeded } from '../server/build.mjs'
import { root } from '../server/source-digest.mjs'
import { findChromium } from './run/find-chromium.mjs'
import { startPostgres } from './run/postgres-server.mjs'
import { runTool, stopRunning } from './run/processes.mjs'

/**
 * `npm test`: everything a fresh clone needs to be trusted, ending in one line `N passed, N failed`.
 * `npm test -- server drains` runs one stage and, in it, the test files whose path holds `drains`.
 */
const stages = ['check', 'shared', 'server', 'postgres', 'modules', 'browser']
const asked = process.argv.slice(2)
const patterns = asked.filter((word) => !stages.includes(word))
const chosen = stages.filter((stage) => asked.length === patterns.length || asked.includes(stage))
const wants = (stage) => chosen.includes(stage)

const sum = { passed: 0, failed: 0, skipped: 0 }
const notes = []
const folder = mkdtempSync(join(tmpdir(), 'ebbmark-tests-'))
let postgres

const say = (line) => process.stdout.write(`${line}\n`)
const begin = (title) => say(`\n== ${title}`)

function count(title, isPassed) {
  sum[isPassed ? 'passed' : 'failed'] += 1
  say(`${isPassed ? 'passed' : 'FAILED'}: ${title}`)
}

async function runCheck() {
  begin('Types, lint, format')
  // Routes are typed by files that Expo writes.
  await runTool('expo/bin/cli', ['customize', 'tsconfig.json'], {
    isQuiet: true,
    env: { EXPO_OFFLINE: '1', EXPO_NO_TELEMETRY: '1', CI: '1' },
  })
  count('types', (await runTool('typescript/bin/tsc', ['--noEmit'])).code === 0)
  count('lint', (await runTool('eslint/bin/eslint.js', ['.', '--max-warnings', '0'])).code === 0)
  count('format', (await runTool('prettier/bin/prettier.cjs', ['--check', '.'])).code === 0)
}

async function runJest(title, projects, { env = {}, args = [] } = {}) {
  begin(title)
  const report = join(folder, `${title.replace(/\W+/g, '-')}.json`)
  const { code } = await runTool(
    'jest/bin/jest.js',
    [
      '--selectProjects',
      ...projects,
      '--json',
      `--outputFile=${report}`,
      '--passWithNoTests',
    ].concat(args, patterns.length > 0 ? ['--testPathPattern', ...patterns] : []),
    { env: { ...env, FORCE_COLOR: process.stdout.isTTY ? '1' : '0' } },
  )
  const failedBefore = sum.failed
  try {
    const result = JSON.parse(readFileSync(report, 'utf8'))
    sum.passed += result.numPassedTests
    sum.failed += result.numFailedTests + result.numRuntimeErrorTestSuites
    sum.skipped += result.numPendingTests + result.numTodoTests
  } catch {
    count(title, false)
  }
  // A run that ended badly for another reason (an open handle, a set-up) did not pass.
  if (code !== 0 && sum.failed === failedBefore) count(title, false)
}

async function runOnPostgres() {
  postgres = await startPostgres()
  if (postgres.address === undefined) {
    notes.push(`not run on PostgreSQL (${postgres.reason})`)
    return
  }
  await runJest(`Server and database, on PostgreSQL ${postgres.version}`, ['server'], {
    env: { EBBMARK_TEST_POSTGRES: postgres.address },
  })
  await postgres.stop()
  postgres = undefined
}

async function runBrowser(built) {
  begin('The built product in Chromium')
  try {
    await built
    const chromium = await findChromium(say)
    await runJest('Browser', ['browser'], {
      env: { EBBMARK_TEST_CHROMIUM: chromium },
      args: ['--runInBand'],
    })
  } catch (error) {
    say(error.message)
    count('the built product', false)
  }
}

async function build() {
  await buildServerWhenNeeded(say)
  await buildWebWhenNeeded(say)
}

async function tidy() {
  stopRunning()
  await postgres?.stop?.()
  rmSync(folder, { recursive: true, force: true })
}

for (const signal of ['SIGINT', 'SIGTERM']) {
  process.on(signal, () => void tidy().finally(() => process.exit(1)))
}

process.chdir(root)
try {
  await installWhenNeeded(say)
  // The export leaves a core idle most of its time: it runs beside the first stages.
  const built = wants('browser') ? build() : Promise.resolve()
  built.catch(() => undefined)
  if (wants('check')) await runCheck()
  const first = [...(wants('check') ? ['architecture'] : []), ...['shared', 'server'].filter(wants)]
  if (first.length > 0) await runJest(`Rules, shared, server on PGlite`, first)
  if (wants('postgres')) await runOnPostgres()
  if (wants('modules')) await runJest('Screens', ['modules'])
  if (wants('browser')) await runBrowser(built)
} catch (error) {
  say(error.stack ?? String(error))
  count('the run itself', false)
} finally {
  await tidy()
}

const more = [...(sum.skipped > 0 ? [`${sum.skipped} skipped`] : []), ...notes]
say(`\n${[`${sum.passed} passed`, `${sum.failed} failed`, ...more].join(', ')}`)
process.exitCode = sum.failed > 0 ? 1 : 0
