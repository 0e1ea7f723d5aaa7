import {
  containerQuestionsOf,
  questionsOf,
  type ContainerInQuestion,
  type DrainInQuestion,
  type RecordedDrain,
} from '@/shared/drain-questions'
import { add, multiply } from '@/shared/quantities/decimals'

const gallon = '3.785411784'
const gal = (count: string) => multiply(count, gallon)

const drum: ContainerInQuestion = {
  id: 'drum',
  code: 'C-1',
  streamId: 'mineral',
  streamName: 'Used mineral hydraulic fluid',
  litres: '0',
  fillLineLitres: '200',
  isHeld: false,
  holdReason: '',
  isRetired: false,
}
const machine = { id: 'm', code: 'M-5', reservoirLitres: null, systemLitres: null }

/** A drain of so many litres into a container with room for all of it. */
function drain(litres: string, more: Partial<DrainInQuestion> = {}): DrainInQuestion {
  return {
    id: 'this',
    streamId: 'mineral',
    streamName: 'Used mineral hydraulic fluid',
    litres,
    unit: 'gal_us',
    occurredAt: '2025-03-10T15:00:00Z',
    machine,
    legs: [{ container: { ...drum, fillLineLitres: '100000' }, litres }],
    ...more,
  }
}

const codesOf = (asked: DrainInQuestion, recent: RecordedDrain[] = []) =>
  questionsOf(asked, recent).map(({ code }) => code)

describe('over the fill line', () => {
  const into = (litres: string, poured: string) =>
    containerQuestionsOf(drain('1'), { container: { ...drum, litres }, litres: poured })

  test.each([
    ['empty to the line', '0', '200', undefined],
    ['one drop over', '0', '200.000000000000000001', '0.000000000000000001'],
    ['the rest to the line', '150.5', '49.5', undefined],
    ['on top of the line', '200', '0.1', '0.1'],
    ['over already', '210', '5', '15'],
    ['a book below zero has more room', '-10', '210', undefined],
  ])('%s', (_, litres, poured, over) => {
    expect(into(litres, poured)[0]?.facts.overLitres).toBe(over)
  })
})

test('questions about a container are asked once for it, in a fixed order', () => {
  const container = {
    ...drum,
    isHeld: true,
    holdReason: 'Tested',
    isRetired: true,
    streamId: 'ester',
  }
  const legs = ['150', '150'].map((litres) => ({ container, litres }))
  expect(codesOf(drain('300', { legs }))).toEqual([
    'container-retired',
    'container-held',
    'wrong-stream',
    'over-fill-line',
  ])
})

describe('more than the machine holds: above 1.05 of the system, or of twice the reservoir', () => {
  test.each([
    [{ systemLitres: '100', reservoirLitres: null }, '105', false],
    [{ systemLitres: '100', reservoirLitres: null }, '105.000001', true],
    [{ systemLitres: null, reservoirLitres: '50' }, '105', false],
    [{ systemLitres: null, reservoirLitres: '50' }, '105.000001', true],
    // The system is what counts where it is known.
    [{ systemLitres: '300', reservoirLitres: '50' }, '106', false],
    [{ systemLitres: null, reservoirLitres: null }, '99999', false],
  ])('%o, %s L: %s', (holds, litres, isAsked) => {
    const asked = codesOf(drain(litres, { unit: 'mL', machine: { ...machine, ...holds } }))
    expect(asked).toEqual(isAsked ? ['more-than-machine-holds'] : [])
  })

  test('48 gal in it, 185 typed', () => {
    const holding = { ...machine, systemLitres: gal('48') }
    expect(questionsOf(drain(gal('185'), { machine: holding }), [])).toEqual([
      {
        code: 'more-than-machine-holds',
        containerId: null,
        facts: { machine: 'M-5', holdsLitres: gal('48'), typedLitres: gal('185') },
      },
    ])
  })

  test('a machine that is not on the list holds nobody knows what', () => {
    expect(codesOf(drain('99999', { machine: null }))).toEqual([])
  })
})

describe('litres typed as gallons or the other way round: within 12 % of the ratio of the two', () => {
  // 95 % of a reservoir of 100 L is expected: 95 L. A system that large is never asked about.
  const reservoir = { ...machine, reservoirLitres: '100', systemLitres: '100000' }
  const slip = (litres: string, unit: string) =>
    codesOf(drain(litres, { unit, machine: reservoir }))

  test.each([
    ['the ratio itself', multiply('95', gallon), true],
    ['12 % less', multiply(multiply('95', gallon), '0.8801'), true],
    ['more than 12 % less', multiply(multiply('95', gallon), '0.8799'), false],
    ['12 % more', multiply(multiply('95', gallon), '1.1199'), true],
    ['more than 12 % more', multiply(multiply('95', gallon), '1.1201'), false],
    ['what is expected', '95', false],
  ])('gallons, %s', (_, litres, isAsked) => {
    expect(slip(litres, 'gal_us')).toEqual(isAsked ? ['looks-like-litres'] : [])
  })

  test.each([
    ['25.0966 L: a 3.785th', '25.0966', true],
    ['just inside', '28.1', true],
    ['just outside', '28.2', false],
    ['what is expected', '95', false],
  ])('litres, %s', (_, litres, isAsked) => {
    expect(slip(litres, 'L')).toEqual(isAsked ? ['looks-like-gallons'] : [])
  })

  test('what was meant is said exactly', () => {
    const typed = { unit: 'gal_us', machine: reservoir }
    expect(questionsOf(drain(gal('95'), typed), [])[0]?.facts.meantLitres).toBe('95')
    const asLitres = { unit: 'L', machine: reservoir }
    expect(questionsOf(drain('25', asLitres), [])[0]?.facts.meantLitres).toBe('94.6352946')
  })

  test.each(['gal_imp', 'mL', 'quart_us'])('is not asked of a figure in %s', (unit) => {
    expect(slip(multiply('95', gallon), unit)).toEqual([])
    expect(slip('25', unit)).toEqual([])
  })

  test('is not asked where no reservoir is on record, or one of nothing', () => {
    for (const reservoirLitres of [null, '0']) {
      const unknown = { ...machine, reservoirLitres, systemLitres: '100000' }
      expect(codesOf(drain(gal('95'), { machine: unknown }))).toEqual([])
    }
  })
})

describe('looks like one already saved', () => {
  const saved: RecordedDrain = {
    id: 'other',
    number: 'D-25-0028',
    machineId: 'm',
    containerIds: ['drum', 'tote'],
    litres: '100',
    occurredAt: '2025-03-10T15:00:00Z',
    by: 'Ines Invented',
  }
  const looks = (other: Partial<RecordedDrain>, litres = '100') =>
    codesOf(drain(litres), [{ ...saved, ...other }]).includes('looks-like-saved')

  test.each([
    ['the same figures', {}, true],
    ['two hours earlier', { occurredAt: '2025-03-10T13:00:00Z' }, true],
    ['a second more than two hours earlier', { occurredAt: '2025-03-10T12:59:59Z' }, false],
    ['two hours later', { occurredAt: '2025-03-10T12:00:00-05:00' }, true],
    ['of another machine', { machineId: 'n' }, false],
    ['of a machine not on the list', { machineId: null }, false],
    ['into another container', { containerIds: ['tote'] }, false],
    ['the very same record', { id: 'this' }, false],
  ])('%s', (_, other, isAsked) => {
    expect(looks(other)).toBe(isAsked)
  })

  test.each([
    ['102', true],
    ['102.000001', false],
    ['98', true],
    ['97.999999', false],
  ])('100 L saved, %s L typed: %s', (litres, isAsked) => {
    expect(looks({}, litres)).toBe(isAsked)
  })

  test('two machines not on the list are never taken for one', () => {
    const unlisted = drain('100', { machine: null })
    expect(codesOf(unlisted, [{ ...saved, machineId: null }])).toEqual([])
  })

  test('names each it looks like, and who saved it', () => {
    const second = { ...saved, id: 'second', number: 'D-25-0029', litres: add('100', '1') }
    const asked = questionsOf(drain('100'), [saved, second])
    expect(asked.map(({ facts }) => [facts.number, facts.by, facts.otherLitres])).toEqual([
      ['D-25-0028', 'Ines Invented', '100'],
      ['D-25-0029', 'Ines Invented', '101'],
    ])
  })
})
