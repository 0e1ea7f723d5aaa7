import { randomUUID } from 'node:crypto'
import { evaluateEverySite } from '@/server/limits/run-limits-job'
import type { Flag, Rule } from '@/shared/contracts/limits'
import {
  aContainer,
  aMachine,
  aSite,
  drainBody,
  signInAs,
  type Member,
  type TestSite,
} from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
})
beforeEach(() => (product.clock.now = new Date('2025-03-10T18:00:00Z')))
afterAll(() => product.close())

type Yard = {
  site: TestSite
  officer: Member
  technician: Member
  machine: { id: string }
  container: { id: string; code: string }
}

async function aYard(): Promise<Yard> {
  const site = await aSite(product)
  return {
    site,
    officer: await signInAs(product, site.organisation, 'officer', [site.id]),
    technician: await signInAs(product, site.organisation, 'technician', [site.id]),
    machine: await aMachine(site, { reservoir: null, system: null }),
    container: await aContainer(site, { type: 'tote', capacity: { value: '275', unit: 'gal_us' } }),
  }
}

/** An own rule: more than 100 gal on hand, with a warning from 80. */
function onHand(yard: Yard, more: Record<string, unknown> = {}) {
  return {
    id: randomUUID(),
    siteId: yard.site.id,
    title: 'On hand',
    measure: 'contents-volume',
    scope: 'site',
    streams: { classes: [], streamIds: [] },
    threshold: { value: '100', unit: 'gal_us' },
    comparison: 'gt',
    warnPercent: '80',
    minimumCapacity: null,
    consequence: 'Order a pickup',
    citation: 'Yard manual 4.2',
    ...more,
  }
}

async function createRule(yard: Yard, more: Record<string, unknown> = {}): Promise<Rule> {
  const reply = await yard.officer.post('/rules', onHand(yard, more))
  expect(reply.status).toBe(201)
  return reply.body as Rule
}

async function pour(yard: Yard, gallons: string): Promise<{ id: string }> {
  const body = drainBody(yard.site, yard, { volume: { value: gallons, unit: 'gal_us' } })
  const reply = await yard.technician.post('/drains', body)
  expect(reply.status).toBe(201)
  return reply.body as { id: string }
}

async function strike(yard: Yard, drain: { id: string }): Promise<void> {
  const body = { expectedRevision: 1, reason: 'Did not happen' }
  expect((await yard.technician.post(`/drains/${drain.id}/strike`, body)).status).toBe(200)
}

/** Flags of a rule, oldest first. */
async function flagsOf(yard: Yard, rule: { id: string }): Promise<Flag[]> {
  const { body } = await yard.officer.get(`/flags?siteId=${yard.site.id}`)
  const own = (body.rows as Flag[]).filter(({ ruleId }) => ruleId === rule.id)
  return own.reverse()
}

describe('a flag', () => {
  test('is raised by the drain that reaches the line, once, and keeps its highest figure', async () => {
    const yard = await aYard()
    const rule = await createRule(yard)
    await pour(yard, '79.9')
    expect(await flagsOf(yard, rule)).toEqual([])
    await pour(yard, '0.1')
    await pour(yard, '5')
    const found = await flagsOf(yard, rule)
    expect(found).toMatchObject([
      { level: 'warn', state: 'open', endedAt: null, ruleVersion: 1, siteCode: yard.site.code },
    ])
    expect(Number(found[0]?.finding.measured)).toBeCloseTo(85, 10)
    expect(found[0]?.finding.working.map(({ label }) => label)).toEqual([yard.container.code])
  })

  test('goes from warning to limit in place, and is open again when the warning was reviewed', async () => {
    const yard = await aYard()
    const rule = await createRule(yard)
    await pour(yard, '80')
    const [warning] = await flagsOf(yard, rule)
    const reviewed = await yard.officer.post(`/flags/${warning?.id}/review`, {
      note: 'A truck comes on Friday',
    })
    expect(reviewed.body).toMatchObject({
      state: 'reviewed',
      review: { note: 'A truck comes on Friday', by: { id: yard.officer.id } },
    })
    // 100 gal is not more than 100.
    await pour(yard, '20')
    expect((await flagsOf(yard, rule)).map(({ level, state }) => [level, state])).toEqual([
      ['warn', 'reviewed'],
    ])
    await pour(yard, '0.1')
    expect((await flagsOf(yard, rule)).map(({ level, state }) => [level, state])).toEqual([
      ['limit', 'open'],
    ])
  })

  test('waits for its review when the measure has fallen; the next crossing is another flag', async () => {
    const yard = await aYard()
    const rule = await createRule(yard)
    const drain = await pour(yard, '101')
    await strike(yard, drain)
    expect(await flagsOf(yard, rule)).toMatchObject([
      { level: 'limit', state: 'open', endedAt: '2025-03-10T18:00:00.000Z' },
    ])
    product.clock.now = new Date('2025-03-11T18:00:00Z')
    await pour(yard, '90')
    expect(
      (await flagsOf(yard, rule)).map(({ level, endedAt }) => [level, endedAt !== null]),
    ).toEqual([
      ['limit', true],
      ['warn', false],
    ])
  })

  test('is reviewed once, with a note, by an officer of the site', async () => {
    const yard = await aYard()
    const rule = await createRule(yard)
    await pour(yard, '90')
    const [flag] = await flagsOf(yard, rule)
    const path = `/flags/${flag?.id}/review`
    const elsewhere = await aSite(product, { organisation: yard.site.organisation })
    const stranger = await signInAs(product, yard.site.organisation, 'officer', [elsewhere.id])
    expect((await yard.technician.post(path, { note: 'Seen' })).status).toBe(403)
    expect((await stranger.post(path, { note: 'Seen' })).status).toBe(404)
    expect((await stranger.get(`/flags/${flag?.id}`)).status).toBe(404)
    const empty = await yard.officer.post(path, { note: '  ' })
    expect(empty).toMatchObject({ status: 400, body: { fields: [{ path: 'note' }] } })
    expect((await yard.officer.post(path, { note: 'Seen' })).status).toBe(200)
    const again = await yard.officer.post(path, { note: 'Seen again' })
    expect(again).toMatchObject({ status: 409, body: { code: 'already-reviewed' } })
    expect((await yard.officer.get(`/flags/${flag?.id}`)).body.review.note).toBe('Seen')
  })

  test('of days is raised when the day comes, without anybody doing anything', async () => {
    const yard = await aYard()
    const rule = await createRule(yard, {
      measure: 'days-since-first-fill',
      threshold: { value: '30', unit: 'days' },
    })
    const drain = await pour(yard, '10')
    product.clock.now = new Date('2025-04-08T18:00:00Z')
    await evaluateEverySite(product.services)
    expect((await flagsOf(yard, rule)).map(({ level }) => level)).toEqual(['warn'])
    product.clock.now = new Date('2025-04-10T18:00:00Z')
    await evaluateEverySite(product.services)
    await evaluateEverySite(product.services)
    expect(await flagsOf(yard, rule)).toMatchObject([
      { level: 'limit', finding: { measured: '31', subject: yard.container.code } },
    ])
    // Emptied, the container has no days: its next filling is another crossing.
    await strike(yard, drain)
    expect((await flagsOf(yard, rule)).map(({ endedAt }) => endedAt !== null)).toEqual([true])
  })

  test('of a month counts what was generated in it, corrections included', async () => {
    const yard = await aYard()
    const rule = await createRule(yard, {
      measure: 'generated-mass-per-calendar-month',
      threshold: { value: '100', unit: 'kg' },
    })
    // 0.875 kg/L: 30 gal are 99.37 kg, 31 gal are 102.68 kg.
    const drain = await pour(yard, '31')
    expect(await flagsOf(yard, rule)).toMatchObject([
      { periodKey: '2025-03', level: 'limit', finding: { isEstimate: true } },
    ])
    await strike(yard, drain)
    await pour(yard, '10')
    expect((await flagsOf(yard, rule)).map(({ endedAt }) => endedAt !== null)).toEqual([true])
  })
})

describe('a rule', () => {
  test('of a pack comes with its citation and what it measures now', async () => {
    const yard = await aYard()
    await pour(yard, '10')
    const { body } = await yard.officer.get(`/rules?siteId=${yard.site.id}`)
    const bulk = (body.rows as Rule[]).find(({ definition }) => definition.id === 'us-dot-bulk-119')
    expect(bulk).toMatchObject({ origin: 'pack', enabled: true, version: 1 })
    expect(bulk?.definition.citation).toContain('49 CFR')
    expect(bulk?.findings).toMatchObject([
      { subject: yard.container.code, measured: '275', level: 'limit' },
    ])
  })

  test('of a pack is switched, with a reason, and not rewritten; switched off its open flags are withdrawn', async () => {
    const yard = await aYard()
    await pour(yard, '10')
    const { body } = await yard.officer.get(`/rules?siteId=${yard.site.id}`)
    const bulk = (body.rows as Rule[]).find(({ definition }) => definition.id === 'us-dot-bulk-119')
    if (bulk === undefined) throw new Error('no such rule')
    expect((await flagsOf(yard, bulk)).map(({ state }) => state)).toEqual(['open'])
    const { id: _id, siteId: _siteId, ...rewritten } = onHand(yard)
    const refused = await yard.officer.put(
      `/rules/${bulk.id}`,
      { ...rewritten, version: 1, reason: 'Ours is stricter' },
      '',
    )
    expect(refused).toMatchObject({ status: 409, body: { code: 'pack-rule-fixed' } })
    const off = { enabled: false, reason: 'No bulk packaging leaves this yard', version: 1 }
    const switched = await yard.officer.post(`/rules/${bulk.id}/switch`, off)
    expect(switched.body).toMatchObject({ enabled: false, version: 2, changeReason: off.reason })
    expect((await flagsOf(yard, bulk)).map(({ state }) => state)).toEqual(['withdrawn'])
    const stale = await yard.officer.post(`/rules/${bulk.id}/switch`, { ...off, enabled: true })
    expect(stale).toMatchObject({ status: 409, body: { code: 'changed-under-you' } })
    const on = { enabled: true, reason: 'One does after all', version: 2 }
    product.clock.now = new Date('2025-03-10T18:01:00Z')
    expect((await yard.officer.post(`/rules/${bulk.id}/switch`, on)).status).toBe(200)
    expect((await flagsOf(yard, bulk)).map(({ state }) => state)).toEqual(['withdrawn', 'open'])
  })

  test("of one's own is measured from the moment it is written, and its flags keep the version that raised them", async () => {
    const yard = await aYard()
    await pour(yard, '90')
    const rule = await createRule(yard)
    expect(rule.findings).toMatchObject([{ level: 'warn' }])
    expect(await flagsOf(yard, rule)).toMatchObject([{ level: 'warn', ruleVersion: 1 }])
    const {
      id: _id,
      siteId: _siteId,
      ...body
    } = onHand(yard, {
      threshold: { value: '50', unit: 'gal_us' },
    })
    const changed = await yard.officer.put(
      `/rules/${rule.id}`,
      { ...body, version: 1, reason: 'The tank was moved' },
      '',
    )
    expect(changed).toMatchObject({ status: 200, body: { version: 2 } })
    expect(await flagsOf(yard, rule)).toMatchObject([
      { level: 'limit', ruleVersion: 2, rule: { threshold: { value: '50' } } },
    ])
    const retired = await yard.officer.post(`/rules/${rule.id}/retire`)
    expect(retired.body).toMatchObject({ enabled: false, retiredAt: '2025-03-10T18:00:00.000Z' })
    expect((await flagsOf(yard, rule)).map(({ state }) => state)).toEqual(['withdrawn'])
  })

  test.each([
    ['contents-volume', { value: '100', unit: 'kg' }],
    ['contents-mass', { value: '100', unit: 'L' }],
    ['container-capacity', { value: '100', unit: 'days' }],
    ['days-since-first-fill', { value: '100', unit: 'gal_us' }],
    ['generated-mass-per-calendar-month', { value: '100', unit: 'gal_us' }],
  ])('of %s is refused in a unit that cannot measure it', async (measure, threshold) => {
    const yard = await aYard()
    const reply = await yard.officer.post('/rules', onHand(yard, { measure, threshold }))
    expect(reply).toMatchObject({
      status: 400,
      body: { code: 'fields-refused', fields: [{ path: 'threshold.unit' }] },
    })
  })

  test('is written by officers of the site, once for an id', async () => {
    const yard = await aYard()
    const body = onHand(yard)
    expect((await yard.technician.post('/rules', body)).status).toBe(403)
    const elsewhere = await aSite(product, { organisation: yard.site.organisation })
    const stranger = await signInAs(product, yard.site.organisation, 'officer', [elsewhere.id])
    expect((await stranger.post('/rules', body)).status).toBe(404)
    expect((await yard.officer.post('/rules', body)).status).toBe(201)
    const again = await yard.officer.post('/rules', { ...body, title: 'Another' })
    expect(again).toMatchObject({ status: 409, body: { code: 'id-reused' } })
    const { body: shown } = await yard.technician.get(`/rules?siteId=${yard.site.id}`)
    expect((shown.rows as Rule[]).filter(({ origin }) => origin === 'own')).toHaveLength(1)
  })
})

test('flags come page by page, newest first', async () => {
  const yard = await aYard()
  for (const day of [11, 12, 13]) {
    product.clock.now = new Date(`2025-03-${day}T18:00:00Z`)
    await createRule(yard, { threshold: { value: '1', unit: 'gal_us' } })
  }
  await pour(yard, '2')
  const path = `/flags?siteId=${yard.site.id}&state=open&limit=3`
  const first = await yard.officer.get(path)
  const second = await yard.officer.get(`${path}&cursor=${first.body.next}`)
  const ids = [...first.body.rows, ...second.body.rows].map(({ id }: Flag) => id)
  // Three own rules and the pack's bulk packaging.
  expect(ids).toHaveLength(4)
  expect(new Set(ids).size).toBe(4)
  expect(second.body.next).toBeNull()
})
