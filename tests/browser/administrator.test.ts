import type { Browser } from 'playwright-core'
import { openChromium, phone, visit, wide, findViolations } from './browser'
import { startProduct, type Product } from './product'
import { signInAs } from './sign-in-as'

let browser: Browser
let product: Product | undefined
beforeAll(async () => {
  browser = await openChromium()
})
afterEach(() => product?.remove())
afterAll(() => browser.close())

test('an administrator adds, changes, retires and brings back; a hauler gets a permit', async () => {
  product = await startProduct()
  const { page, complaints, expectClean, close } = await signInAs(browser, product.url, 'kit', wide)
  await page.goto('/setup')
  await expectClean()

  // A container: refused at the field first, then made, changed, retired and brought back.
  await page.getByRole('link', { name: 'Containers', exact: true }).last().click()
  await page.getByRole('button', { name: 'Add a container' }).click()
  await page.getByLabel('Code').fill('c 999')
  await page.getByLabel('Capacity', { exact: true }).fill('a lot')
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  await page.getByRole('link', { name: /Use capitals, digits and dashes/ }).waitFor()
  await expectClean()
  expect(await page.getByLabel('Code').inputValue()).toBe('c 999')
  await page.getByLabel('Code').fill('C-999')
  await page.getByLabel('Capacity', { exact: true }).fill('208 L')
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  await page.getByRole('link', { name: 'C-999' }).click()
  await page.getByLabel(/^Place/).fill('By the gate')
  await expectClean()
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  await page.getByRole('link', { name: 'C-999' }).click()
  expect(await page.getByLabel(/^Place/).inputValue()).toBe('By the gate')
  await page.getByRole('button', { name: 'Retire' }).click()
  await page.getByRole('button', { name: 'Bring it back' }).click()
  await page.getByRole('button', { name: 'Retire' }).waitFor()

  // What is not empty is not retired.
  await page.goto('/setup/containers')
  await page.getByRole('link', { name: 'C-101' }).click()
  await page.getByRole('button', { name: 'Retire' }).click()
  await page.getByText('It is not empty in the book').waitFor()

  await page.goto('/setup/haulers')
  await page.getByRole('link', { name: 'Oxlip Waste Carriers' }).click()
  await page.getByLabel('Permit number').fill('DEMO-CB-0500')
  await page.getByLabel('First day').fill('2027-01-01')
  await page.getByLabel('Last day').fill('2030-12-31')
  await expectClean()
  await page.getByRole('button', { name: 'Add the permit' }).click()
  await page.getByText(/DEMO-CB-0500: Fri 1 Jan 2027 to Tue 31 Dec 2030/).waitFor()

  await page.goto('/setup/people/new')
  await page.getByLabel('Name').fill('Orla Brandish')
  await page.getByLabel('E-mail').fill('orla@quillbrook.example.com')
  await page.getByLabel('First password').fill('a long enough word')
  await expectClean()
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  await page.getByRole('link', { name: 'Orla Brandish' }).waitFor()

  // An own limit rule.
  await page.goto('/books/limits/rules')
  await page.getByRole('heading', { name: 'Bulk packaging' }).waitFor()
  await expectClean()
  await page.getByRole('button', { name: 'Write an own rule' }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel('Name of the rule').fill('On hand in the yard')
  await dialog.getByLabel('Limit', { exact: true }).fill('100')
  await dialog.getByLabel('Where it is written').fill('Company rule, yard manual 5.1')
  await expectClean()
  await dialog.getByRole('button', { name: 'Save the rule' }).click()
  await page.getByRole('heading', { name: 'On hand in the yard' }).waitFor()
  await page.goto('/books/limits')
  await page.getByRole('link', { name: 'On hand in the yard' }).waitFor()
  expect(complaints).toEqual([])
  await close()
})

test('an empty product asks for the company and its first administrator', async () => {
  product = await startProduct({ isEmpty: true })
  const { page, complaints, close } = await visit(browser, product.url, phone)
  await page.goto('/')
  await page.getByRole('heading', { name: 'Set up Ebbmark' }).waitFor()
  expect(await findViolations(page)).toEqual([])
  await page.getByLabel('Company', { exact: true }).fill('Invented Yard')
  await page.getByLabel('Company phone').fill('555-0100')
  await page.getByLabel('Your name').fill('Ada Invented')
  await page.getByLabel('Your e-mail').fill('ada@book.example.org')
  await page.getByLabel('Password').fill('a long enough word')
  await page.getByRole('button', { name: 'Make the company' }).click()
  await page.waitForURL((address) => address.pathname !== '/sign-in')
  await page.goto('/setup/sites/new')
  await page.getByLabel('Code').fill('Y1')
  await page.getByLabel('Name').fill('First yard')
  await page.getByLabel('Time zone').selectOption('America/Denver')
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  await page.getByRole('link', { name: /Y1/ }).waitFor()
  expect(complaints).toEqual([])
  await close()
})
