import type { Browser } from 'playwright-core'
import { openChromium, phone } from './browser'
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

test('a technician logs a drain on a phone, finds it in the list and amends it', async () => {
  const { page, complaints, expectClean, close } = await signInAs(
    browser,
    product.url,
    'ines',
    phone,
  )
  await page.getByRole('heading', { name: 'Yard', level: 1 }).waitFor()
  await expectClean()
  await page.screenshot({ path: 'tests/browser/phone.png', scale: 'css' })

  // Machine, container, volume on the keypad, and the room left beside it.
  await page.getByRole('button', { name: 'Log a drain' }).click()
  await page.getByRole('button', { name: /From machine/ }).click()
  await page.getByRole('button', { name: /M-04/ }).first().click()
  await page.getByRole('button', { name: /Into container.*C-101/ }).waitFor()
  for (const key of ['4', 'Decimal point', '5']) {
    await page.getByRole('button', { name: key, exact: true }).click()
  }
  await page.getByRole('img', { name: /C-101: .* after this drain/ }).waitFor()
  await page
    .getByText(/Room left 14\.\d\sgal/)
    .first()
    .waitFor()
  await page.getByRole('button', { name: /Add filters/ }).click()
  await page.getByRole('button', { name: 'One more: Small filters' }).click()
  await page.getByLabel(/Oily absorbents, in/).fill('0.4')
  await expectClean()
  await page.getByRole('button', { name: /Save 4\.5\sgal/ }).click()
  await page.getByRole('heading', { name: /Saved 4\.5\sgal/ }).waitFor()
  await expectClean()

  // It is in the list, and the container's level has risen.
  await page.goto('/containers/C-101')
  await page
    .getByText(/246\.\d\sgal of/)
    .first()
    .waitFor()
  await page.goto('/drains')
  const newest = page.getByRole('link', { name: /D-26-\d+, M-04.*C-101, 4\.5\sgal/ }).first()
  await newest.waitFor()
  await expectClean()
  await newest.click()
  await page.getByRole('heading', { name: /^Drain D-26-\d{4}/, level: 1 }).waitFor()
  await expectClean()

  // The old value stays, struck through, with the reason.
  await page.getByRole('button', { name: 'Amend' }).click()
  const volume = page.getByLabel(/Volume drained, in gallons/)
  await volume.fill('5.5')
  await page.getByText('Mistyped', { exact: true }).click()
  await expectClean()
  await page.getByRole('button', { name: 'Save the amendment' }).click()
  await page.getByRole('heading', { name: /^Drain D-26-\d{4}/, level: 1 }).waitFor()
  await page
    .getByText(/5\.5\sgal/)
    .first()
    .waitFor()
  const old = page.getByText(/4\.5\sgal/).first()
  await old.waitFor()
  expect(await old.evaluate((element) => getComputedStyle(element).textDecorationLine)).toContain(
    'line-through',
  )
  await expectClean()
  expect(complaints).toEqual([])
  await close()
})
