import { parse } from 'csv-parse/sync'
import type { Totals } from '@/shared/contracts/books'
import { drainBody, signInAs, aContainer, aMachine, aSite, type Member } from '../helpers/factories'
import { expectDone, type PickupYard } from '../helpers/pickups'
import { aSmallYear } from '../helpers/small-year'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let yard: PickupYard
let auditor: Member

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
  const world = await aSmallYear(product)
  yard = world.yard
  auditor = world.auditor
})
afterAll(() => product.close())

type Row = Record<string, string>

/** Read back by another library than the one that wrote it. */
async function csv(path: string, by = auditor): Promise<Row[]> {
  const reply = await by.get(path).buffer(true)
  expect(reply.status).toBe(200)
  expect(reply.headers['content-type']).toBe('text/csv; charset=utf-8')
  expect(reply.headers['content-disposition']).toMatch(
    /^attachment; filename="ebbmark-[\w-]+\.csv"$/,
  )
  expect(reply.text.startsWith('\ufeff')).toBe(true)
  return parse(reply.text, { columns: true, bom: true })
}

describe('totals as CSV', () => {
  test.each([
    ['stream', 'gal_us'],
    ['container', 'L'],
    ['hauler', 'gal_us'],
    ['facility', 'kg'],
  ])('by %s in %s are what the screen shows, row by row', async (by, unit) => {
    const query = `year=2025&by=${by}&unit=${unit}`
    const rows = await csv(`/books/totals.csv?${query}`)
    const totals = expectDone(await auditor.get(`/books/totals?${query}`)) as Totals
    const shown = [...totals.groups, ...(totals.allFluids === null ? [] : [totals.allFluids])]
    // Opening, twelve months and the year of each group.
    expect(rows).toHaveLength(shown.length * 14)
    shown.forEach((group, index) => {
      const own = rows.slice(index * 14, index * 14 + 14)
      expect(own[0]).toMatchObject({ row: 'opening', closing: group.opening.shown })
      expect(
        own.slice(1, 13).map((row) => [row['row'], row['in'], row['out_exact'], row['closing']]),
      ).toEqual(
        group.months.map(({ month, in: inward, out, closing }) => [
          month,
          inward.shown,
          out.exact,
          closing.shown,
        ]),
      )
      expect(own[13]).toMatchObject({
        row: 'year',
        unit: group.unit,
        adjusted: group.total.adjusted.shown,
        closing_exact: group.closing.exact,
      })
    })
  })

  test('keep a figure below zero a figure', async () => {
    const rows = await csv('/books/totals.csv?year=2025&by=hauler')
    expect(rows.find(({ row }) => row === 'year')?.['adjusted']).toBe('-2.0')
  })
})

describe('lines as CSV', () => {
  test('hold everything a stranger needs to add the year up again', async () => {
    const rows = await csv('/books/lines.csv?year=2025')
    const totals = expectDone(await auditor.get('/books/totals?year=2025')) as Totals
    const millionths = (millilitres: string) => Math.round(Number(millilitres) * 1e6)
    for (const group of totals.groups.filter(({ kind }) => kind === 'fluid')) {
      const own = rows.filter(
        (row) => row['stream'] === group.streamName && row['counts_as'] === 'drain',
      )
      const added = own.reduce(
        (sum, row) =>
          sum + (row['reverses_line'] === '' ? 1 : -1) * millionths(row['volume_ml'] ?? ''),
        0,
      )
      expect([group.label, added]).toEqual([
        group.label,
        Math.round(Number(group.total.in.exact) * 1e9),
      ])
    }
  })

  test('say when, with the offset of the site, and what was typed', async () => {
    const rows = await csv('/books/lines.csv?year=2025')
    const typed = rows.find(({ entered }) => entered === '30.05')
    expect(typed).toMatchObject({
      site: yard.site.code,
      occurred_on: '2025-01-31',
      occurred_at: '2025-01-31T23:59:00-06:00',
      recorded_at: '2025-03-10T13:00:00-05:00',
      entered_unit: 'gal_us',
      volume_ml: '113751.6241092',
      method: 'marked-pail',
      estimate: 'no',
      reverses_line: '',
    })
    expect(typed?.['sha256']).toMatch(/^[0-9a-f]{64}$/)
    const numbers = rows.map((row) => `${row['occurred_on']} ${row['line_no']?.padStart(6, '0')}`)
    expect(numbers).toEqual([...numbers].sort())
  })

  test('leave out what happened in another year at the site', async () => {
    const eve = await csv('/books/lines.csv?year=2024')
    expect(eve.map(({ occurred_at }) => occurred_at)).toEqual(['2024-12-31T23:30:00-06:00'])
  })

  test.each(['=HYPERLINK("http://evil.example.org")', '+1+cmd', '-2+3', '@SUM(A1)', '\uff1dA1'])(
    'a note of %s is no formula',
    async (note) => {
      const site = await aSite(product)
      const technician = await signInAs(product, site.organisation, 'technician', [site.id])
      const container = await aContainer(site)
      const machine = await aMachine(site, { reservoir: null, system: null })
      const body = drainBody(site, { machine, container })
      const drain = expectDone(await technician.post('/drains', body)) as { id: string }
      const strike = { expectedRevision: 1, reason: note }
      expectDone(await technician.post(`/drains/${drain.id}/strike`, strike))
      const reader = await signInAs(product, site.organisation, 'auditor')
      const rows = await csv('/books/lines.csv?year=2025', reader)
      expect(rows.map((row) => row['note'])).toEqual(['', `'${note}`])
    },
  )

  test('hold the lines of sites one may see', async () => {
    const { organisation } = yard.site
    const other = await aSite(product, { organisation })
    const officer = await signInAs(product, organisation, 'officer', [other.id])
    expect(await csv('/books/lines.csv?year=2025', officer)).toEqual([])
    const refused = await officer.get(`/books/lines.csv?year=2025&siteId=${yard.site.id}`)
    expect(refused.status).toBe(404)
  })
})
