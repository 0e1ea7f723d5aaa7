import { randomUUID } from 'node:crypto'
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
let machine: { id: string; code: string }

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
  site = await aSite(product)
  technician = await signInAs(product, site.organisation, 'technician', [site.id])
  machine = await aMachine(site, { reservoir: null, system: null })
})
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

type Body = ReturnType<typeof drainBody>

async function recorded(more: Record<string, unknown> = {}) {
  const container = await aContainer(site)
  const body: Body = drainBody(site, { machine, container }, more)
  const reply = await technician.post('/drains', body)
  expect(reply.status).toBe(201)
  return { body, container, number: reply.body.number as string }
}

/** The body of an amendment of a drain: the facts in full, without what only recording takes. */
function amended({ id: _id, siteId: _siteId, ...facts }: Body, more: Record<string, unknown> = {}) {
  return { ...facts, expectedRevision: 1, reason: { code: 'mistyped', text: '' }, ...more }
}

const amend = (body: Body, more: Record<string, unknown> = {}, by = technician) =>
  by.post(`/drains/${body.id}/amend`, amended(body, more))
const strike = (body: Body, more: Record<string, unknown> = {}, by = technician) =>
  by.post(`/drains/${body.id}/strike`, { expectedRevision: 1, reason: 'Typed twice', ...more })
const linesSo = async () => (await bookLines(product, site.id)).length

describe('amending', () => {
  test('mirrors the old line, posts the right one, and keeps both readings', async () => {
    const { body, container, number } = await recorded({ volume: { value: '185', unit: 'L' } })
    const before = await linesSo()
    const reason = { code: 'mistyped', text: 'The point slipped' }
    const reply = await amend(body, { volume: { value: '18.5', unit: 'L' }, reason })
    expect(reply.status).toBe(200)
    expect(await bookLines(product, site.id, before)).toEqual([
      `${container.code} > ${machine.code} 185 L mineral undoes drain`,
      `${machine.code} > ${container.code} 18.5 L mineral drain`,
    ])
    expect(reply.body).toMatchObject({ number, revision: 2, litres: '18.5', state: 'standing' })
    expect(
      reply.body.revisions.map((one: { act: string; facts: Body; reasonText: string }) => [
        one.act,
        one.facts.volume.value,
        one.reasonText,
      ]),
    ).toEqual([
      ['recorded', '185', ''],
      ['amended', '18.5', 'The point slipped'],
    ])
  })

  test('into another container, on another day, of another machine', async () => {
    const { body, container, number } = await recorded({
      filters: [{ count: 1, size: 'small', state: 'drained' }],
    })
    const [other, right] = [await aMachine(site), await aContainer(site)]
    const before = await linesSo()
    const reply = await amend(body, {
      machine: { kind: 'listed', machineId: other.id },
      occurredAt: '2024-12-31T12:00:00Z',
      legs: [{ containerId: right.id }],
      filters: [],
      reason: { code: 'wrong-container', text: '' },
    })
    expect(await bookLines(product, site.id, before)).toEqual([
      `${container.code} > ${machine.code} 37.85411784 L mineral undoes drain`,
      `floor > ${machine.code} 1 pieces filters undoes drain`,
      `${other.code} > ${right.code} 37.85411784 L mineral drain`,
    ])
    // The number was given in its year and stays.
    expect(reply.body).toMatchObject({ number, occurredOn: '2024-12-31', filterCount: 0 })
    const emptied = await technician.get(`/containers/${container.id}`)
    expect(emptied.body).toMatchObject({ litres: '0', firstFilledOn: null, ageDays: null })
  })

  test('of a revision that is no longer the newest is refused, and changes nothing', async () => {
    const { body } = await recorded()
    expect((await amend(body, { note: 'first' })).status).toBe(200)
    const before = await linesSo()
    const late = await amend(body, { note: 'second' })
    expect([late.status, late.body.code]).toEqual([409, 'changed-under-you'])
    expect(await linesSo()).toBe(before)
    expect((await technician.get(`/drains/${body.id}`)).body.note).toBe('first')
  })

  test('again and again leaves one standing line', async () => {
    const { body, container } = await recorded()
    for (let revision = 1; revision <= 4; revision += 1) {
      const volume = { value: String(revision), unit: 'L' }
      expect((await amend(body, { volume, expectedRevision: revision })).status).toBe(200)
    }
    const read = await technician.get(`/containers/${container.id}`)
    expect(read.body.litres).toBe('4')
    const standing = read.body.lines.filter(
      (line: { isReversal: boolean; isReversed: boolean }) => !line.isReversal && !line.isReversed,
    )
    expect(standing).toHaveLength(1)
    expect(read.body.lines).toHaveLength(9)
  })

  test('after its fluid has left puts the container below zero, and says so', async () => {
    const { body, container } = await recorded({ volume: { value: '100', unit: 'L' } })
    const tote = await aContainer(site, { capacity: { value: '1000', unit: 'L' }, type: 'tote' })
    const transfer = {
      id: randomUUID(),
      siteId: site.id,
      fromContainerId: container.id,
      toContainerId: tote.id,
      volume: { value: '100', unit: 'L' },
      method: 'pump-meter',
      occurredAt: '2025-03-10T16:00:00Z',
    }
    expect((await technician.post('/transfers', transfer)).status).toBe(201)
    expect((await amend(body, { volume: { value: '90', unit: 'L' } })).status).toBe(200)
    const below = await technician.get(`/containers/${container.id}`)
    expect(below.body).toMatchObject({ litres: '-10', level: 'below-zero', openMarks: 1 })
    expect(below.body.marks).toMatchObject([
      { code: 'balance-below-zero', details: { container: container.code } },
    ])
    // The figure is put right: the mark is closed with a note.
    await amend(body, { volume: { value: '101', unit: 'L' }, expectedRevision: 2 })
    const right = await technician.get(`/containers/${container.id}`)
    expect(right.body).toMatchObject({ litres: '1', level: 'room', openMarks: 0 })
    expect(right.body.marks[0].reviewNote).toBe('The book is above zero again')
  })

  test.each([
    ['a time to come', { occurredAt: '2025-03-11T18:00:00Z' }, 'time-in-future'],
    ['an unknown container', { legs: [{ containerId: randomUUID() }] }, 'fields-refused'],
    ['an unknown reason', { reason: { code: 'because', text: '' } }, 'fields-refused'],
    ['a negative volume', { volume: { value: '-4', unit: 'L' } }, 'fields-refused'],
  ])('to %s is refused, and the drain stays as it was', async (_, more, code) => {
    const { body } = await recorded()
    const before = await linesSo()
    const reply = await amend(body, more)
    expect([reply.status, reply.body.code]).toEqual([400, code])
    expect(await linesSo()).toBe(before)
    expect((await technician.get(`/drains/${body.id}`)).body.revision).toBe(1)
  })
})

describe('striking out', () => {
  test('mirrors every line, keeps number and words, and cannot be done twice', async () => {
    const { body, container, number } = await recorded({
      absorbents: { mass: { value: '2', unit: 'kg' } },
    })
    const before = await linesSo()
    const reply = await strike(body)
    expect(reply.body).toMatchObject({
      number,
      state: 'struck',
      revision: 2,
      litres: '37.85411784',
    })
    expect(reply.body.revisions[1]).toMatchObject({ act: 'struck', reasonText: 'Typed twice' })
    expect(await bookLines(product, site.id, before)).toEqual([
      `${container.code} > ${machine.code} 37.85411784 L mineral undoes drain`,
      `floor > ${machine.code} 2 kg absorbents undoes drain`,
    ])
    for (const again of [await strike(body, { expectedRevision: 2 }), await strike(body)]) {
      expect([again.status, again.body.code]).toEqual([409, 'already-struck'])
    }
    const late = await amend(body, { expectedRevision: 2 })
    expect([late.status, late.body.code]).toEqual([409, 'already-struck'])
  })

  test('of a revision that is no longer the newest is refused', async () => {
    const { body } = await recorded()
    await amend(body, { note: 'first' })
    const late = await strike(body)
    expect([late.status, late.body.code]).toEqual([409, 'changed-under-you'])
  })

  test('wants a reason', async () => {
    const { body } = await recorded()
    const reply = await strike(body, { reason: '  ' })
    expect(reply.body).toMatchObject({ code: 'fields-refused', fields: [{ path: 'reason' }] })
  })

  test('a struck drain sent again by its phone is answered as it stands', async () => {
    const { body } = await recorded()
    await strike(body)
    const again = await technician.post('/drains', body)
    expect([again.status, again.body.state]).toEqual([200, 'struck'])
  })
})

describe('who may amend and strike', () => {
  test.each(['amend', 'strike'] as const)('%s: not an auditor', async (what) => {
    const { body } = await recorded()
    const auditor = await signInAs(product, site.organisation, 'auditor')
    const reply = await { amend, strike }[what](body, {}, auditor)
    expect([reply.status, reply.body.code]).toEqual([403, 'not-allowed'])
  })

  test.each(['amend', 'strike'] as const)(
    '%s: to a technician of another site, or another organisation, it is not there',
    async (what) => {
      const { body } = await recorded()
      const elsewhere = await aSite(product, { organisation: site.organisation })
      const colleague = await signInAs(product, site.organisation, 'technician', [elsewhere.id])
      const stranger = (await aSite(product)).organisation.administrator
      for (const by of [colleague, stranger]) {
        const reply = await { amend, strike }[what](body, {}, by)
        expect([reply.status, reply.body.code]).toEqual([404, 'not-found'])
        expect((await by.get(`/drains/${body.id}`)).status).toBe(404)
      }
    },
  )

  test('a colleague at the same site may', async () => {
    const { body } = await recorded()
    const colleague = await signInAs(product, site.organisation, 'technician', [site.id])
    const reply = await amend(body, { note: 'seen' }, colleague)
    expect(reply.status).toBe(200)
    expect(reply.body.revisions[1].by.id).toBe(colleague.id)
  })
})
