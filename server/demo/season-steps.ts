import { addDays, daysBetween, localDay } from '@/shared/calendar'
import { atSite, machineCalled, quillbrook, siteCalled, year2025 } from './company'
import { permitStep } from './company-steps'
import { drainStep } from './drain-steps'
import type { DemoStep } from './replay'
import { reviewFlagsStep, reviewMarksStep } from './review-steps'
import { seasonEnding } from './season-ending'
import { seasonPickup } from './season-pickup'
import { seasonYard, type Season } from './season-yard'
import { seededRandom } from './seeded-random'

/** The fixed year and its sequel are over by then. */
const earliest = '2026-04-06'
const seasonDays = 182
/** The last days are arranged, so that there is something to see: see season-ending.ts. */
const arrangedDays = 14

/** Osk Landing has drums, which go when there is no room in them. */
const totes: Record<string, string> = { S1: 'C-101', S3: 'C-301' }

/**
 * The 26 weeks before a day, drawn from a seed: drains like those of the fixed year, as often as their month has
 * them, and pickups when there is no more room.
 * @param litres what stands in the containers when the season begins, by code
 */
export function seasonSteps(
  now: Date,
  seed: string,
  litres: ReadonlyMap<string, number>,
): DemoStep[] {
  const season: Season = {
    yard: seasonYard(litres),
    random: seededRandom(seed),
    today: (site) => localDay(now, siteCalled(site).timeZone),
  }
  const start = laterOf(addDays(season.today('S1'), -seasonDays), earliest)
  if (daysBetween(start, season.today('S1')) < 2 * arrangedDays) return []
  const sites = quillbrook.sites.map(({ code }) => code)
  return [
    ...permitsUntil(season.today('S1')),
    ...sites.flatMap((site) => daysOf(site, start, season)),
    ...sites.flatMap((site) => reviewsOf(site, start, season.today(site))),
    ...seasonEnding(season),
  ]
}

function daysOf(site: string, start: string, season: Season): DemoStep[] {
  const { yard, random } = season
  const end = addDays(season.today(site), -arrangedDays)
  const steps: DemoStep[] = []
  for (let day = start; day < end; day = addDays(day, 1)) {
    // A tote is sent off early, but not so late that it would stand empty at the end.
    const isFull = yard.share(totes[site] ?? '') > 0.85
    if (isFull && daysBetween(day, end) > 40) {
      steps.push(...seasonPickup(site, day, yard, random))
    }
    if (day === addDays(end, -45) && site === 'S1') {
      steps.push(...seasonPickup(site, day, yard, random, ['F-1', 'A-1']))
    }
    if (random() > chanceOf(site, day)) continue
    const told = likeLastYear(site, random)
    let legs = yard.pour(told.machine, told.value, told.unit)
    if (legs === undefined) {
      steps.push(...seasonPickup(site, day, yard, random))
      legs = yard.pour(told.machine, told.value, told.unit)
    }
    if (legs === undefined) continue
    steps.push(
      drainStep({
        name: `${told.machine} on ${day}`,
        by: told.by,
        machine: told.machine,
        poured: atSite(site, day, `${String(8 + Math.floor(random() * 8)).padStart(2, '0')}:25`),
        volume: { value: String(told.value), unit: told.unit },
        method: told.method,
        legs,
        filters: told.filters,
        absorbentKg: told.absorbentKg,
      }),
    )
  }
  return steps
}

/** How likely a day of this month has a drain at the site. */
function chanceOf(site: string, day: string): number {
  const shares = quillbrook.sites.find(({ code }) => code === site)?.drainsByMonth ?? []
  const all = shares.reduce((total, share) => total + share, 0)
  const yearly = year2025.drains.filter(
    ({ machine }) => machineCalled(machine).site === site,
  ).length
  return (yearly * (shares[Number(day.slice(5, 7)) - 1] ?? 0)) / all / 30
}

/** A drain of the fixed year again, half a unit more or less. */
function likeLastYear(site: string, random: () => number) {
  const own = year2025.drains.filter(
    ({ machine, by }) => machineCalled(machine).site === site && by !== 'Teo Marbach',
  )
  const drain = own[Math.floor(random() * own.length)]
  if (drain === undefined) throw new Error(`${site} had no drains`)
  const value = Number(drain.value) + (Math.floor(random() * 3) - 1) / 2
  return { ...drain, value: Math.max(1, value) }
}

/** An officer goes through flags and marks every four weeks, the last time two weeks ago. */
function reviewsOf(site: string, start: string, today: string): DemoStep[] {
  const steps: DemoStep[] = []
  for (let day = addDays(today, -arrangedDays); day > start; day = addDays(day, -28)) {
    steps.push(
      reviewFlagsStep(site, day, 'Seen on the round; the next pickup takes it down'),
      reviewMarksStep(site, day, 'Asked at the bench: it is right as typed'),
    )
  }
  return steps
}

/** Permits are renewed in time, year after year. */
function permitsUntil(today: string): DemoStep[] {
  return quillbrook.haulers.flatMap(({ name, permits }) => {
    const steps: DemoStep[] = []
    let ends = permits.at(-1)?.endsOn ?? today
    while (addDays(ends, -9) <= today) {
      const starts = addDays(ends, 1)
      steps.push(
        permitStep(name, starts, addDays(ends, 365), atSite('S1', addDays(ends, -9), '09:00')),
      )
      ends = addDays(ends, 365)
    }
    return steps
  })
}

function laterOf(a: string, b: string): string {
  return a > b ? a : b
}
