import { atSite, machineCalled, year2025, type DemoDrain } from './company'
import { drainStep, type DrainTold } from './drain-steps'
import type { DemoStep } from './replay'

/** Left on Teo's phone when he left on 31 August, and sent when he handed it in. */
const late = ['D-25-0052', 'D-25-0063']
/** Booked into the wrong drum at first: see year-stories.ts. */
export const misbooked = { id: 'D-25-0062', into: 'C-202' }

/** The drains of 2025, each on its day, recorded minutes after it was poured. */
export function yearDrainSteps(): DemoStep[] {
  return year2025.drains.map((drain) => {
    const told = drainTold(drain)
    return drainStep({
      ...told,
      ...(drain.id === misbooked.id ? { legs: [{ container: misbooked.into }] } : {}),
      ...(late.includes(drain.id)
        ? { recorded: atSite('S1', '2025-09-02', drain.id === late[0] ? '16:20' : '16:21') }
        : {}),
      name: drain.id,
      by: drain.by,
    })
  })
}

export function yearDrain(id: string): DrainTold {
  const drain = year2025.drains.find((one) => one.id === id)
  if (drain === undefined) throw new Error(`there is no drain ${id}`)
  return drainTold(drain)
}

function drainTold(drain: DemoDrain): DrainTold {
  const { machine, value, unit, method, legs, filters, absorbentKg } = drain
  return {
    machine,
    poured: pouredAt(drain),
    volume: { value, unit },
    method,
    legs: legs.map(({ container, ml }, index) =>
      index === legs.length - 1
        ? { container }
        : { container, volume: { value: String(ml), unit: 'mL' } },
    ),
    filters,
    absorbentKg,
  }
}

/**
 * The day is given, the time is not: drains of one site on one day are hours apart, none on a full hour. The one on
 * the day the clocks go forward has its own.
 */
function pouredAt(drain: DemoDrain): Date {
  const { site } = machineCalled(drain.machine)
  const sameDay = year2025.drains.filter(
    ({ on, machine }) => on === drain.on && machineCalled(machine).site === site,
  )
  const position = sameDay.indexOf(drain)
  const number = Number(drain.id.slice(-4))
  const minutes = position * 185 + ((number * 37) % 60)
  const clock = 8 * 60 + minutes
  const time = `${String(Math.floor(clock / 60)).padStart(2, '0')}:${String(clock % 60).padStart(2, '0')}`
  return atSite(site, drain.on, drain.id === 'D-25-0028' ? '14:05' : time)
}
