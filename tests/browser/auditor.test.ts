import { readFileSync } from 'node:fs'
import { parse } from 'csv-parse/sync'
import type { Browser } from 'playwright-core'
import { openChromium, wide } from './browser'
import { startProduct, type Product } from './product'
import { signInAs } from './sign-in-as'

let product: Product
let browser: Browser
beforeAll(async () => {
  product = await startProduct()
  browser = await openChromium()
})
afterAll(async () => {
  await browser.close()
  await product.remove()
})

test('an auditor reads a year, opens a figure to its lines, downloads the same and changes nothing', async () => {
  const { page, complaints, expectClean, close } = await signInAs(
    browser,
    product.url,
    'sefa',
    wide,
  )
  await page.waitForURL(/\/books\/\d{4}/)
  await page.goto('/books/2025')
  await page.getByRole('heading', { name: 'Books 2025', level: 1 }).waitFor()
  const table = page.getByRole('region', { name: /2025: Used mineral hydraulic fluid, in gallons/ })
  await table.waitFor()
  await expectClean()
  await page.screenshot({ path: 'tests/browser/wide.png' })

  // The first site's year, as the invented company's table has it: 645.0 gal in.
  await page
    .getByLabel('Site', { exact: true })
    .last()
    .selectOption({ label: 'Brindle Hollow yard' })
  const figure = table.getByRole('button', { name: /^In, 2025: 645\.0 gallons/ })
  await figure.click()
  await page.getByRole('heading', { name: 'In, 2025', level: 1 }).waitFor()
  await page.getByText(/lines, together 645\.0\sgal \(exactly 2,441\.59\d* L\)/).waitFor()
  await page.getByRole('link', { name: /D-25-0028/ }).waitFor()
  await expectClean()
  await page.getByRole('link', { name: /D-25-0028/ }).click()
  await page.getByRole('heading', { name: 'Drain D-25-0028' }).waitFor()
  expect(await page.getByRole('button', { name: 'Amend' }).count()).toBe(0)
  await page.goBack()
  await page.goBack()

  // Other cuts of the same year.
  for (const by of ['Container', 'Hauler', 'Facility']) {
    await page.getByText(by, { exact: true }).click()
    await page.waitForURL(new RegExp(`by=${by.toLowerCase()}`))
    await page
      .getByRole('region', { name: /^2025: / })
      .first()
      .waitFor()
    await expectClean()
  }
  await page.getByText('litres', { exact: true }).click()
  await page
    .getByRole('region', { name: /in litres/ })
    .first()
    .waitFor()
  await page.getByText('Stream', { exact: true }).click()
  const inLitres = page.getByRole('region', {
    name: /2025: Used mineral hydraulic fluid, in litres/,
  })
  await inLitres.getByRole('button', { name: /^In, 2025: 2,441\.6 litres/ }).waitFor()

  const downloading = page.waitForEvent('download')
  await page.getByRole('button', { name: 'Totals as CSV' }).click()
  const rows = parse<Record<string, string>>(
    readFileSync(await (await downloading).path(), 'utf8'),
    {
      bom: true,
      columns: true,
    },
  )
  const year = rows.find(
    (row) => row['row'] === 'year' && row['stream'] === 'Used mineral hydraulic fluid',
  )
  expect(year).toMatchObject({ unit: 'L', in: '2441.6' })

  await page.getByRole('button', { name: 'Check it now' }).click()
  await page.getByText(/The book is sound: \d+ movements, \d+ accounts/).waitFor()
  await expectClean()

  await page.goto('/pickups')
  await page
    .getByRole('link', { name: /^P-S1-25-/ })
    .first()
    .waitFor()
  expect(await page.getByRole('button', { name: 'Plan a pickup' }).count()).toBe(0)
  await page.goto('/setup/sites')
  await page.getByRole('link', { name: /S1/ }).waitFor()
  expect(await page.getByRole('button', { name: 'Add a site' }).count()).toBe(0)
  await expectClean()
  expect(complaints).toEqual([])
  await close()
})
