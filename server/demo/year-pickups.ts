import { addDays } from '@/shared/calendar'
import { multiply } from '@/shared/quantities/decimals'
import { atSite, year2025 } from './company'
import { pickupOf } from './pickup-steps'
import type { DemoStep } from './replay'

/**
 * The pickups of 2025: planned three days before, issued the day before, signed early on their day, so that the
 * drains of that day find the room they found.
 */
export function yearPickupSteps(): DemoStep[] {
  return year2025.pickups.flatMap(({ id, site, on, lines }) => {
    const at = (days: number, time: string) => atSite(site, addDays(on, days), time)
    const pickup = pickupOf(site, id)
    const steps = [
      pickup.plan(
        at(-3, '10:20'),
        on,
        lines.map(({ container, shippedMl }) => ({ container, litres: litresOf(shippedMl) })),
      ),
      pickup.issue(at(-1, '15:40')),
      ...pickup.sign(at(0, '07:05')),
    ]
    const received = lines.map(({ receivedMl }) => receivedMl)
    // The return copy of P-25-010 never came.
    if (received.includes(null)) return steps
    const isShort = id === 'P-25-004'
    return [
      ...steps,
      pickup.receive(at(1, '11:10'), addDays(on, 1), `W-${id.slice(-3)}`, ({ line }) => ({
        quantity: { value: litresOf(received[line.position - 1] ?? 0), unit: 'L' },
        pieces: 0,
        method: isShort ? 'facility-gauge' : 'facility-meter',
        note: '',
      })),
      pickup.settle(
        at(isShort ? 5 : 3, '11:30'),
        isShort ? 'free-water-decanted' : 'within-rule',
        isShort
          ? 'Free water decanted before gauging; lab slip of 30 September is in the file'
          : '',
      ),
    ]
  })
}

function litresOf(millilitres: number): string {
  return multiply(String(millilitres), '0.001')
}
