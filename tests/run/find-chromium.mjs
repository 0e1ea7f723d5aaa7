import { existsSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { runCommand } from './processes.mjs'

/**
 * Path of a Chromium: one that is installed, else Debian's package when we may install it, else the one that an npm
 * package brings.
 * @throws Error when none can be had
 */
export async function findChromium(say) {
  const named = process.env.EBBMARK_TEST_CHROMIUM
  if (named !== undefined) return named
  const installed = onPath('chromium', 'chromium-browser', 'google-chrome')
  if (installed !== undefined) return installed
  if (process.getuid?.() === 0 && onPath('apt-get') !== undefined) {
    say('Installing Chromium ...')
    const env = { DEBIAN_FRONTEND: 'noninteractive' }
    await runCommand('apt-get', ['update', '-qq'], { env, isQuiet: true })
    await runCommand('apt-get', ['install', '-y', '-qq', '--no-install-recommends', 'chromium'], {
      env,
      isQuiet: true,
    })
    const fresh = onPath('chromium')
    if (fresh !== undefined) return fresh
  }
  const { default: packaged } = await import('@sparticuz/chromium')
  return packaged.executablePath()
}

function onPath(...names) {
  for (const folder of (process.env.PATH ?? '').split(delimiter)) {
    for (const name of names) if (existsSync(join(folder, name))) return join(folder, name)
  }
  return undefined
}
