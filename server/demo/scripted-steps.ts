import { and, eq, isNull } from 'drizzle-orm'
import { flags } from '@/db/schema/limits'
import { marks } from '@/db/schema/drains'
import { recordTransfer } from '../containers/record-transfer'
import { holdContainer } from '../containers/hold-container'
import { amendDrain } from '../drains/amend-drain'
import { reviewMark } from '../drains/review-mark'
import { strikeDrain } from '../drains/strike-drain'
import { createRule } from '../limits/change-rules'
import { reviewFlag } from '../limits/review-flag'
import { Problem } from '../problem'
import { setRetired, type SetUpKind } from '../set-up/set-up-act'
import { personKind } from '../set-up/set-up-kinds'
import { atSite, pickupPartiesOf } from './company'
import { administrator } from './company-steps'
import { demoId } from './demo-id'
import { drainFactsOf, drainStep } from './drain-steps'
import { pickupOf } from './pickup-steps'
import type { DemoStep } from './replay'
import { misbooked, yearDrain } from './year-drains'

/** What goes wrong in any yard, and how it is put right. None of it changes what 2025 sums to. */
export function scriptedSteps(): DemoStep[] {
  return [
    ...expiredPermit(),
    ...teoLeaves(),
    ...wrongDrum(),
    ...ownRule(),
    ...voidedAtTheGate(),
    ...sentTwice(),
    ...unitSlip(),
    ...solventSmell(),
    ...vanTrip(),
  ]
}

/** 2 July: the hauler's permit ended on 30 June. The issue is refused, the plan waits, and is dropped in the end. */
function expiredPermit(): DemoStep[] {
  const pickup = pickupOf('S1', 'of 2 July 2025')
  const issue = pickup.issue(atSite('S1', '2025-07-02', '08:15'))
  return [
    pickup.plan(atSite('S1', '2025-06-30', '10:05'), '2025-07-02', [{ container: 'C-101' }]),
    { ...issue, act: (tx, context) => refused('permit-expired', () => issue.act(tx, context)) },
    pickup.void(
      atSite('S1', '2025-07-08', '09:30'),
      'The permit was renewed today; there is room in C-101 until September',
    ),
  ]
}

/** What was poured before Teo left came with his phone; then his account is closed. */
function teoLeaves(): DemoStep[] {
  return [
    {
      name: 'Teo leaves',
      at: atSite('S1', '2025-09-02', '17:10'),
      by: administrator,
      act: (tx, context) =>
        setRetired(
          tx,
          context,
          personKind as unknown as SetUpKind<typeof personKind.table, never>,
          demoId('Teo Marbach'),
          true,
        ),
    },
  ]
}

/** A leg booked to C-202 had gone into C-201: found when the October pickup took C-201 below zero. */
function wrongDrum(): DemoStep[] {
  return [
    {
      name: 'the right drum',
      at: atSite('S2', '2025-10-14', '09:10'),
      by: 'Ines Okerlund',
      act: async (tx, context) =>
        amendDrain(tx, context, demoId(misbooked.id), {
          ...(await drainFactsOf(tx, yearDrain(misbooked.id))),
          expectedRevision: 1,
          reason: { code: 'wrong-container', text: 'It was poured into C-201' },
          answers: [],
        }),
    },
  ]
}

/** Osk Landing's own line, written in June; its flags and those of the packs are looked at. */
function ownRule(): DemoStep[] {
  return [
    reviewFlagsStep(
      'S1',
      '2025-01-08',
      'Looked at with the yard plan: inside the lean-to, as built',
    ),
    reviewFlagsStep('S3', '2025-01-08', 'C-301 stands in the bunded store'),
    {
      name: 'own rule of S2',
      at: atSite('S2', '2025-06-02', '14:00'),
      by: 'Odile Fenwright',
      act: (tx, context) =>
        createRule(tx, context, {
          id: demoId('own rule of S2'),
          siteId: demoId('S2'),
          title: 'On hand at Osk Landing',
          measure: 'contents-volume',
          scope: 'site',
          streams: { classes: [], streamIds: [] },
          threshold: { value: '240', unit: 'gal_us' },
          comparison: 'gt',
          warnPercent: '80',
          minimumCapacity: null,
          consequence: 'Order a pickup',
          citation: 'Company rule, yard manual 4.2',
        }),
    },
    reviewFlagsStep(
      'S2',
      '2025-10-14',
      'All six drums left or went down with the pickup of 13 October',
    ),
    reviewFlagsStep('S2', '2026-01-05', 'Year-end pickup taken on 30 December'),
    ...['2025-01-31', '2025-03-31', '2025-06-30', '2025-09-30', '2025-12-29'].map((on) =>
      reviewMarksStep('S3', on, 'Asked at the bench: litres, as typed'),
    ),
  ]
}

/** 31 December: signed, then the drum's bung leaked on the tail lift. The number stays, the fluid goes back. */
function voidedAtTheGate(): DemoStep[] {
  const pickup = pickupOf('S2', 'of 31 December 2025')
  const at = (time: string) => atSite('S2', '2025-12-31', time)
  return [
    pickup.plan(at('08:30'), '2025-12-31', [{ container: 'C-206' }]),
    pickup.issue(at('08:50')),
    ...pickup.sign(at('10:15')),
    pickup.void(at('11:05'), 'The bung of C-206 leaked on the tail lift; the drum came back'),
  ]
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

/** The officer of a site goes through its open flags. */
export function reviewFlagsStep(site: string, on: string, note: string): DemoStep {
  return {
    name: `flags of ${site} on ${on}`,
    at: atSite(site, on, '16:30'),
    by: site === 'S3' ? pickupPartiesOf(site).officer : 'Odile Fenwright',
    act: async (tx, context) => {
      const open = await tx
        .select({ id: flags.id })
        .from(flags)
        .where(and(eq(flags.siteId, demoId(site)), eq(flags.state, 'open')))
      for (const { id } of open) await reviewFlag(tx, context, id, note)
    },
  }
}

/** The officer of a site goes through what needs a look. */
export function reviewMarksStep(site: string, on: string, note: string): DemoStep {
  return {
    name: `marks of ${site} on ${on}`,
    at: atSite(site, on, '16:40'),
    by: pickupPartiesOf(site).officer,
    act: async (tx, context) => {
      const open = await tx
        .select({ id: marks.id })
        .from(marks)
        .where(and(eq(marks.siteId, demoId(site)), isNull(marks.reviewedAt)))
      for (const { id } of open) await reviewMark(tx, context, id, note)
    },
  }
}

/** Some acts are refused: what a person would see then is the story. */
async function refused(code: string, act: () => Promise<unknown>): Promise<void> {
  try {
    await act()
  } catch (error) {
    if (error instanceof Problem && error.code === code) return
    throw error
  }
  throw new Error(`the demo expected the refusal ${code}`)
}
