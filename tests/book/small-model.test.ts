import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { bookFindings, bookLines } from '../helpers/book'
import { aContainer, aMachine, aSite, drainBody, signInAs } from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

/**
 * Random seasons of a site, asked over HTTP, against a model that counts in whole units of 10^-18 litre: every reply
 * and, at the end, every container and the whole book. EBBMARK_TEST_SEED tries other seasons.
 */
let product: TestApp
beforeAll(async () => {
  product = await testApp()
})
afterAll(() => product.close())

/** 10^-18 litres in a thousandth of each unit (NIST SP 811, Appendix B.8). */
const attoLitres = {
  L: 10n ** 15n,
  gal_us: 3_785_411_784_000_000n,
  gal_imp: 4_546_090_000_000_000n,
  quart_us: 946_352_946_000_000n,
  fl_oz_us: 29_573_529_562_500n,
  mL: 10n ** 12n,
  in3: 16_387_064_000_000n,
} as const
type Unit = keyof typeof attoLitres

const volume = fc.record({
  thousandths: fc.integer({ min: 1, max: 60_000 }),
  unit: fc.constantFrom(...(Object.keys(attoLitres) as Unit[])),
})
type Volume = { thousandths: number; unit: Unit }
const container = fc.nat({ max: 3 })
const pick = fc.nat({ max: 30 })
const poured = fc.record({
  volume,
  into: container,
  /** A second leg, and how many thousandths of the volume the first takes. */
  rest: fc.option(fc.record({ into: container, share: fc.integer({ min: 1, max: 999 }) }), {
    nil: undefined,
  }),
})

const step = fc.oneof(
  { weight: 5, arbitrary: fc.record({ act: fc.constant('drain' as const), poured }) },
  {
    weight: 3,
    arbitrary: fc.record({
      act: fc.constant('amend' as const),
      of: pick,
      poured,
      late: fc.boolean(),
    }),
  },
  { weight: 2, arbitrary: fc.record({ act: fc.constant('strike' as const), of: pick }) },
  { weight: 2, arbitrary: fc.record({ act: fc.constant('again' as const), of: pick }) },
  {
    weight: 4,
    arbitrary: fc.record({
      act: fc.constant('transfer' as const),
      from: container,
      to: container,
      volume,
    }),
  },
  { weight: 1, arbitrary: fc.record({ act: fc.constant('hold' as const), of: container }) },
  { weight: 1, arbitrary: fc.record({ act: fc.constant('release' as const), of: container }) },
)

type Step = typeof step extends fc.Arbitrary<infer T> ? T : never
type Poured = typeof poured extends fc.Arbitrary<infer T> ? T : never

const attoOf = ({ thousandths, unit }: Volume) => BigInt(thousandths) * attoLitres[unit]
const typed = ({ thousandths, unit }: Volume) => ({
  value: `${Math.floor(thousandths / 1000)}.${String(thousandths % 1000).padStart(3, '0')}`,
  unit,
})

/** A decimal string in 10^-18. */
function atto(decimal: string): bigint {
  const [whole = '0', part = ''] = decimal.replace('-', '').split('.')
  const figure = BigInt(whole + part.padEnd(18, '0'))
  return decimal.startsWith('-') ? -figure : figure
}

type Leg = [into: number, litres: bigint]
type Modelled = {
  body: ReturnType<typeof drainBody>
  legs: Leg[]
  revision: number
  struck: boolean
}

/** The model: what stands in each container is what drains and transfers say, and nothing else. */
class SmallModel {
  readonly drains: Modelled[] = []
  readonly moved: Leg[] = []
  readonly held = new Set<number>()
  lines = 0

  standsIn(index: number): bigint {
    const standing = this.drains.filter(({ struck }) => !struck).flatMap(({ legs }) => legs)
    return [...standing, ...this.moved].reduce(
      (total, [into, litres]) => (into === index ? total + litres : total),
      0n,
    )
  }
}

async function season(steps: Step[]) {
  const site = await aSite(product)
  const officer = await signInAs(product, site.organisation, 'officer', [site.id])
  const machine = await aMachine(site)
  const containers = [
    await aContainer(site),
    await aContainer(site, { stream: 'ester' }),
    await aContainer(site, { type: 'tote', capacity: { value: '275', unit: 'gal_us' } }),
    await aContainer(site, { type: 'pail', capacity: { value: '20', unit: 'L' } }),
  ]
  const idOf = (index: number) => containers[index]?.id ?? ''
  const model = new SmallModel()

  const factsOf = ({ volume: whole, into, rest }: Poured) => {
    const first = rest && {
      ...whole,
      thousandths: Math.floor((whole.thousandths * rest.share) / 1000),
    }
    if (rest === undefined || first === undefined || first.thousandths === 0) {
      const legs: Leg[] = [[into, attoOf(whole)]]
      return { body: { volume: typed(whole), legs: [{ containerId: idOf(into) }] }, legs }
    }
    const legs: Leg[] = [
      [into, attoOf(first)],
      [rest.into, attoOf(whole) - attoOf(first)],
    ]
    const asked = [
      { containerId: idOf(into), volume: typed(first) },
      { containerId: idOf(rest.into) },
    ]
    return { body: { volume: typed(whole), legs: asked }, legs }
  }
  /** What the reply to a drain says stands in its containers is what the model says. */
  const expectContents = (body: { containersAfter: { containerId: string; litres: string }[] }) => {
    for (const after of body.containersAfter) {
      const index = containers.findIndex(({ id }) => id === after.containerId)
      expect(atto(after.litres)).toBe(model.standsIn(index))
    }
  }
  const pickDrain = (of: number) => model.drains[of % Math.max(1, model.drains.length)]

  async function take(one: Step) {
    if (one.act === 'drain') {
      const { body: more, legs } = factsOf(one.poured)
      const body = drainBody(site, { machine, container: { id: idOf(0) } }, more)
      const reply = await officer.post('/drains', body)
      expect(reply.status).toBe(201)
      model.drains.push({ body, legs, revision: 1, struck: false })
      model.lines += legs.length
      expect(reply.body.number).toBe(`D-25-${String(model.drains.length).padStart(4, '0')}`)
      expectContents(reply.body)
      return
    }
    if (one.act === 'transfer') {
      const reply = await officer.post('/transfers', {
        id: randomUUID(),
        siteId: site.id,
        fromContainerId: idOf(one.from),
        toContainerId: idOf(one.to),
        volume: typed(one.volume),
        method: 'pump-meter',
        occurredAt: '2025-03-10T16:00:00Z',
      })
      if (one.from === one.to) return expect(reply.body.code).toBe('same-container')
      if (model.held.has(one.from) || model.held.has(one.to))
        return expect(reply.body.code).toBe('container-held')
      expect(reply.status).toBe(201)
      const litres = attoOf(one.volume)
      expect(atto(reply.body.litres)).toBe(litres)
      model.moved.push([one.from, -litres], [one.to, litres])
      model.lines += 1
      return
    }
    if (one.act === 'hold' || one.act === 'release') {
      const isHeld = model.held.has(one.of)
      const body = one.act === 'hold' ? { id: randomUUID(), reason: 'Why not' } : { note: 'Fine' }
      const reply = await officer.post(`/containers/${idOf(one.of)}/${one.act}`, body)
      if ((one.act === 'hold') === isHeld)
        return expect(reply.body.code).toBe(isHeld ? 'already-held' : 'not-held')
      expect(reply.status).toBe(200)
      if (isHeld) model.held.delete(one.of)
      else model.held.add(one.of)
      return
    }
    const drain = pickDrain(one.of)
    if (drain === undefined) return
    const { id, siteId: _, ...facts } = drain.body
    if (one.act === 'again') {
      const reply = await officer.post('/drains', drain.body)
      expect(reply.status).toBe(200)
      expect(reply.body.state).toBe(drain.struck ? 'struck' : 'standing')
      return expectContents(reply.body)
    }
    const before = drain.legs.length
    if (one.act === 'strike') {
      const asked = { expectedRevision: drain.revision, reason: 'Did not happen' }
      const reply = await officer.post(`/drains/${id}/strike`, asked)
      if (drain.struck) return expect(reply.body.code).toBe('already-struck')
      expect(reply.status).toBe(200)
      Object.assign(drain, { struck: true, revision: drain.revision + 1 })
      model.lines += before
      return expectContents(reply.body)
    }
    const { body: more, legs } = factsOf(one.poured)
    const reply = await officer.post(`/drains/${id}/amend`, {
      ...facts,
      ...more,
      expectedRevision: one.late ? drain.revision + 1 : drain.revision,
      reason: { code: 'mistyped', text: '' },
    })
    if (drain.struck) return expect(reply.body.code).toBe('already-struck')
    if (one.late) return expect(reply.body.code).toBe('changed-under-you')
    expect(reply.status).toBe(200)
    Object.assign(drain, { legs, revision: drain.revision + 1 })
    model.lines += before + legs.length
    expectContents(reply.body)
  }

  for (const one of steps) await take(one)

  const { body } = await officer.get(`/containers?siteId=${site.id}`)
  for (const [index, { id }] of containers.entries()) {
    const shown = body.rows.find((row: { id: string }) => row.id === id)
    const standing = model.standsIn(index)
    expect([id, atto(shown.litres), shown.hold !== null]).toEqual([
      id,
      standing,
      model.held.has(index),
    ])
    expect(shown.level === 'below-zero').toBe(standing < 0n)
    const detail = await officer.get(`/containers/${id}?lines=500`)
    const lines: { litres: string; litresAfter: string }[] = detail.body.lines
    expect(lines.reduce((total, line) => total + atto(line.litres), 0n)).toBe(standing)
    expect(atto(lines[0]?.litresAfter ?? '0')).toBe(standing)
  }
  expect(await bookLines(product, site.id)).toHaveLength(model.lines)
  expect(await bookFindings(product)).toEqual([])
}

test('any season of drains, amendments, strikes, transfers and holds is what the small model says', async () => {
  await fc.assert(fc.asyncProperty(fc.array(step, { minLength: 10, maxLength: 35 }), season), {
    numRuns: Number(process.env.EBBMARK_TEST_RUNS ?? 10),
    seed: Number(process.env.EBBMARK_TEST_SEED ?? 20250309),
    endOnFailure: true,
  })
}, 300_000)
