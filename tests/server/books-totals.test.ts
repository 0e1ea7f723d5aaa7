import type { Totals, TotalsGroup } from '@/shared/contracts/books'
import { signInAs, type Member } from '../helpers/factories'
import { aPickupYard, expectDone, type PickupYard, type Place } from '../helpers/pickups'
import { aSmallYear } from '../helpers/small-year'
import { testApp, type TestApp } from '../helpers/test-app'

/** Every figure below was added by hand, in gallons of 3.785411784 L. */
let product: TestApp
let yard: PickupYard
let auditor: Member
let tote: Place
let drum: Place

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
  const world = await aSmallYear(product)
  yard = world.yard
  tote = world.tote
  drum = world.drum
  auditor = world.auditor
})
afterAll(() => product.close())

async function read(more: string, by = auditor): Promise<Totals> {
  return expectDone(await by.get(`/books/totals?year=2025${more}`)) as Totals
}

/** The group of a stream or holder, as shown: opening, closing, and what moved in the months where something did. */
function told(totals: Totals, label: string, stream?: string) {
  const group = totals.groups.find(
    (one) => one.label === label && (stream === undefined || one.streamName === stream),
  )
  if (group === undefined) throw new Error(`no group ${label}`)
  const moved = group.months.filter(
    ({ in: inward, out, adjusted }) => inward.lineCount + out.lineCount + adjusted.lineCount > 0,
  )
  return {
    opening: group.opening.shown,
    months: moved.map(({ month, in: inward, out, adjusted }) =>
      [month, inward.shown, out.shown, adjusted.shown].join(' '),
    ),
    closing: group.closing.shown,
  }
}

const mineral = 'Used mineral hydraulic fluid'

describe('totals by stream', () => {
  test("are cut at the site's midnight, count what was corrected once, and leave transfers out", async () => {
    const totals = await read('')
    expect(told(totals, mineral)).toEqual({
      opening: '10.0',
      // 20 + 30.05, rounded half to even once: 50.05 is kept exact below. The tote's 62.05 leave, the drum's 4 stay.
      months: ['2025-01 50.0 0.0 0.0', '2025-02 6.0 0.0 0.0', '2025-03 0.0 62.0 0.0'],
      closing: '4.0',
    })
    expect(told(totals, 'Used ester fluid')).toEqual({
      opening: '0.0',
      months: ['2025-02 8.0 0.0 0.0'],
      closing: '8.0',
    })
  })

  test('are exact behind what is shown', async () => {
    const [group] = (await read('')).groups
    const january = group?.months[0]
    // 50.05 x 3.785411784
    expect(january?.in).toEqual({ exact: '189.4598597892', shown: '50.0', lineCount: 2 })
    // 5 in, 5 mirrored, 6 in; 7 in, 7 mirrored.
    expect(group?.months[1]?.in).toMatchObject({ exact: '22.712470704', lineCount: 5 })
    expect(group?.closing.exact).toBe('15.141647136')
  })

  test('come in litres and, with the density named, in kilograms', async () => {
    expect(told(await read('&unit=L'), mineral).months[0]).toBe('2025-01 189.5 0.0 0.0')
    const weighed = await read('&unit=kg')
    // 189.4598597892 L x 0.875 kg/L
    expect(told(weighed, mineral).months[0]).toBe('2025-01 166 0 0')
    expect(weighed.groups[0]).toMatchObject({ unit: 'kg', decimals: 0, densityUsed: '0.875' })
  })

  test('count filters in pieces and weigh absorbents', async () => {
    const totals = await read('')
    expect(told(totals, 'Spent filters').months).toEqual(['2025-02 2 0 0'])
    expect(told(totals, 'Oily absorbents').months).toEqual(['2025-02 1.2 0.0 0.0'])
    expect(totals.drainCounts.slice(0, 3)).toEqual([
      { month: '2025-01', count: 2, filters: 0, absorbentKilograms: '0' },
      { month: '2025-02', count: 2, filters: 2, absorbentKilograms: '1.2' },
      { month: '2025-03', count: 0, filters: 0, absorbentKilograms: '0' },
    ])
  })

  test('say which share rests on estimates', async () => {
    const [group] = (await read('')).groups
    // 20 of 56.05 gal
    expect(group?.estimatePercent).toBe('35.7')
  })

  test('add the fluids up, and say when rounding shows', async () => {
    const totals = await read('')
    expect(totals.allFluids?.total.in.exact).toBe('242.4556247652')
    expect(totals.allFluids?.closing.shown).toBe('12.0')
    // 50.0 and 6.0 are shown for 50.05 and 6, and 56.0 for their sum: half goes to even twice.
    expect(totals.roundingShows).toBe(false)
    // 166 and 20 kg are shown for 165.8 and 19.9, 186 for their sum; with the ester's 28 that is 213.5, shown as 214.
    expect((await read('&unit=kg')).roundingShows).toBe(false)
  })
})

test('totals by container count transfers on both sides', async () => {
  const totals = await read('&by=container')
  expect(told(totals, tote.code)).toEqual({
    opening: '10.0',
    months: ['2025-01 50.0 0.0 0.0', '2025-02 6.0 4.0 0.0', '2025-03 0.0 62.0 0.0'],
    closing: '0.0',
  })
  expect(told(totals, drum.code)).toEqual({
    opening: '0.0',
    months: ['2025-02 4.0 0.0 0.0'],
    closing: '4.0',
  })
})

test('totals by hauler: what left came in, what arrived went out, the rest is adjusted to nothing', async () => {
  expect(told(await read('&by=hauler'), yard.hauler.name)).toEqual({
    opening: '0.0',
    months: ['2025-03 62.0 60.0 -2.0'],
    closing: '0.0',
  })
  expect(told(await read('&by=facility'), yard.facility.name)).toEqual({
    opening: '0.0',
    months: ['2025-03 60.0 0.0 0.0'],
    closing: '60.0',
  })
})

test('the year before holds what was poured in the last half hour of it', async () => {
  const totals = expectDone(await auditor.get('/books/totals?year=2024')) as Totals
  expect(told(totals, mineral)).toEqual({
    opening: '0.0',
    months: ['2024-12 10.0 0.0 0.0'],
    closing: '10.0',
  })
  const years = expectDone(await auditor.get('/books/years')) as { years: number[] }
  expect(years.years).toEqual([2025, 2024])
})

test('in every group opening + in - out + adjusted is closing, month after month, to the last digit', async () => {
  for (const by of ['stream', 'container', 'hauler', 'facility']) {
    for (const group of (await read(`&by=${by}`)).groups) expectToBalance(group)
  }
})

/** Figures of numeric(38,18) in whole units of 10^-18. */
function whole(exact: string): bigint {
  const [digits = '', decimals = ''] = exact.split('.')
  return BigInt(digits + decimals.padEnd(18, '0'))
}

function expectToBalance(group: TotalsGroup): void {
  let standing = whole(group.opening.exact)
  for (const { month, in: inward, out, adjusted, closing } of group.months) {
    standing += whole(inward.exact) - whole(out.exact) + whole(adjusted.exact)
    expect([group.label, month, standing]).toEqual([group.label, month, whole(closing.exact)])
  }
  expect(standing).toBe(whole(group.closing.exact))
}

describe('who may read totals', () => {
  test('officers read their sites, technicians none', async () => {
    const { organisation } = yard.site
    const other = await aPickupYard(product, { organisation })
    expect((await read('', other.officer)).groups).toEqual([])
    const refused = await other.officer.get(`/books/totals?year=2025&siteId=${yard.site.id}`)
    expect(refused.status).toBe(404)
    const technician = await signInAs(product, organisation, 'technician', [yard.site.id])
    expect((await technician.get('/books/totals?year=2025')).status).toBe(403)
  })

  test('another organisation sees nothing of it', async () => {
    const stranger = await aPickupYard(product)
    const reader = await signInAs(product, stranger.site.organisation, 'auditor')
    expect((await read('', reader)).groups).toEqual([])
    expect((await reader.get(`/books/totals?year=2025&siteId=${yard.site.id}`)).status).toBe(404)
  })
})
