import AxeBuilder from '@axe-core/playwright'
import { chromium, type Browser, type BrowserContextOptions, type Page } from 'playwright-core'

/** A phone in one hand, and a desk. */
export const phone: BrowserContextOptions = {
  viewport: { width: 390, height: 844 },
  deviceScaleFactor: 2,
  isMobile: true,
  hasTouch: true,
}
export const wide: BrowserContextOptions = { viewport: { width: 1440, height: 900 } }

export async function openChromium(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env.EBBMARK_TEST_CHROMIUM ?? '/usr/bin/chromium',
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  })
}

export type Visit = {
  page: Page
  /** What the console called an error, what was thrown, and what failed to load, so far. */
  complaints: string[]
  close: () => Promise<void>
}

/** A person's own browser window: nothing is shared with another visit. Light theme unless said otherwise. */
export async function visit(
  browser: Browser,
  url: string,
  size: BrowserContextOptions = phone,
): Promise<Visit> {
  const context = await browser.newContext({
    baseURL: url,
    locale: 'en-US',
    timezoneId: 'America/Denver',
    colorScheme: 'light',
    reducedMotion: 'reduce',
    acceptDownloads: true,
    ...size,
  })
  const page = await context.newPage()
  page.setDefaultTimeout(15_000)
  const complaints: string[] = []
  page.on('console', (message) => {
    // A refusal the server gave with a reason is shown to the person; Chromium logs its status all the same.
    const isRefusal = /the server responded with a status of 4\d\d/.test(message.text())
    if (message.type() === 'error' && !isRefusal) complaints.push(message.text())
  })
  page.on('pageerror', (error) => complaints.push(String(error)))
  page.on('response', (response) => {
    const isOfApi = new URL(response.url()).pathname.startsWith('/api/')
    if (response.status() >= (isOfApi ? 500 : 400))
      complaints.push(`${response.status()} ${response.url()}`)
  })
  return { page, complaints, close: () => context.close() }
}

/** What axe finds on the screen as it stands: rule, and the elements that break it. */
export async function findViolations(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).analyze()
  return violations.map(({ id, impact, nodes }) => {
    const where = nodes.map(({ target }) => target.join(' ')).slice(0, 5)
    return `${id} (${impact ?? 'unknown'}): ${where.join(' | ')}`
  })
}
