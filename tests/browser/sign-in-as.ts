import type { Browser, BrowserContextOptions } from 'playwright-core'
import { findViolations, visit, type Visit } from './browser'

const password = 'drain-by-drain'

export type SignedInVisit = Visit & {
  /** axe finds nothing on the screen as it stands. */
  expectClean: () => Promise<void>
}

/** A window in which a person of the demo company has signed in through the form. */
export async function signInAs(
  browser: Browser,
  url: string,
  name: string,
  size: BrowserContextOptions,
): Promise<SignedInVisit> {
  const opened = await visit(browser, url, size)
  const { page } = opened
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill(`${name}@quillbrook.example.com`)
  await page.getByLabel('Password').fill(password)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.waitForURL((address) => address.pathname !== '/sign-in')
  await page.getByRole('heading', { level: 1 }).waitFor()
  return {
    ...opened,
    expectClean: async () => {
      await page.getByRole('heading', { level: 1 }).waitFor()
      expect({ at: page.url(), found: await findViolations(page) }).toEqual({
        at: page.url(),
        found: [],
      })
    },
  }
}
