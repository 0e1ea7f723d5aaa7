import { randomUUID } from 'node:crypto'
import request from 'supertest'
import { audit } from '@/db/schema/trail'
import { bookFindings, bookLines } from '../helpers/book'
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
let site: TestSite
let technician: Member
let machine: { id: string; code: string; fluidId: string }

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
  site = await aSite(product)
  technician = await signInAs(product, site.organisation, 'technician', [site.id])
  machine = await aMachine(site, { reservoir: null, system: null })
})
beforeEach(() => (product.clock.now = new Date('2025-03-10T18:00:00Z')))
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

/** How many lines the site's book has: what follows is what a test wrote. */
async function linesSo() {
  return (await bookLines(product, site.id)).length
}

async function record(more: Record<string, unknown> = {}, by = technician) {
  const container = await aContainer(site)
  const before = await linesSo()
  const reply = await by.post('/drains', drainBody(site, { machine, container }, more))
  return { reply, container, lines: await bookLines(product, site.id, before) }
}

describe('a drain that is recorded', () => {
  test('keeps what was typed, and moves its exact litres from the machine to the container', async () => {
    const { reply, container, lines } = await record({ volume: { value: '18.50', unit: 'gal_us' } })
    expect(reply.status).toBe(201)
    expect(reply.body).toMatchObject({
      volume: { value: '18.50', unit: 'gal_us' },
      litres: '70.030118004',
      state: 'standing',
      revision: 1,
      needsLook: false,
      occurredOn: '2025-03-10',
      isEstimate: false,
      spreadPercent: '3',
      recordedBy: { id: technician.id },
    })
    expect(reply.body.containersAfter).toEqual([
      {
        containerId: container.id,
        containerCode: container.code,
        litres: '70.030118004',
        fillLineLitres: '187.377883308',
        roomLitres: '117.347765304',
      },
    ])
    expect(lines).toEqual([`${machine.code} > ${container.code} 70.030118004 L mineral drain`])
  })

  test('ten drains of 0.1 gal are exactly 1 gal', async () => {
    const container = await aContainer(site)
    for (let pour = 0; pour < 10; pour += 1) {
      const occurredAt = new Date(Date.UTC(2025, 2, 10, 12, pour)).toISOString()
      const volume = { value: '0.1', unit: 'gal_us' }
      const body = drainBody(site, { machine, container }, { volume, occurredAt })
      expect((await technician.post('/drains', body)).status).toBe(201)
    }
    const read = await technician.get(`/containers/${container.id}`)
    expect(read.body.litres).toBe('3.785411784')
  })

  test('is split so that the last container takes the exact remainder', async () => {
    const [first, second, third] = [
      await aContainer(site),
      await aContainer(site),
      await aContainer(site),
    ]
    const before = await linesSo()
    const reply = await technician.post(
      '/drains',
      drainBody(
        site,
        { machine, container: first },
        {
          volume: { value: '20', unit: 'gal_us' },
          legs: [
            { containerId: first.id, volume: { value: '7', unit: 'gal_us' } },
            { containerId: second.id, volume: { value: '11.1', unit: 'L' } },
            { containerId: third.id },
          ],
        },
      ),
    )
    expect(reply.body.legs.map((leg: { litres: string }) => leg.litres)).toEqual([
      '26.497882488',
      '11.1',
      '38.110353192',
    ])
    expect(await bookLines(product, site.id, before)).toEqual([
      `${machine.code} > ${first.code} 26.497882488 L mineral drain`,
      `${machine.code} > ${second.code} 11.1 L mineral drain`,
      `${machine.code} > ${third.code} 38.110353192 L mineral drain`,
    ])
  })

  test('brings its filters, breather caps and absorbents into their bins', async () => {
    const filterBin = await aContainer(site, { stream: 'filters', type: 'bin', code: 'A-FILTERS' })
    const ragBin = await aContainer(site, { stream: 'absorbents', type: 'bin', code: 'A-RAGS' })
    const namedBin = await aContainer(site, { stream: 'filters', type: 'bin', code: 'Z-FILTERS' })
    const { reply, container, lines } = await record({
      filters: [
        { count: 2, size: 'large', state: 'draining' },
        { count: 1, size: 'element', state: 'crushed', containerId: namedBin.id },
      ],
      absorbents: { mass: { value: '2', unit: 'lb_avdp' } },
      breatherCaps: 3,
    })
    expect(reply.body).toMatchObject({ filterCount: 3, breatherCaps: 3 })
    expect(lines).toEqual([
      `${machine.code} > ${container.code} 37.85411784 L mineral drain`,
      `${machine.code} > ${filterBin.code} 2 pieces filters drain`,
      `${machine.code} > ${namedBin.code} 1 pieces filters drain`,
      `${machine.code} > ${filterBin.code} 3 pieces filters drain`,
      `${machine.code} > ${ragBin.code} 0.90718474 kg absorbents drain`,
    ])
  })

  test('puts spent parts on the floor of a site that has no bin', async () => {
    const bare = await aSite(product, { organisation: site.organisation })
    const its = { machine: await aMachine(bare), container: await aContainer(bare) }
    const filters = [{ count: 1, size: 'small', state: 'drained' }]
    await bare.organisation.administrator.post('/drains', drainBody(bare, its, { filters }))
    expect(await bookLines(product, bare.id)).toEqual([
      `${its.machine.code} > ${its.container.code} 37.85411784 L mineral drain`,
      `${its.machine.code} > floor 1 pieces filters drain`,
    ])
  })

  test('comes from a machine that is not on the list', async () => {
    const { reply, container, lines } = await record({
      machine: { kind: 'unlisted', description: 'Hired loader, plate 555-01' },
    })
    expect(reply.body.machine).toEqual({
      id: null,
      code: null,
      description: 'Hired loader, plate 555-01',
    })
    expect(lines).toEqual([`unlisted-machine > ${container.code} 37.85411784 L mineral drain`])
  })

  test('stays an estimate, with the spread that was given', async () => {
    const { reply } = await record({ method: 'estimate', spreadPercent: '15' })
    expect(reply.body).toMatchObject({ isEstimate: true, spreadPercent: '15' })
  })

  test('keeps refill and note without moving anything for them', async () => {
    const { reply, lines } = await record({
      refill: { volume: { value: '9', unit: 'gal_us' }, fluidId: machine.fluidId },
      note: 'Sight glass\nwas cloudy',
    })
    expect(reply.body).toMatchObject({
      refill: { volume: { value: '9', unit: 'gal_us' }, fluid: { id: machine.fluidId } },
      note: 'Sight glass\nwas cloudy',
    })
    expect(lines).toHaveLength(1)
  })
})

describe('days and numbers', () => {
  /** Volume aside, only the number and the day are looked at. */
  async function numberOf(occurredAt: string, of: TestSite, its: Parameters<typeof drainBody>[1]) {
    product.clock.now = new Date('2026-06-01T00:00:00Z')
    const { administrator } = of.organisation
    const { body } = await administrator.post('/drains', drainBody(of, its, { occurredAt }))
    return `${body.number} ${body.occurredOn}`
  }

  test('a year begins at the midnight of the site, and each has its own numbers', async () => {
    const own = await aSite(product, { timeZone: 'America/Chicago' })
    const its = { machine: await aMachine(own), container: await aContainer(own) }
    expect([
      await numberOf('2026-01-01T05:59:59.999Z', own, its),
      await numberOf('2026-01-01T06:00:00.000Z', own, its),
      await numberOf('2025-12-31T23:59:59-06:00', own, its),
      await numberOf('2026-01-01T00:00:00-06:00', own, its),
    ]).toEqual([
      'D-25-0001 2025-12-31',
      'D-26-0001 2026-01-01',
      'D-25-0002 2025-12-31',
      'D-26-0002 2026-01-01',
    ])
  })

  test('sites of one organisation share one series, another organisation has its own', async () => {
    const first = await aSite(product)
    const second = await aSite(product, { organisation: first.organisation })
    const other = await aSite(product)
    const numbers: string[] = []
    for (const of of [first, second, other]) {
      const its = { machine: await aMachine(of), container: await aContainer(of) }
      numbers.push(await numberOf('2025-03-10T12:00:00Z', of, its))
    }
    expect(numbers.map((number) => number.slice(0, 9))).toEqual([
      'D-25-0001',
      'D-25-0002',
      'D-25-0001',
    ])
  })

  test('the day of a drain in the hours around the change of the clocks', async () => {
    const own = await aSite(product, { timeZone: 'America/Chicago' })
    const its = { machine: await aMachine(own), container: await aContainer(own) }
    const days: string[] = []
    for (const occurredAt of [
      '2025-03-09T05:59:00Z', // 23:59 of the 8th, winter
      '2025-03-09T06:00:00Z',
      '2025-03-09T08:00:00Z', // 02:00 does not exist: it is 03:00
      '2025-03-10T04:59:00Z', // 23:59 of the 9th, summer: the day had 23 hours
      '2025-03-10T05:00:00Z',
      '2025-11-02T06:30:00Z', // the first 01:30
      '2025-11-02T07:30:00Z', // the second 01:30
      '2025-11-03T05:59:00Z', // 23:59, after 25 hours
      '2025-11-03T06:00:00Z',
    ]) {
      days.push((await numberOf(occurredAt, own, its)).slice(-5))
    }
    expect(days).toEqual([
      '03-08',
      '03-09',
      '03-09',
      '03-09',
      '03-10',
      '11-02',
      '11-02',
      '11-02',
      '11-03',
    ])
  })

  test('a refused drain uses up no number', async () => {
    const own = await aSite(product)
    const its = { machine: await aMachine(own), container: await aContainer(own) }
    const { administrator } = own.organisation
    const refused = { legs: [{ containerId: its.container.id, volume: { value: '9', unit: 'L' } }] }
    expect((await administrator.post('/drains', drainBody(own, its, refused))).status).toBe(400)
    const { body } = await administrator.post('/drains', drainBody(own, its))
    expect(body.number).toBe('D-25-0001')
  })
})

describe('the same drain sent again', () => {
  test('is answered as the first time, and stands once', async () => {
    const container = await aContainer(site)
    const body = drainBody(site, { machine, container })
    const first = await technician.post('/drains', body)
    const before = await linesSo()
    product.clock.now = new Date('2025-03-10T18:09:00Z')
    const again = await technician.post('/drains', body)
    expect([first.status, again.status]).toEqual([201, 200])
    expect(again.body).toEqual(first.body)
    expect(await linesSo()).toBe(before)
  })

  test('is the same however its JSON is ordered and with its defaults written out', async () => {
    const container = await aContainer(site)
    const body = drainBody(site, { machine, container })
    const first = await technician.post('/drains', body)
    const turned = Object.fromEntries(Object.entries({ ...body, note: '', filters: [] }).reverse())
    const again = await technician.post('/drains', turned)
    expect(again.status).toBe(200)
    expect(again.body).toEqual(first.body)
  })

  test('with other content is refused', async () => {
    const container = await aContainer(site)
    const body = drainBody(site, { machine, container })
    await technician.post('/drains', body)
    const before = await linesSo()
    const other = await technician.post('/drains', { ...body, note: 'another' })
    expect([other.status, other.body.code]).toEqual([409, 'id-reused'])
    expect(await linesSo()).toBe(before)
  })

  test('by another person is refused', async () => {
    const container = await aContainer(site)
    const body = drainBody(site, { machine, container })
    await technician.post('/drains', body)
    const colleague = await signInAs(product, site.organisation, 'technician', [site.id])
    const other = await colleague.post('/drains', body)
    expect([other.status, other.body.code]).toEqual([409, 'id-reused'])
  })

  test('from another organisation is refused and tells nothing', async () => {
    const container = await aContainer(site)
    const body = drainBody(site, { machine, container })
    await technician.post('/drains', body)
    const theirs = await aSite(product)
    const its = { machine: await aMachine(theirs), container: await aContainer(theirs) }
    const { administrator } = theirs.organisation
    const other = await administrator.post('/drains', drainBody(theirs, its, { id: body.id }))
    expect([other.status, other.body.code]).toEqual([409, 'id-reused'])
    expect(other.body.facts).toBeUndefined()
    expect(await bookLines(product, theirs.id)).toEqual([])
  })
})

describe('a drain that cannot be a fact is refused, with the field named', () => {
  async function refusal(more: Record<string, unknown>) {
    const { reply, lines } = await record(more)
    expect(lines).toEqual([])
    const paths = (reply.body.fields ?? []).map((field: { path: string }) => field.path)
    return [reply.status, reply.body.code, ...paths]
  }

  test('of a time to come', async () => {
    expect(await refusal({ occurredAt: '2025-03-10T18:05:01Z' })).toEqual([
      400,
      'time-in-future',
      'occurredAt',
    ])
  })

  test('but a clock five minutes ahead is believed', async () => {
    const { reply } = await record({ occurredAt: '2025-03-10T18:05:00Z' })
    expect(reply.status).toBe(201)
  })

  test.each([
    ['negative', { value: '-1', unit: 'L' }, 'volume.value'],
    ['zero', { value: '0.000', unit: 'L' }, 'volume.value'],
    ['a float', { value: 10.5, unit: 'L' }, 'volume.value'],
    ['in a power of ten', { value: '1e3', unit: 'L' }, 'volume.value'],
    ['too fine', { value: '1.000001', unit: 'L' }, 'volume.value'],
    ['in an unknown unit', { value: '1', unit: 'hogshead' }, 'volume.unit'],
    ['in a unit of mass', { value: '1', unit: 'kg' }, 'volume.unit'],
  ])('of a volume that is %s', async (_, volume, path) => {
    expect(await refusal({ volume })).toEqual([400, 'fields-refused', path])
  })

  test('whose parts do not sum to it, to the last digit', async () => {
    const [first, second] = [await aContainer(site), await aContainer(site)]
    const legs = (value: string) => [
      { containerId: first.id, volume: { value: '4', unit: 'gal_us' } },
      { containerId: second.id, volume: { value, unit: 'gal_us' } },
    ]
    expect((await record({ legs: legs('6') })).reply.status).toBe(201)
    expect(await refusal({ legs: legs('6.00001') })).toEqual([
      400,
      'legs-do-not-sum',
      'legs.1.volume.value',
    ])
  })

  test('whose remainder is nothing', async () => {
    const [first, second] = [await aContainer(site), await aContainer(site)]
    const legs = [
      { containerId: first.id, volume: { value: '10', unit: 'gal_us' } },
      { containerId: second.id },
    ]
    expect(await refusal({ legs })).toEqual([400, 'legs-do-not-sum', 'legs'])
  })

  test('with two remainders', async () => {
    const [first, second] = [await aContainer(site), await aContainer(site)]
    const legs = [{ containerId: first.id }, { containerId: second.id }]
    expect(await refusal({ legs })).toEqual([400, 'legs-do-not-sum', 'legs'])
  })

  test.each([
    ['machine', { machine: { kind: 'listed', machineId: randomUUID() } }, 'machine.machineId'],
    ['stream', { streamId: randomUUID() }, 'streamId'],
    ['fluid', { fluidId: randomUUID() }, 'fluidId'],
    ['container', { legs: [{ containerId: randomUUID() }] }, 'legs.0.containerId'],
    [
      'bin',
      { filters: [{ count: 1, size: 'small', state: 'drained', containerId: randomUUID() }] },
      'filters.0.containerId',
    ],
    [
      'bin for rags',
      { absorbents: { mass: { value: '1', unit: 'kg' }, containerId: randomUUID() } },
      'absorbents.containerId',
    ],
  ])('with an unknown %s', async (_, more, path) => {
    expect(await refusal(more)).toEqual([400, 'fields-refused', path])
  })

  test('of a stream that is not a fluid', async () => {
    const streamId = site.organisation.streams['filters']
    expect(await refusal({ streamId })).toEqual([400, 'fields-refused', 'streamId'])
  })

  test('with a machine or a container of another site', async () => {
    const other = await aSite(product, { organisation: site.organisation })
    const its = { machine: await aMachine(other), container: await aContainer(other) }
    expect(await refusal({ machine: { kind: 'listed', machineId: its.machine.id } })).toEqual([
      400,
      'wrong-site',
      'machine.machineId',
    ])
    expect(await refusal({ legs: [{ containerId: its.container.id }] })).toEqual([
      400,
      'wrong-site',
      'legs.0.containerId',
    ])
  })

  test('with a container of another organisation, which is as good as unknown', async () => {
    const theirs = await aContainer(await aSite(product))
    expect(await refusal({ legs: [{ containerId: theirs.id }] })).toEqual([
      400,
      'fields-refused',
      'legs.0.containerId',
    ])
  })

  test('with a field that does not exist', async () => {
    expect(await refusal({ gallons: '10' })).toEqual([400, 'fields-refused', 'gallons'])
  })
})

describe('who may record', () => {
  test('nobody who is not signed in', async () => {
    const container = await aContainer(site)
    const body = drainBody(site, { machine, container })
    const reply = await request(product.app).post('/api/drains').send(body)
    expect([reply.status, reply.body.code]).toEqual([401, 'sign-in-required'])
  })

  test('no auditor', async () => {
    const auditor = await signInAs(product, site.organisation, 'auditor')
    const { reply, lines } = await record({}, auditor)
    expect([reply.status, reply.body.code, lines]).toEqual([403, 'not-allowed', []])
  })

  test('a technician only at their own sites; another site does not exist for them', async () => {
    const elsewhere = await aSite(product, { organisation: site.organisation })
    const its = { machine: await aMachine(elsewhere), container: await aContainer(elsewhere) }
    const reply = await technician.post('/drains', drainBody(elsewhere, its))
    expect([reply.status, reply.body.code]).toEqual([404, 'not-found'])
    expect(await bookLines(product, elsewhere.id)).toEqual([])
  })

  test('and every act is in the trail, in its own transaction', async () => {
    const { reply } = await record()
    const trail = await site.organisation.administrator.acts(async (tx) => {
      const rows = await tx.select().from(audit)
      return rows.filter(({ subjectId }) => subjectId === reply.body.id)
    })
    expect(trail).toMatchObject([
      { act: 'record-drain', personId: technician.id, details: { number: reply.body.number } },
    ])
  })
})
