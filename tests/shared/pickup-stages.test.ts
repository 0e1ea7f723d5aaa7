import { shownStage, stagesBefore, stepAllowed } from '@/shared/pickup-stages'

const signedOut = { stage: 'signed-out', returnDueOn: '2025-06-10', hasReceived: false } as const

test('a return is due the day after its last day, and never once it came', () => {
  expect(shownStage({ ...signedOut, today: '2025-06-10' })).toBe('signed-out')
  expect(shownStage({ ...signedOut, today: '2025-06-11' })).toBe('return-due')
  expect(shownStage({ ...signedOut, hasReceived: true, today: '2025-06-11' })).toBe('signed-out')
  expect(shownStage({ ...signedOut, stage: 'settled', today: '2025-06-11' })).toBe('settled')
})

test('what is settled or voided is over', () => {
  for (const step of ['change', 'issue', 'sign', 'receive', 'settle', 'void'] as const) {
    expect(stepAllowed(step, 'settled')).toBe(false)
    expect(stepAllowed(step, 'voided')).toBe(false)
  }
  expect(stagesBefore('issue')).toEqual(['planned'])
  expect(stepAllowed('void', 'differs')).toBe(false)
})
