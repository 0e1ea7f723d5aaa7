import type { BookLine, Totals } from '@/shared/contracts/books'
import type { Member } from '../helpers/factories'
import { expectDone, type PickupYard, type Place } from '../helpers/pickups'
import { aSmallYear } from '../helpers/small-year'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let yard: PickupYard
let auditor: Member
let tote: Place

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
  const world = await aSmallYear(product)
  yard = world.yard
  auditor = world.auditor
  tote = world.tote
})
afterAll(() => product.close())

type Lines = { rows: BookLine[]; next: string | null; sum: string; lineCount: number }

async function lines(query: string, by = auditor): Promise<Lines> {
  return expectDone(await by.get(`/books/lines?year=2025&${query}`)) as Lines
}

async function totals(by: string): Promise<Totals> {
  return expectDone(await auditor.get(`/books/totals?year=2025&by=${by}`)) as Totals
}

/** Figures of numeric(38,18) in whole units of 10^-18. */
function whole(exact: string): bigint {
  const [digits = '', decimals = ''] = exact.replace('-', '').split('.')
  const size = BigInt(digits + decimals.padEnd(18, '0'))
  return exact.startsWith('-') ? -size : size
}

test.each(['stream', 'container', 'hauler', 'facility'])(
  'every figure by %s opens to lines that add up to it',
  async (by) => {
    const { groups } = await totals(by)
    expect(groups.length).toBeGreaterThan(0)
    for (const group of groups) {
      const figures = [
        ['opening', undefined, group.opening],
        ...group.months.flatMap(({ month, in: inward, out, adjusted, closing }) => [
          ['in', month, inward],
          ['out', month, out],
          ['adjusted', month, adjusted],
          ['closing', month, closing],
        ]),
        ['in', undefined, group.total.in],
        ['out', undefined, group.total.out],
        ['closing', undefined, group.closing],
      ] as [string, string | undefined, { exact: string; lineCount: number }][]
      for (const [side, month, figure] of figures) {
        // Months in which nothing moved are many: what they stand at is looked at once.
        if (figure.lineCount === 0 || (month !== undefined && month > '2025-04')) continue
        const query = `by=${by}&groupId=${group.id}&side=${side}${month ? `&month=${month}` : ''}`
        const { rows, sum, lineCount } = await lines(`${query}&limit=200`)
        const added = rows.reduce((total, { counted }) => total + whole(counted), 0n)
        expect({ by, label: group.label, side, month, sum, added, lineCount }).toEqual({
          by,
          label: group.label,
          side,
          month,
          sum: figure.exact,
          added: whole(figure.exact),
          lineCount: figure.lineCount,
        })
      }
    }
  },
)

test('the lines of all fluids leave filters and absorbents out', async () => {
  const { allFluids } = await totals('stream')
  const found = await lines('groupId=all-fluids&side=in&month=2025-02')
  expect(found.lineCount).toBe(allFluids?.months[1]?.in.lineCount)
  expect(found.sum).toBe(allFluids?.months[1]?.in.exact)
})

test('a line says what was typed, where it went, and what it undoes', async () => {
  const group = (await totals('stream')).groups[0]
  const { rows } = await lines(`groupId=${group?.id}&side=in&month=2025-02`)
  const five = rows.filter(({ entered }) => entered?.value === '5')
  expect(five).toMatchObject([
    { to: tote.code, litres: '18.92705892', counted: '18.92705892', isReversed: true },
    { from: tote.code, counted: '-18.92705892', isReversal: true, countsAs: 'drain' },
  ])
  expect(five[0]?.drain?.number).toMatch(/^D-25-\d{4}$/)
  const out = await lines(`groupId=${group?.id}&side=out`)
  expect(out.rows).toMatchObject([
    { from: tote.code, to: yard.hauler.name, reason: 'shipment', occurredOn: '2025-03-10' },
  ])
  expect(out.rows[0]?.pickup?.number).not.toBeNull()
})

test('pages meet without a gap, and the sum is that of all of them', async () => {
  const query = 'side=in&limit=2'
  const seen: string[] = []
  const first = await lines(query)
  let page = first
  for (;;) {
    seen.push(...page.rows.map(({ movementId }) => movementId))
    expect([page.sum, page.lineCount]).toEqual([first.sum, first.lineCount])
    if (page.next === null) break
    page = await lines(`${query}&cursor=${page.next}`)
  }
  expect(seen).toHaveLength(first.lineCount)
  expect(new Set(seen).size).toBe(first.lineCount)
  const all = await lines('side=in&limit=200')
  expect(seen).toEqual(all.rows.map(({ movementId }) => movementId))
})

test.each([
  ['year=1700', 'year'],
  ['year=2025&side=sideways', 'side'],
  ['year=2025&month=2025-13', 'month'],
  ['year=2025&limit=0', 'limit'],
])('what cannot be asked (%s) is refused by name', async (query, field) => {
  const reply = await auditor.get(`/books/lines?${query}`)
  expect(reply.status).toBe(400)
  expect(reply.body.fields.map(({ path }: { path: string }) => path)).toEqual([`query.${field}`])
})

test('the book can be checked by who reads it', async () => {
  const checked = expectDone(await auditor.get('/books/check')) as Record<string, unknown>
  expect(checked).toMatchObject({ findings: [], checkedAt: '2025-03-10T18:00:00.000Z' })
  expect(checked['movements']).toBeGreaterThan(10)
})
