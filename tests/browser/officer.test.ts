import type { Browser, Page } from 'playwright-core'
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

async function draw(page: Page): Promise<void> {
  const pad = page.getByRole('img', { name: 'Signature' })
  await pad.scrollIntoViewIfNeeded()
  const box = await pad.boundingBox()
  if (box === null) throw new Error('there is nothing to sign on')
  const at = (x: number, y: number) => [box.x + box.width * x, box.y + box.height * y] as const
  await page.mouse.move(...at(0.2, 0.7))
  await page.mouse.down()
  for (const [x, y] of [
    [0.3, 0.2],
    [0.4, 0.8],
    [0.5, 0.3],
    [0.7, 0.6],
  ] as const) {
    await page.mouse.move(...at(x, y), { steps: 4 })
  }
  await page.mouse.up()
}

test('an officer plans, issues, signs, receives and settles a pickup', async () => {
  const { page, complaints, expectClean, close } = await signInAs(
    browser,
    product.url,
    'odile',
    wide,
  )

  // Containers by room and by age, with their level.
  await page.goto('/containers')
  await page.getByRole('img', { name: /C-101: .* room left/ }).waitFor()
  await expectClean()
  await page.getByText('Oldest').click()
  await page.getByRole('link', { name: 'C-101' }).waitFor()

  // A plan that names no hauler says what is missing.
  await page.goto('/pickups')
  await expectClean()
  await page.getByRole('button', { name: 'Plan a pickup' }).click()
  await page.getByRole('checkbox', { name: /^C-101/ }).check()
  await expectClean()
  await page.getByRole('button', { name: 'Save the plan' }).click()
  await page.getByText('Choose a hauler', { exact: true }).waitFor()
  await expectClean()
  expect(await page.getByRole('button', { name: 'Issue the manifest' }).isDisabled()).toBe(true)

  await page.getByRole('link', { name: 'Change the plan' }).click()
  await page.getByLabel('Hauler').selectOption({ label: 'Sallowmere Tankers' })
  await page.getByLabel('Receiving facility').selectOption({ label: 'Cinderholt Re-refinery' })
  await page.getByRole('button', { name: 'Save the plan' }).click()
  await page.getByText(/Nothing is missing/).waitFor()
  await page.getByRole('button', { name: 'Issue the manifest' }).click()
  await page.getByRole('heading', { level: 1, name: /^P-S1-\d\d-\d{3}-[0-9A-Z]$/ }).waitFor()
  await expectClean()

  // The paper opens by a link of its own.
  const opening = page.context().waitForEvent('page')
  await page.getByRole('button', { name: 'Open manifest, revision 1' }).click()
  const paper = await opening
  await paper.waitForURL(/\/api\/documents\/.+\/file\?ticket=/)
  const bytes = await (await page.request.get(paper.url())).body()
  expect(bytes.subarray(0, 5).toString()).toBe('%PDF-')
  await paper.close()

  // Both parties sign on screen.
  await page.getByRole('checkbox', { name: /I have read this manifest/ }).check()
  await draw(page)
  await expectClean()
  await page.getByRole('button', { name: 'Sign for the site' }).click()
  await page.getByText('At the gate').first().waitFor()
  await page.getByLabel('Name', { exact: true }).fill('Rafe Undset')
  await page.getByText('Typed name', { exact: true }).click()
  await page.getByRole('checkbox', { name: /I have read this manifest/ }).check()
  await page.getByRole('button', { name: 'Sign as driver' }).click()
  await page.getByText('Signed out').first().waitFor()
  await page.getByRole('button', { name: 'Open signed manifest, revision 2' }).waitFor()

  // Less received than the rule allows, and why.
  await page.getByLabel('Received from C-101').fill('200 gal')
  await page.getByRole('button', { name: 'Enter received quantities' }).click()
  await page.getByText('Received differs from shipped').waitFor()
  await expectClean()
  await page.getByRole('button', { name: 'Settle the pickup' }).click()
  await page.getByText('Choose why the quantities differ').waitFor()
  await page.getByLabel('Cause').selectOption({ label: 'Free water decanted' })
  await page.getByLabel('What was found').fill('The facility let water off before gauging')
  await page.getByRole('button', { name: 'Settle the pickup' }).click()
  await page
    .getByText(/The facility let water off/)
    .first()
    .waitFor()
  await page.getByText('Settled', { exact: true }).first().waitFor()
  await expectClean()

  // The container is empty in the book, and the mail went to the local mailbox.
  await page.goto('/containers/C-101')
  await page.getByText(/^0\.0\sgal of/).waitFor()
  await expectClean()
  await page.goto('/mailbox')
  await page
    .getByRole('heading', { name: /Manifest P-S1-.* is signed/ })
    .first()
    .waitFor()
  await expectClean()
  expect(complaints).toEqual([])
  await close()
})

test('an officer voids a manifest, which keeps its number, and reviews a flag', async () => {
  const { page, complaints, expectClean, close } = await signInAs(
    browser,
    product.url,
    'odile',
    wide,
  )
  await page.getByLabel('Site', { exact: true }).selectOption({ label: 'Osk Landing workshop' })
  await page.goto('/pickups')
  const ready = page.getByRole('link', { name: /^P-S2-/ }).first()
  await page.getByRole('heading', { name: 'Ready', level: 2 }).waitFor()
  const number = await ready.textContent()
  await ready.click()
  await page.getByRole('button', { name: `Void manifest ${number}` }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel('Reason').fill('The truck broke down')
  await expectClean()
  await dialog.getByRole('button', { name: `Void manifest ${number}` }).click()
  await page.getByText('Voided', { exact: true }).first().waitFor()
  await page.getByRole('heading', { level: 1, name: number ?? '' }).waitFor()
  await page.getByRole('button', { name: /Open void manifest/ }).waitFor()

  await page.goto('/books/limits')
  await expectClean()
  await page.getByRole('link', { name: 'On hand at Osk Landing' }).first().click()
  await page.getByRole('region', { name: /The working/ }).waitFor()
  await page
    .getByText(/For review under Company rule/)
    .first()
    .waitFor()
  await page.getByLabel('What was found and decided').fill('A pickup is planned for Friday')
  await expectClean()
  await page.getByRole('button', { name: 'Mark as reviewed' }).click()
  await page
    .getByText(/A pickup is planned for Friday/)
    .first()
    .waitFor()
  await page.getByText('Reviewed', { exact: true }).first().waitFor()
  expect(complaints).toEqual([])
  await close()
})
