import { randomUUID } from 'node:crypto'
import { bookFindings } from '../helpers/book'
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
let officer: Member
let machine: { id: string; code: string }

beforeAll(async () => {
  product = await testApp()
  site = await aSite(product)
  technician = await signInAs(product, site.organisation, 'technician', [site.id])
  officer = await signInAs(product, site.organisation, 'officer', [site.id])
  machine = await aMachine(site, { reservoir: null, system: null })
})
beforeEach(() => (product.clock.now = new Date('2025-03-31T18:00:00Z')))
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

type Place = { id: string; code: string }
type Facts = Record<string, unknown>

/** Pours litres into a container on a day of March, at noon at the site. */
async function pour(container: Place, litres: string, day: number, more: Facts = {}) {
  const body = drainBody(
    site,
    { machine, container },
    {
      volume: { value: litres, unit: 'L' },
      occurredAt: `2025-03-${String(day).padStart(2, '0')}T18:00:00Z`,
      ...more,
    },
  )
  const reply = await technician.post('/drains', body)
  expect(reply.status).toBe(201)
  return { ...body, number: reply.body.number as string }
}

async function move(from: Place, to: Place, litres: string, day: number) {
  const reply = await technician.post('/transfers', {
    id: randomUUID(),
    siteId: site.id,
    fromContainerId: from.id,
    toContainerId: to.id,
    volume: { value: litres, unit: 'L' },
    method: 'pump-meter',
    occurredAt: `2025-03-${String(day).padStart(2, '0')}T19:00:00Z`,
  })
  expect(reply.status).toBe(201)
}

const strike = ({ id }: { id: string }, expectedRevision = 1) =>
  technician.post(`/drains/${id}/strike`, { expectedRevision, reason: 'Did not happen' })
const read = async ({ id }: Place, by = technician) => (await by.get(`/containers/${id}`)).body
const tote = () => aContainer(site, { type: 'tote', capacity: { value: '1000', unit: 'L' } })
/** 100 L to the line. */
const drum = () => aContainer(site, { capacity: { value: '200', unit: 'L' }, fillPercent: '50' })

describe('the level of a container', () => {
  test.each([
    ['0', 'room', '100'],
    ['89.99999', 'room', '10.00001'],
    ['90', 'near', '10'],
    ['100', 'near', '0'],
    ['100.00001', 'over', '-0.00001'],
  ])('with %s L of 100 is %s, %s L left', async (litres, level, roomLitres) => {
    const container = await drum()
    if (litres !== '0') await pour(container, litres, 10)
    expect(await read(container)).toMatchObject({ litres, level, roomLitres })
  })

  test('below nothing is shown as it stands', async () => {
    const container = await drum()
    await move(container, await tote(), '3.5', 10)
    expect(await read(container)).toMatchObject({
      litres: '-3.5',
      level: 'below-zero',
      roomLitres: '103.5',
      firstFilledOn: null,
    })
  })
})

describe('how long a container has been filling', () => {
  const age = async (container: Place) => {
    const { firstFilledOn, ageDays } = await read(container)
    return [firstFilledOn, ageDays]
  }

  test('counts from the first day something was poured in', async () => {
    const container = await tote()
    expect(await age(container)).toEqual([null, null])
    await pour(container, '10', 11)
    await pour(container, '10', 20)
    await pour(container, '10', 4)
    expect(await age(container)).toEqual(['2025-03-04', 27])
  })

  test('starts again when it was emptied', async () => {
    const [container, other] = [await tote(), await tote()]
    await pour(container, '10', 4)
    await move(container, other, '10', 12)
    expect(await age(container)).toEqual([null, null])
    await pour(container, '5', 20)
    expect(await age(container)).toEqual(['2025-03-20', 11])
    expect(await age(other)).toEqual(['2025-03-12', 19])
  })

  test('takes no notice of what was struck out, or amended to another day', async () => {
    const container = await tote()
    const mistaken = await pour(container, '10', 4)
    await pour(container, '10', 15)
    await strike(mistaken)
    expect(await age(container)).toEqual(['2025-03-15', 16])
    const { id, siteId: _, number: __, ...facts } = await pour(container, '20', 6)
    await technician.post(`/drains/${id}/amend`, {
      ...facts,
      occurredAt: '2025-03-18T18:00:00Z',
      expectedRevision: 1,
      reason: { code: 'mistyped', text: '' },
    })
    expect(await age(container)).toEqual(['2025-03-15', 16])
  })

  test('is counted in days of the site, not of the server', async () => {
    const container = await tote()
    await pour(container, '1', 10)
    product.clock.now = new Date('2025-04-01T04:59:00Z') // 23:59 of 31 March in Chicago
    expect(await age(container)).toEqual(['2025-03-10', 21])
    product.clock.now = new Date('2025-04-01T05:00:00Z')
    expect(await age(container)).toEqual(['2025-03-10', 22])
  })
})

test('an estimate among the contents is said, until it has left', async () => {
  const [container, other] = [await tote(), await tote()]
  const guessed = await pour(container, '10', 4, { method: 'estimate' })
  await pour(container, '10', 5)
  expect((await read(container)).hasEstimates).toBe(true)
  await strike(guessed)
  expect((await read(container)).hasEstimates).toBe(false)
  await pour(container, '10', 6, { method: 'estimate' })
  await move(container, other, '20', 7)
  await pour(container, '1', 8)
  expect((await read(container)).hasEstimates).toBe(false)
})

describe('the lines of a container', () => {
  test('are signed, newest first, with what stood in it after each', async () => {
    const [container, other] = [await tote(), await tote()]
    const struck = await pour(container, '10.5', 4)
    const kept = await pour(container, '20', 5)
    await strike(struck)
    await move(container, other, '25', 6)
    const { lines } = await read(container)
    const shown = lines.map((line: Record<string, unknown>) => [
      line['reason'],
      line['litres'],
      line['litresAfter'],
      line['other'],
      line['isReversal'],
      line['isReversed'],
      (line['drain'] as { number: string } | null)?.number ?? null,
    ])
    expect(shown).toEqual([
      ['transfer', '-25', '-5', other.code, false, false, null],
      ['drain', '-10.5', '20', machine.code, true, false, struck.number],
      ['drain', '20', '30.5', machine.code, false, false, kept.number],
      ['drain', '10.5', '10.5', machine.code, false, true, struck.number],
    ])
  })

  test('are cut to the number asked for, and what stood after each stays true', async () => {
    const container = await tote()
    for (let day = 1; day <= 4; day += 1) await pour(container, '10', day)
    const { body } = await technician.get(`/containers/${container.id}?lines=2`)
    expect(body.hasMoreLines).toBe(true)
    expect(body.lines.map((line: { litresAfter: string }) => line.litresAfter)).toEqual([
      '40',
      '30',
    ])
    const all = await technician.get(`/containers/${container.id}?lines=4`)
    expect(all.body.hasMoreLines).toBe(false)
  })

  test('of a bin count pieces and kilograms', async () => {
    const [filters, rags] = [
      await aContainer(site, { stream: 'filters', type: 'bin' }),
      await aContainer(site, { stream: 'absorbents', type: 'bin' }),
    ]
    await pour(await tote(), '10', 4, {
      filters: [{ count: 2, size: 'small', state: 'drained', containerId: filters.id }],
      absorbents: { mass: { value: '0.5', unit: 'kg' }, containerId: rags.id },
    })
    expect(await read(filters)).toMatchObject({ pieces: 2, litres: '0', kilograms: '0' })
    expect(await read(rags)).toMatchObject({ pieces: 0, kilograms: '0.5' })
    expect((await read(filters)).lines).toMatchObject([{ pieces: 2, entered: null }])
  })
})

describe('holding and releasing', () => {
  const hold = (container: Place, more: Facts = {}, by = technician) =>
    by.post(`/containers/${container.id}/hold`, {
      id: randomUUID(),
      reason: 'Unknown fluid',
      ...more,
    })
  const release = (container: Place, by = officer) =>
    by.post(`/containers/${container.id}/release`, { note: 'Laboratory: below 500 ppm' })

  test('a technician holds, an officer releases with the result', async () => {
    const container = await drum()
    const held = await hold(container, { halogensPpm: '1200' })
    expect(held.body.hold).toMatchObject({
      reason: 'Unknown fluid',
      halogensPpm: '1200',
      heldBy: { id: technician.id },
      heldAt: '2025-03-31T18:00:00.000Z',
      releasedAt: null,
    })
    const refused = await release(container, technician)
    expect([refused.status, refused.body.code]).toEqual([403, 'not-allowed'])
    const released = await release(container)
    expect(released.body).toMatchObject({
      hold: null,
      holds: [{ releaseNote: 'Laboratory: below 500 ppm', releasedBy: { id: officer.id } }],
    })
    const again = await release(container)
    expect([again.status, again.body.code]).toEqual([409, 'not-held'])
    expect((await hold(container)).status).toBe(200)
    expect((await read(container)).holds).toHaveLength(2)
  })

  test('the same hold sent again is held once; a second is refused', async () => {
    const container = await drum()
    const same = { id: randomUUID() }
    expect((await hold(container, same)).status).toBe(200)
    const again = await hold(container, same)
    expect([again.status, again.body.holds.length]).toEqual([200, 1])
    const other = await hold(container, { ...same, reason: 'Another' })
    expect([other.status, other.body.code]).toEqual([409, 'id-reused'])
    const second = await hold(container)
    expect([second.status, second.body.code]).toEqual([409, 'already-held'])
  })

  test('what is poured into a held container all the same is in the book', async () => {
    const container = await drum()
    await hold(container)
    await pour(container, '10', 5)
    expect(await read(container)).toMatchObject({ litres: '10', openMarks: 1 })
  })

  test.each([
    ['without a reason', { reason: '' }, 'reason'],
    ['with a figure that is none', { halogensPpm: 'many' }, 'halogensPpm'],
    ['without an id', { id: undefined }, 'id'],
  ])('is refused %s', async (_, more, path) => {
    const reply = await hold(await drum(), more)
    expect(reply.body).toMatchObject({ code: 'fields-refused', fields: [{ path }] })
  })

  test('not by an auditor; of another site or organisation there is no such container', async () => {
    const container = await drum()
    const auditor = await signInAs(product, site.organisation, 'auditor')
    expect((await hold(container, {}, auditor)).status).toBe(403)
    const elsewhere = await aSite(product, { organisation: site.organisation })
    const colleague = await signInAs(product, site.organisation, 'officer', [elsewhere.id])
    const stranger = (await aSite(product)).organisation.administrator
    for (const by of [colleague, stranger]) {
      expect((await hold(container, {}, by)).status).toBe(404)
      expect((await release(container, by)).status).toBe(404)
      expect((await by.get(`/containers/${container.id}`)).status).toBe(404)
      expect((await by.get(`/containers/${container.code}`)).status).toBe(404)
    }
  })
})

describe('the list of containers', () => {
  test('holds those of the sites one may see, by site and code, without retired ones', async () => {
    const own = await aSite(product, { code: 'L-1' })
    const second = await aSite(product, { code: 'L-2', organisation: own.organisation })
    const [b, a] = [await aContainer(own, { code: 'L-B' }), await aContainer(own, { code: 'L-A' })]
    const c = await aContainer(second, { code: 'L-C', stream: 'ester' })
    const { administrator } = own.organisation
    await administrator.post(`/container-records/${b.id}/retire`)
    const codes = async (by: Member, query = '') => {
      const { body } = await by.get(`/containers${query}`)
      return body.rows.map(({ code }: { code: string }) => code)
    }
    expect(await codes(administrator)).toEqual([a.code, c.code])
    expect(await codes(administrator, '?retired=yes')).toEqual([b.code])
    expect(await codes(administrator, `?siteId=${second.id}`)).toEqual([c.code])
    expect(await codes(administrator, `?streamId=${own.organisation.streams['mineral']}`)).toEqual([
      a.code,
    ])
    const local = await signInAs(product, own.organisation, 'technician', [second.id])
    expect(await codes(local)).toEqual([c.code])
    expect(await codes(local, `?siteId=${own.id}`)).toEqual([])
  })

  test('says of each what its own page says', async () => {
    const container = await drum()
    await pour(container, '95', 5, { method: 'estimate' })
    const { body } = await technician.get(`/containers?siteId=${site.id}`)
    const listed = body.rows.find(({ id }: Place) => id === container.id)
    const { holds: _, marks: __, lines: ___, hasMoreLines: ____, ...own } = await read(container)
    expect(listed).toEqual(own)
    expect(listed).toMatchObject({ litres: '95', level: 'near', hasEstimates: true, ageDays: 26 })
  })

  test('one is found by its code as by its id', async () => {
    const container = await drum()
    const { body } = await technician.get(`/containers/${container.code}`)
    expect(body.id).toBe(container.id)
    for (const nothing of ['NO-SUCH', 'no such', randomUUID()]) {
      expect((await technician.get(`/containers/${nothing}`)).status).toBe(404)
    }
  })
})

test('a container is retired only when the book says it is empty', async () => {
  const container = await drum()
  const drain = await pour(container, '10', 5)
  const { administrator } = site.organisation
  const refused = await administrator.post(`/container-records/${container.id}/retire`)
  expect([refused.status, refused.body.code]).toEqual([409, 'still-in-use'])
  await strike(drain)
  expect((await administrator.post(`/container-records/${container.id}/retire`)).status).toBe(200)
})
