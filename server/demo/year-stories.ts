import { amendDrain } from '../drains/amend-drain'
import { createRule } from '../limits/change-rules'
import { Problem } from '../problem'
import { setRetired, type SetUpKind } from '../set-up/set-up-act'
import { personKind } from '../set-up/set-up-kinds'
import { atSite } from './company'
import { administrator } from './company-steps'
import { demoId } from './demo-id'
import { drainFactsOf } from './drain-steps'
import { pickupOf } from './pickup-steps'
import type { DemoStep } from './replay'
import { reviewFlagsStep, reviewMarksStep } from './review-steps'
import { misbooked, yearDrain } from './year-drains'

/** What goes wrong in any year, and how it is put right. None of it changes what 2025 sums to. */
export function yearStories(): DemoStep[] {
  return [
    ...expiredPermit(),
    ...teoLeaves(),
    ...wrongDrum(),
    ...ownRule(),
    ...reviews(),
    ...voidedAtTheGate(),
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

/** Osk Landing's own line, written in June after the spring. */
function ownRule(): DemoStep[] {
  return [
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
  ]
}

/** What officers looked at, and what they found. */
function reviews(): DemoStep[] {
  return [
    reviewFlagsStep(
      'S1',
      '2025-01-08',
      'Looked at with the yard plan: under the lean-to, as built',
    ),
    reviewFlagsStep('S3', '2025-01-08', 'C-301 stands in the bunded store'),
    reviewFlagsStep('S2', '2025-10-14', 'The pickup of 13 October took all six drums down'),
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
