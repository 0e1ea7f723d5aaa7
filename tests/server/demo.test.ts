import request from 'supertest'
import { sql } from 'drizzle-orm'
import { asService } from '@/db/tenancy'
import { demoInfo, demoPassword } from '@/server/demo/demo-people'
import { makeDemo } from '@/server/demo/make-demo'
import { openDemo } from '@/server/demo/open-demo'
import type { Flag } from '@/shared/contracts/limits'
import type { Pickup, PickupRow } from '@/shared/contracts/pickups'
import type { Totals } from '@/shared/contracts/books'
import type { Mark } from '@/shared/contracts/values'
import { bookFindings } from '../helpers/book'
import { aSite } from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

/** The year as its author tells it: drains, volume in and volume out of each site; filters and absorbents of all. */
const told = `
  Jan | 3  | 43.0  | 0.0   | 1  | 2.0   | 0.0   | 7  | 243.0  | 0.0    | 7   | 6.2
  Feb | 2  | 5.0   | 0.0   | 2  | 77.0  | 0.0   | 7  | 281.0  | 0.0    | 8   | 4.8
  Mar | 9  | 122.5 | 0.0   | 4  | 172.5 | 0.0   | 3  | 162.5  | 673.5  | 22  | 10.4
  Apr | 6  | 55.5  | 206.4 | 0  | 0.0   | 0.0   | 3  | 66.0   | 0.0    | 8   | 5.2
  May | 5  | 70.0  | 0.0   | 2  | 58.0  | 243.8 | 2  | 144.0  | 0.0    | 12  | 3.5
  Jun | 2  | 41.5  | 0.0   | 1  | 1.5   | 0.0   | 1  | 31.0   | 0.0    | 4   | 1.1
  Jul | 1  | 1.5   | 0.0   | 1  | 2.5   | 0.0   | 1  | 12.5   | 0.0    | 1   | 2.0
  Aug | 2  | 13.5  | 0.0   | 2  | 170.0 | 0.0   | 2  | 136.5  | 0.0    | 10  | 3.6
  Sep | 4  | 50.0  | 192.8 | 1  | 9.0   | 0.0   | 2  | 30.0   | 0.0    | 6   | 3.7
  Oct | 9  | 147.5 | 0.0   | 3  | 59.0  | 249.4 | 2  | 120.5  | 0.0    | 17  | 11.8
  Nov | 8  | 36.0  | 0.0   | 1  | 2.5   | 0.0   | 6  | 323.0  | 734.5  | 10  | 9.5
  Dec | 4  | 59.0  | 243.6 | 3  | 178.0 | 232.2 | 5  | 106.0  | 237.5  | 9   | 6.7
  Year| 55 | 645.0 | 642.7 | 21 | 732.0 | 725.4 | 41 | 1656.0 | 1645.5 | 114 | 68.5`
  .trim()
  .split('\n')
  .map((row) =>
    row
      .split('|')
      .slice(1)
      .map((cell) => cell.trim()),
  )

const months = 12

async function signedIn(product: TestApp, email: string) {
  const reply = await request(product.app)
    .post('/api/session')
    .send({ email, password: demoPassword })
  expect(reply.status).toBe(200)
  return async <T>(path: string): Promise<T> => {
    const found = await request(product.app)
      .get(`/api${path}`)
      .set('Authorization', `Bearer ${reply.body.accessToken}`)
    expect({ path, status: found.status, body: found.body }).toMatchObject({ status: 200 })
    return found.body as T
  }
}

async function counts(product: TestApp) {
  const { rows } = (await asService(product.opened.db, (tx) =>
    tx.execute(sql`select (select count(*)::int from movements) as lines, (select count(*)::int from audit) as acts,
      (select count(*)::int from people) as people, (select count(*)::int from documents) as documents`),
  )) as unknown as { rows: Record<string, number>[] }
  return rows[0]
}

describe('the fixed year of the demo company', () => {
  let product: TestApp
  let get: <T>(path: string) => Promise<T>
  let sites: Record<string, string>

  beforeAll(async () => {
    // Sign-in looks at the machine's own clock.
    product = await testApp({ now: new Date().toISOString() })
    const until = new Date('2026-03-31T12:00:00Z')
    expect(await makeDemo(product.opened.db, product.services, { until })).toBe(true)
    get = await signedIn(product, 'sefa@quillbrook.example.com')
    const { rows } = await get<{ rows: { id: string; code: string }[] }>('/sites')
    sites = Object.fromEntries(rows.map(({ code, id }) => [code, id]))
  })
  afterAll(() => product.close())

  /** A site's row of the table, cell by cell: count, in, out. */
  async function rowsOf(site: string, unit: 'gal_us' | 'L'): Promise<string[][]> {
    const totals = await get<Totals>(`/books/totals?year=2025&siteId=${sites[site]}&unit=${unit}`)
    const fluids = totals.groups.filter(({ kind }) => kind === 'fluid')
    const all = totals.allFluids ?? fluids[0]
    if (all === undefined) throw new Error(`${site} has no fluids`)
    const count = totals.drainCounts.map((month) => month.count)
    return [
      ...all.months.map((month, index) => [
        String(count[index]),
        month.in.shown ?? '',
        month.out.shown ?? '',
      ]),
      [
        String(count.reduce((sum, one) => sum + one, 0)),
        all.total.in.shown ?? '',
        all.total.out.shown ?? '',
      ],
    ]
  }

  test.each([
    ['S1', 'gal_us', 0],
    ['S2', 'gal_us', 3],
    ['S3', 'L', 6],
  ] as const)('%s sums to the table, month by month and over the year', async (site, unit, at) => {
    expect(await rowsOf(site, unit)).toEqual(told.map((row) => row.slice(at, at + 3)))
  })

  test('filters and absorbents of all sites sum to the table', async () => {
    const { drainCounts } = await get<Totals>('/books/totals?year=2025')
    expect(
      drainCounts.map((month) => [String(month.filters), Number(month.absorbentKilograms)]),
    ).toEqual(told.slice(0, months).map((row) => [row[9], Number(row[10])]))
    const year = told[months] ?? []
    expect(drainCounts.reduce((sum, month) => sum + month.filters, 0)).toBe(Number(year[9]))
  })

  test('all sites took in 6,868.5 L, and end the year with what is told', async () => {
    const everything = await get<Totals>('/books/totals?year=2025&unit=L')
    expect(everything.allFluids?.total.in.shown).toBe('6868.5')
    const closing = async (site: string) => {
      const totals = await get<Totals>(`/books/totals?year=2025&siteId=${sites[site]}&unit=L`)
      return (totals.allFluids ?? totals.groups[0])?.closing.shown
    }
    expect([await closing('S1'), await closing('S2'), await closing('S3')]).toEqual([
      '8.5',
      '25.1',
      '10.5',
    ])
  })

  test('columns whose shown figures miss their shown total say so', async () => {
    for (const unit of ['gal_us', 'L'] as const) {
      const totals = await get<Totals>(`/books/totals?year=2025&unit=${unit}`)
      const tenths = (shown: string | null) => Math.round(Number(shown) * 10)
      const misses = totals.groups.some(({ months: shown, total }) =>
        (['in', 'out', 'adjusted'] as const).some(
          (side) =>
            shown.reduce((sum, month) => sum + tenths(month[side].shown), 0) !==
            tenths(total[side].shown),
        ),
      )
      expect([unit, misses, totals.roundingShows]).toEqual([unit, true, true])
    }
  })

  test('by stream, container, hauler and facility what closes is what opened, came, left and was adjusted', async () => {
    for (const by of ['stream', 'container', 'hauler', 'facility']) {
      const { groups } = await get<Totals>(`/books/totals?year=2025&by=${by}&unit=L`)
      for (const group of groups.filter(({ kind }) => kind === 'fluid')) {
        const { opening, total, closing } = group
        const millionths = (exact: string) => Math.round(Number(exact) * 1e6)
        expect([by, group.label, millionths(closing.exact)]).toEqual([
          by,
          group.label,
          millionths(opening.exact) +
            millionths(total.in.exact) -
            millionths(total.out.exact) +
            millionths(total.adjusted.exact),
        ])
      }
    }
  })

  test('the book is sound', async () => {
    expect(await bookFindings(product)).toEqual([])
  })

  test('a second start adds nothing', async () => {
    const before = await counts(product)
    const again = { until: new Date('2026-12-01T12:00:00Z'), seed: 'another' }
    expect(await makeDemo(product.opened.db, product.services, again)).toBe(false)
    expect(await openDemo(product.opened.db, product.services)).toEqual(demoInfo)
    expect(await counts(product)).toEqual(before)
  })

  test('the pickup of 27 September came 13.4 per cent short, and was settled with its cause', async () => {
    const { rows } = await get<{ rows: PickupRow[] }>(`/pickups?siteId=${sites.S1}`)
    const row = rows.find(({ plannedOn }) => plannedOn === '2025-09-27')
    const pickup = await get<Pickup>(`/pickups/${row?.id}`)
    expect(pickup).toMatchObject({
      stage: 'settled',
      difference: { percent: '-13.4', exceeds: true },
      settled: { cause: 'free-water-decanted', by: { name: 'Odile Fenwright' } },
    })
    expect(pickup.settled?.note).toContain('lab slip')
    expect(pickup.documents.map(({ kind }) => kind).sort()).toEqual(['manifest', 'signed-manifest'])
  })

  test('a return copy never came, a plan was blocked by a permit, and a signed pickup was voided', async () => {
    const { rows } = await get<{ rows: PickupRow[] }>('/pickups')
    const staged = (plannedOn: string, site: string) =>
      rows.find((row) => row.plannedOn === plannedOn && row.siteCode === site)
    expect(staged('2025-12-30', 'S3')?.stage).toBe('return-due')
    expect(staged('2025-07-02', 'S1')).toMatchObject({ stage: 'voided', number: null })
    const voided = await get<Pickup>(`/pickups/${staged('2025-12-31', 'S2')?.id}`)
    expect(voided).toMatchObject({ stage: 'voided', voided: { by: { name: 'Odile Fenwright' } } })
    expect(voided.signatures).toHaveLength(2)
    expect(voided.number).toMatch(/25-004/)
  })

  test('Osk Landing was over its own 240 gal on 10 October: one flag, reviewed', async () => {
    const { rows } = await get<{ rows: Flag[] }>(`/flags?siteId=${sites.S2}`)
    const own = rows.filter(({ rule, level }) => rule.jurisdiction === 'own' && level === 'limit')
    expect(own).toHaveLength(1)
    expect(own[0]?.state).toBe('reviewed')
    expect(Number(own[0]?.finding.measured).toFixed(1)).toBe('252.7')
  })

  test('what went wrong is told by marks, each looked at', async () => {
    const { rows } = await get<{ rows: Mark[] }>('/marks?state=reviewed&limit=200')
    const told = (code: string) => rows.filter((mark) => mark.code === code)
    expect(told('balance-below-zero').map(({ containerCode }) => containerCode)).toEqual(['C-201'])
    expect(told('looks-like-saved').map(({ drainNumber }) => drainNumber)).toEqual(['D-25-0118'])
    expect(told('more-than-machine-holds').map(({ drainNumber }) => drainNumber)).toEqual([
      'D-26-0001',
    ])
    // Every level stayed between nothing and its fill line.
    expect(told('over-fill-line')).toEqual([])
    const open = await get<{ rows: Mark[] }>('/marks?state=open')
    expect(open.rows).toEqual([])
  })

  test('two drains came late, with the phone of somebody who had left', async () => {
    const { rows } = await get<{ rows: { recordedAt: string; recordedBy: { name: string } }[] }>(
      `/drains?siteId=${sites.S1}&limit=200`,
    )
    const late = rows.filter(
      ({ recordedAt, recordedBy }) =>
        recordedBy.name === 'Teo Marbach' && recordedAt > '2025-08-31',
    )
    expect(late).toHaveLength(2)
    const refused = await request(product.app)
      .post('/api/session')
      .send({ email: 'teo@quillbrook.example.com', password: demoPassword })
    expect(refused.status).toBe(401)
  })

  test('a drum is held, and the van came home empty after 48 gal', async () => {
    const { rows } = await get<{
      rows: { code: string; litres: string; hold: { halogensPpm: string } | null }[]
    }>(`/containers?siteId=${sites.S1}`)
    const called = (code: string) => rows.find((row) => row.code === code)
    expect(called('H-1')?.hold?.halogensPpm).toBe('1240')
    expect([called('V-1')?.litres, called('V-2')?.litres]).toEqual(['0', '0'])
    const flags = await get<{ rows: Flag[] }>(`/flags?siteId=${sites.S1}`)
    const van = flags.rows.filter(({ rule }) => rule.scope === 'vehicle')
    expect(van.map(({ level, finding }) => [level, Number(finding.measured)])).toEqual([
      ['warn', 48],
    ])
  })

  test('nothing waits to be mailed to people who do not exist', async () => {
    const officer = await signedIn(product, 'odile@quillbrook.example.com')
    const { rows } = await officer<{ rows: { state: string }[] }>('/mailbox?limit=200')
    expect(rows.length).toBeGreaterThan(40)
    expect(new Set(rows.map(({ state }) => state))).toEqual(new Set(['kept']))
  })

  test.each(demoInfo.people)('$name can sign in', async ({ email, role }) => {
    const ask = await signedIn(product, email)
    expect(await ask<{ role: string }>('/me')).toMatchObject({ role })
  })
})

describe('the current season', () => {
  let product: TestApp

  beforeAll(async () => {
    product = await testApp({ now: '2026-11-30T20:00:00Z' })
    await makeDemo(product.opened.db, product.services, {
      until: product.clock.now,
      seed: 'a seed of the test',
    })
  })
  afterAll(() => product.close())

  async function rowsOf(query: ReturnType<typeof sql>): Promise<Record<string, unknown>[]> {
    const found = await asService(product.opened.db, (tx) => tx.execute(query))
    return (found as unknown as { rows: Record<string, unknown>[] }).rows
  }

  test('shows a yard at work: something planned, ready, differing, flagged and to look at', async () => {
    const stages = await rowsOf(
      sql`select distinct stage from pickups where planned_on > '2026-11-01' order by 1`,
    )
    expect(stages.map(({ stage }) => stage)).toEqual(
      expect.arrayContaining(['planned', 'ready', 'differs']),
    )
    const [waiting] = await rowsOf(sql`select
      (select count(*)::int from flags where state = 'open') as flags,
      (select count(*)::int from marks where reviewed_at is null) as marks`)
    expect(waiting?.flags).toBeGreaterThan(0)
    expect(waiting?.marks).toBeGreaterThan(0)
    const [tote] =
      await rowsOf(sql`select sum(b.litres) / c.fill_line_litres as share from containers c
      join accounts a on a.container_id = c.id join balances b on b.account_id = a.id
      where c.code = 'C-101' group by c.id`)
    expect(Number(tote?.share)).toBeGreaterThan(0.85)
    expect(Number(tote?.share)).toBeLessThanOrEqual(1)
  })

  test('has nothing from the future, and nothing over its line', async () => {
    const [late] = await rowsOf(
      sql`select count(*)::int as lines from movements where recorded_at > '2026-11-30T20:00:00Z'`,
    )
    expect(late?.lines).toBe(0)
    const codes = await rowsOf(sql`select distinct code from marks where code = 'over-fill-line'`)
    expect(codes).toEqual([])
  })

  test('leaves 2025 as it was, and the book sound', async () => {
    const [year] =
      await rowsOf(sql`select round(sum(case when reverses is null then litres else -litres end), 1)::text as litres
      from movements where counts_as = 'drain' and occurred_on between '2025-01-01' and '2025-12-31'`)
    expect(year?.litres).toBe('6868.5')
    expect(await bookFindings(product)).toEqual([])
  })
})

test('where a company of its own was set up, no demo is made', async () => {
  const product = await testApp()
  await aSite(product)
  expect(await openDemo(product.opened.db, product.services)).toBeNull()
  expect((await counts(product))?.lines).toBe(0)
  await product.close()
})
