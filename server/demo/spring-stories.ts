import { holdContainer } from '../containers/hold-container'
import { recordTransfer } from '../containers/record-transfer'
import { amendDrain } from '../drains/amend-drain'
import { strikeDrain } from '../drains/strike-drain'
import { atSite } from './company'
import { demoId } from './demo-id'
import { drainFactsOf, drainStep } from './drain-steps'
import type { DemoStep } from './replay'
import { reviewFlagsStep } from './review-steps'
import { yearDrain } from './year-drains'

/** The first weeks of 2026: what may happen to fluid that the fixed year does not show. */
export function springStories(): DemoStep[] {
  return [...sentTwice(), ...unitSlip(), ...solventSmell(), ...vanTrip()]
}

/** An old phone sends D-25-0028 once more in January; it is struck out. */
function sentTwice(): DemoStep[] {
  const name = 'D-25-0028 again'
  return [
    drainStep({
      ...yearDrain('D-25-0028'),
      name,
      by: 'Ines Okerlund',
      recorded: atSite('S1', '2026-01-12', '09:12'),
    }),
    {
      name: 'strike D-25-0028 again',
      at: atSite('S1', '2026-01-12', '15:30'),
      by: 'Odile Fenwright',
      act: (tx, context) =>
        strikeDrain(tx, context, demoId(name), {
          expectedRevision: 1,
          reason: 'The same drain as D-25-0028, sent again by an old phone',
        }),
    },
  ]
}

/** 68.5 typed as gallons, read in litres. */
function unitSlip(): DemoStep[] {
  const name = 'M-05 of 10 February 2026'
  const told = {
    machine: 'M-05',
    poured: atSite('S1', '2026-02-10', '10:35'),
    volume: { value: '68.5', unit: 'gal_us' as const },
    method: 'pump-meter' as const,
    legs: [{ container: 'C-101' }],
    filters: 1,
    absorbentKg: '0.6',
  }
  return [
    drainStep({
      ...told,
      name,
      by: 'Ines Okerlund',
      answers: [{ code: 'more-than-machine-holds', answer: 'The meter says so' }],
    }),
    {
      name: `amend ${name}`,
      at: atSite('S1', '2026-02-11', '08:20'),
      by: 'Ines Okerlund',
      act: async (tx, context) =>
        amendDrain(tx, context, demoId(name), {
          ...(await drainFactsOf(tx, { ...told, volume: { value: '68.5', unit: 'L' } })),
          expectedRevision: 1,
          reason: { code: 'wrong-unit', text: 'The meter shows litres' },
          answers: [],
        }),
    },
  ]
}

/** A customer's machine whose fluid smells of solvent goes into a drum of its own, which is held. */
function solventSmell(): DemoStep[] {
  return [
    drainStep({
      name: 'the fluid that smells',
      by: 'Ines Okerlund',
      machine: {
        site: 'S1',
        description: "Customer's tractor, smells of solvent",
        stream: 'mineral',
      },
      poured: atSite('S1', '2026-02-24', '13:20'),
      volume: { value: '6', unit: 'gal_us' },
      method: 'marked-pail',
      legs: [{ container: 'H-1' }],
      note: 'Kept apart from C-101',
    }),
    {
      name: 'hold H-1',
      at: atSite('S1', '2026-02-24', '14:05'),
      by: 'Odile Fenwright',
      act: (tx, context) =>
        holdContainer(tx, context, demoId('H-1'), {
          id: demoId('hold H-1'),
          reason: 'Solvent smell; field test for halogens 1,240 ppm, sample is at the lab',
          halogensPpm: '1240',
        }),
    },
  ]
}

/** A day at a customer's: 48 of 55 gal on the van, emptied into C-101 in the evening. */
function vanTrip(): DemoStep[] {
  const at = (time: string) => atSite('S1', '2026-03-11', time)
  const gallons = (value: string) => ({ value, unit: 'gal_us' as const })
  const emptied = (from: string, time: string): DemoStep => ({
    name: `empty ${from}`,
    at: at(time),
    by: 'Ines Okerlund',
    act: (tx, context) =>
      recordTransfer(tx, context, {
        id: demoId(`empty ${from}`),
        siteId: demoId('S1'),
        fromContainerId: demoId(from),
        toContainerId: demoId('C-101'),
        volume: gallons('24'),
        method: 'marked-pail',
        occurredAt: at(time).toISOString(),
        note: '',
      }),
  })
  return [
    drainStep({
      name: 'M-01 in the field',
      by: 'Ines Okerlund',
      machine: 'M-01',
      poured: at('09:40'),
      volume: gallons('38'),
      method: 'marked-pail',
      legs: [{ container: 'V-1', volume: gallons('24') }, { container: 'V-2' }],
      filters: 2,
    }),
    drainStep({
      name: 'M-03 in the field',
      by: 'Ines Okerlund',
      machine: 'M-03',
      poured: at('13:15'),
      volume: gallons('10'),
      method: 'marked-pail',
      legs: [{ container: 'V-2' }],
    }),
    emptied('V-1', '16:40'),
    emptied('V-2', '16:50'),
    reviewFlagsStep('S1', '2026-03-12', 'One trip, 48 gal, home the same day'),
  ]
}
