import { addDays } from '@/shared/calendar'
import { atSite, machineCalled, siteCalled } from './company'
import { drainStep } from './drain-steps'
import { pickupOf } from './pickup-steps'
import type { DemoStep } from './replay'
import { receivedOf, seasonPickup } from './season-pickup'
import type { Season } from './season-yard'

/**
 * The last two weeks, so that whoever looks sees a yard at work: a tote near its line with a pickup planned, a
 * manifest that is ready, a receipt that differs, an open flag, and a drain that needs a look.
 */
export function seasonEnding(season: Season): DemoStep[] {
  return [...yardAtWork(season), ...drumsReadyToGo(season), ...receiptThatDiffers(season)]
}

/** Brindle Hollow: C-101 fills up; one drain of a small lift looks like litres typed as gallons. */
function yardAtWork({ yard, random, today }: Season): DemoStep[] {
  const on = (daysAgo: number) => addDays(today('S1'), -daysAgo)
  const before = yard.share('C-101') > 0.8 ? seasonPickup('S1', on(14), yard, random) : []
  const drain = drainsOf({ yard, on, site: 'S1', by: 'Ines Okerlund' })
  const steps = [
    ...before,
    ...drain('M-04', '18', 1, '14:20', [
      { code: 'looks-like-litres', answer: 'It is gallons' },
      { code: 'more-than-machine-holds', answer: 'The meter says so' },
    ]),
    ...drain('M-02', '5.5', 0, '07:50'),
  ]
  // Largest first, as long as C-101 stays below its line; no machine twice in three days.
  const changes = [
    ['M-01', '39'],
    ['M-05', '27.5'],
    ['M-03', '24'],
    ['M-02', '17'],
    ['M-04', '4.5'],
  ] as const
  const last: string[] = []
  for (let daysAgo = 13; daysAgo > 1 && yard.share('C-101') < 0.9; daysAgo -= 1) {
    const next = changes.find(
      ([machine, gallons]) =>
        !last.slice(-2).includes(machine) &&
        yard.share('C-101') + (Number(gallons) * 3.785) / 989 < 0.955,
    )
    if (next === undefined) continue
    last.push(next[0])
    steps.push(...drain(next[0], next[1], daysAgo, '10:15'))
  }
  const planned = pickupOf('S1', 'planned at the end')
  return [...steps, planned.plan(atSite('S1', on(1), '11:00'), on(-4), [{ container: 'C-101' }])]
}

/** Osk Landing: its drums fill past the company's own line, and a manifest is ready for tomorrow. */
function drumsReadyToGo({ yard, today }: Season): DemoStep[] {
  const on = (daysAgo: number) => addDays(today('S2'), -daysAgo)
  const drain = drainsOf({ yard, on, site: 'S2', by: 'Wren Dalquist' })
  const steps = [
    ...drain('M-07', '94', 11, '09:30'),
    ...drain('M-08', '54.5', 8, '13:10'),
    ...drain('M-09', '75', 6, '10:40'),
  ]
  const ready = pickupOf('S2', 'ready at the end')
  const containers = yard.toShip('S2')
  return [
    ...steps,
    ready.plan(
      atSite('S2', on(2), '10:00'),
      on(-1),
      containers.map((container) => ({ container })),
    ),
    ready.issue(atSite('S2', on(1), '15:40')),
    ...drain('M-06', '2', 0, '07:50'),
  ]
}

/** Gorsewick: what left nine days ago came to less at the works; the cause is still asked for. */
function receiptThatDiffers({ yard, today }: Season): DemoStep[] {
  const on = (daysAgo: number) => addDays(today('S3'), -daysAgo)
  const drain = drainsOf({ yard, on, site: 'S3', by: 'Perrin Ashgrove' })
  const pickup = pickupOf('S3', 'differs at the end')
  const first = drain('M-11', '131.5', 12, '11:20')
  yard.empty(['C-301'])
  return [
    ...first,
    pickup.plan(atSite('S3', on(11), '10:20'), on(9), [{ container: 'C-301' }]),
    pickup.issue(atSite('S3', on(10), '15:40')),
    ...pickup.sign(atSite('S3', on(9), '07:05')),
    pickup.receive(atSite('S3', on(2), '11:10'), on(8), '', ({ line }) =>
      receivedOf(line, '0.874'),
    ),
    ...drain('M-10', '90.5', 7, '09:40'),
    ...drain('M-12', '29.5', 5, '14:05'),
    ...drain('M-10', '34', 2, '10:30'),
    ...drain('M-12', '12', 0, '07:50'),
  ]
}

/** A drain of so many days ago; none where there is no room for it. */
function drainsOf(given: {
  yard: Season['yard']
  on: (daysAgo: number) => string
  site: string
  by: string
}) {
  const { yard, on, site, by } = given
  return (
    machine: string,
    value: string,
    daysAgo: number,
    time: string,
    answers: { code: string; answer: string }[] = [],
  ): DemoStep[] => {
    const unit = siteCalled(site).volumeUnit
    const legs = yard.pour(machine, Number(value), unit)
    if (legs === undefined) return []
    const isChange = Number(value) * (unit === 'L' ? 1 : 3.785) > 60
    return [
      drainStep({
        name: `${machine} on ${on(daysAgo)} at the end`,
        by,
        machine: machineCalled(machine).code,
        poured: atSite(site, on(daysAgo), time),
        volume: { value, unit },
        method: 'pump-meter',
        legs,
        filters: isChange ? 2 : 0,
        absorbentKg: '0.4',
        answers,
      }),
    ]
  }
}
