import { addDays } from '@/shared/calendar'
import { isPositive, multiply, normalise, roundHalfEven } from '@/shared/quantities/decimals'
import { atSite } from './company'
import { pickupOf } from './pickup-steps'
import type { DemoStep } from './replay'
import type { SeasonYard } from './season-yard'

/** Planned, issued and signed on one morning; received and settled in the days after. */
export function seasonPickup(
  site: string,
  day: string,
  yard: SeasonYard,
  random: () => number,
  containers = yard.toShip(site),
): DemoStep[] {
  if (containers.length === 0) return []
  yard.empty(containers)
  const pickup = pickupOf(site, `${containers.join(' ')} on ${day}`)
  const at = (days: number, time: string) => atSite(site, addDays(day, days), time)
  // Half a per cent up or down: a meter is not a pail.
  const factor = (0.985 + random() * 0.03).toFixed(4)
  return [
    pickup.plan(
      at(0, '06:20'),
      day,
      containers.map((container) => ({ container })),
    ),
    pickup.issue(at(0, '06:40')),
    ...pickup.sign(at(0, '07:05')),
    pickup.receive(at(2, '11:10'), addDays(day, 1), '', (line) => receivedOf(line.line, factor)),
    pickup.settle(at(4, '11:30')),
  ]
}

/** What a facility says it received: litres by its meter, solids as they were shipped. */
export function receivedOf(
  line: { shippedLitres: string; shippedKilograms: string; pieces: number },
  factor: string,
) {
  const isFluid = isPositive(line.shippedLitres)
  return {
    quantity: isFluid
      ? { value: roundHalfEven(multiply(line.shippedLitres, factor), 1), unit: 'L' as const }
      : { value: normalise(line.shippedKilograms), unit: 'kg' as const },
    pieces: line.pieces,
    method: isFluid ? ('facility-meter' as const) : ('count' as const),
    note: '',
  }
}
