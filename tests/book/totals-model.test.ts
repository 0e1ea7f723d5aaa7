import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { addDays, instantFromLocal } from '@/shared/calendar'
import type { Totals } from '@/shared/contracts/books'
import { aContainer, aMachine, aSite, drainBody, signInAs } from '../helpers/factories'
import { expectDone } from '../helpers/pickups'
import { testApp, type TestApp } from '../helpers/test-app'

/**
 * Random lines of a site over two years, most of them close to a midnight, against a model that adds in whole units
 * of 10^-18 litre and cuts months by the day that was written down. EBBMARK_TEST_SEED tries others.
 */
let product: TestApp
beforeAll(async () => {
  product = await testApp({ now: '2026-01-05T12:00:00Z' })
})
afterAll(() => product.close())

/** 10^-18 litres in a hundredth of a gallon (NIST SP 811, Appendix B.8). */
const attoPerHundredth = 37_854_117_840_000_000n
const atto = (exact: string) => {
  const [digits = '', decimals = ''] = exact.replace('-', '').split('.')
  const size = BigInt(digits + decimals.padEnd(18, '0'))
  return exact.startsWith('-') ? -size : size
}

const day = fc.integer({ min: 0, max: 425 }).map((days) => addDays('2024-11-01', days))
const time = fc.constantFrom('00:00', '00:20', '01:59', '12:00', '18:30', '23:40', '23:59')
const hundredths = fc.integer({ min: 1, max: 3_000 })
const step = fc.oneof(
  {
    weight: 5,
    arbitrary: fc.record({
      act: fc.constant('drain' as const),
      day,
      time,
      hundredths,
      into: fc.nat({ max: 2 }),
    }),
  },
  {
    weight: 2,
    arbitrary: fc.record({
      act: fc.constant('amend' as const),
      of: fc.nat({ max: 20 }),
      hundredths,
      day,
      time,
    }),
  },
  {
    weight: 1,
    arbitrary: fc.record({ act: fc.constant('strike' as const), of: fc.nat({ max: 20 }) }),
  },
  {
    weight: 2,
    arbitrary: fc.record({
      act: fc.constant('transfer' as const),
      day,
      time,
      hundredths,
      from: fc.nat({ max: 2 }),
      by: fc.integer({ min: 1, max: 2 }),
    }),
  },
)
type Step = typeof step extends fc.Arbitrary<infer Value> ? Value : never
type Standing = { id: string; revision: number; into: number; hundredths: number; day: string }

async function season(zone: string, steps: readonly Step[]): Promise<void> {
  const site = await aSite(product, { timeZone: zone })
  const technician = await signInAs(product, site.organisation, 'technician', [site.id])
  const auditor = await signInAs(product, site.organisation, 'auditor')
  const machine = await aMachine(site, { reservoir: null, system: null })
  const containers = [await aContainer(site), await aContainer(site), await aContainer(site)]
  const at = (index: number) => {
    const found = containers[index]
    if (found === undefined) throw new Error(`no container ${index}`)
    return found
  }
  const drains: Standing[] = []
  const transfers: { from: number; to: number; hundredths: number; day: string }[] = []
  const factsOf = (given: { hundredths: number; day: string; time: string }) => {
    // A time the clocks skip is moved forward: the day stays.
    const { instant } = instantFromLocal(`${given.day}T${given.time}`, zone)
    const value = (given.hundredths / 100).toFixed(2)
    return { occurredAt: instant, volume: { value, unit: 'gal_us' } }
  }
  for (const one of steps) {
    if (one.act === 'drain') {
      const body = drainBody(site, { machine, container: at(one.into) }, factsOf(one))
      expectDone(await technician.post('/drains', body))
      drains.push({ ...one, id: body.id, revision: 1 })
    } else if (one.act === 'transfer') {
      const to = (one.from + one.by) % 3
      expectDone(
        await technician.post('/transfers', {
          ...factsOf(one),
          id: randomUUID(),
          siteId: site.id,
          fromContainerId: at(one.from).id,
          toContainerId: at(to).id,
          method: 'pump-meter',
        }),
      )
      transfers.push({ ...one, to })
    } else {
      const index = drains.length === 0 ? -1 : one.of % drains.length
      const drain = drains[index]
      if (drain === undefined) continue
      if (one.act === 'strike') {
        const body = { expectedRevision: drain.revision, reason: 'Not so' }
        expectDone(await technician.post(`/drains/${drain.id}/strike`, body))
        drains.splice(index, 1)
        continue
      }
      const whole = drainBody(site, { machine, container: at(drain.into) }, factsOf(one))
      const { id: _id, siteId: _siteId, ...facts } = whole
      expectDone(
        await technician.post(`/drains/${drain.id}/amend`, {
          ...facts,
          expectedRevision: drain.revision,
          reason: { code: 'measured-again' },
        }),
      )
      drains[index] = {
        ...drain,
        revision: drain.revision + 1,
        hundredths: one.hundredths,
        day: one.day,
      }
    }
  }
  for (const year of [2024, 2025]) {
    const read = async (by: string) =>
      expectDone(await auditor.get(`/books/totals?year=${year}&by=${by}`)) as Totals
    const within = (of: { day: string }, month: string) => of.day.startsWith(month)
    const sum = (of: { hundredths: number }[]) =>
      of.reduce((total, { hundredths }) => total + BigInt(hundredths) * attoPerHundredth, 0n)
    const [stream] = (await read('stream')).groups
    for (const { month, in: inward, out } of stream?.months ?? []) {
      expect([month, atto(inward.exact), atto(out.exact)]).toEqual([
        month,
        sum(drains.filter((drain) => within(drain, month))),
        0n,
      ])
    }
    const until = `${year + 1}-01-01`
    for (const group of (await read('container')).groups) {
      const own = containers.findIndex(({ code }) => code === group.label)
      for (const { month, in: inward, out } of group.months) {
        const poured = drains.filter((drain) => drain.into === own && within(drain, month))
        const moved = transfers.filter((transfer) => within(transfer, month))
        expect([month, atto(inward.exact), atto(out.exact)]).toEqual([
          month,
          sum([...poured, ...moved.filter(({ to }) => to === own)]),
          sum(moved.filter(({ from }) => from === own)),
        ])
      }
      const poured = drains.filter((drain) => drain.into === own && drain.day < until)
      const came = transfers.filter((transfer) => transfer.to === own && transfer.day < until)
      const left = transfers.filter((transfer) => transfer.from === own && transfer.day < until)
      expect(atto(group.closing.exact)).toBe(sum([...poured, ...came]) - sum(left))
    }
  }
}

test('totals of any lines are what the model adds up, in any zone', async () => {
  await fc.assert(
    fc.asyncProperty(
      fc.constantFrom('America/Chicago', 'Europe/London', 'Pacific/Auckland', 'Asia/Kolkata'),
      fc.array(step, { minLength: 8, maxLength: 25 }),
      season,
    ),
    {
      numRuns: Number(process.env.EBBMARK_TEST_RUNS ?? 8),
      seed: Number(process.env.EBBMARK_TEST_SEED ?? 20250309),
      endOnFailure: true,
    },
  )
}, 300_000)
