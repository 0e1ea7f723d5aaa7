import { amendEffect } from '@/modules/drains/amend-effect'
import { bestContainer, rankContainers } from '@/modules/drains/best-container'
import { fillingShare, shareLegs } from '@/modules/drains/drain-legs'
import { instantOf } from '@/modules/drains/drain-time'
import { emptyDrain, valuesOfFacts, type DrainValues } from '@/modules/drains/drain-values'
import { factsOfValues } from '@/modules/drains/facts-of-values'
import type { Container } from '@/shared/contracts/containers'

const site = { timeZone: 'America/Chicago' }
const around = { now: new Date('2025-03-09T19:05:00Z'), ...site, locale: 'en-US' }
const machineId = '6f0c2b4e-0000-4000-8000-0000000000a1'
const streamId = '6f0c2b4e-0000-4000-8000-0000000000b1'
const drum = '6f0c2b4e-0000-4000-8000-0000000000c1'
const tote = '6f0c2b4e-0000-4000-8000-0000000000c2'

function filled(changes: Partial<DrainValues> = {}): DrainValues {
  return {
    ...emptyDrain({ unit: 'gal_us', massUnit: 'kg', method: 'pump-meter' }),
    machine: { kind: 'listed', machineId },
    streamId,
    typed: '18.5',
    legs: [{ containerId: drum, typed: '' }],
    ...changes,
  }
}

function refusals(values: DrainValues) {
  const read = factsOfValues(values, around)
  return read.ok ? [] : read.fields.map(({ path, code }) => `${path} ${code}`)
}

test('a filled form becomes the facts as typed', () => {
  const read = factsOfValues(filled(), around)
  expect(read).toMatchObject({
    ok: true,
    facts: {
      volume: { value: '18.5', unit: 'gal_us' },
      occurredAt: '2025-03-09T14:05:00-05:00',
      legs: [{ containerId: drum }],
      filters: [],
    },
  })
})

test('a unit typed in the field wins over the unit button', () => {
  const read = factsOfValues(filled({ typed: '70 l' }), around)
  expect(read.ok && read.facts.volume).toEqual({ value: '70', unit: 'L' })
})

test.each<[Partial<DrainValues>, string[]]>([
  [{ typed: '' }, ['typed empty']],
  [{ typed: '0' }, ['typed not-positive']],
  [{ typed: 'lots' }, ['typed not-a-number']],
  [{ typed: '1.234' }, ['typed too-many-decimals']],
  [{ typed: '3 firkins' }, ['typed unknown-unit']],
  [{ machine: null }, ['machine required']],
  [{ machine: { kind: 'unlisted', description: ' ' } }, ['machine description-required']],
  [{ legs: [{ containerId: '', typed: '' }] }, ['legs required']],
  [{ absorbentsTyped: 'some' }, ['absorbentsTyped not-a-number']],
  [{ time: { kind: 'at', local: '2025-03-0' } }, ['time required']],
  [
    {
      legs: [
        { containerId: drum, typed: '20' },
        { containerId: tote, typed: '' },
      ],
    },
    ['legs.1.typed nothing-left'],
  ],
])('%j is stopped at its field', (changes, expected) => {
  expect(refusals(filled(changes))).toEqual(expected)
})

test('the last leg takes the exact remainder, also where a share does not end in decimals', () => {
  const shares = shareLegs(
    [
      { containerId: drum, typed: '0.1' },
      { containerId: tote, typed: '10 l' },
      { containerId: drum, typed: '' },
    ],
    '70.0301179400', // 18.5 US gallons
    'gal_us',
  )
  expect(shares.map(({ litres }) => litres)).toEqual(['0.3785411784', '10', '59.6515767616'])
})

test('the share that fills a container never rounds up over its line', () => {
  expect(fillingShare('12.19', '70', 'L')).toBe('12.1')
  expect(fillingShare('80', '70', 'L')).toBe('')
  expect(fillingShare('-3', '70', 'L')).toBe('')
})

test('facts put into the form and read again are the same facts', () => {
  const facts = {
    machine: { kind: 'listed' as const, machineId },
    streamId,
    occurredAt: '2025-03-09T14:05:00-05:00',
    volume: { value: '18.50', unit: 'gal_us' as const },
    method: 'estimate' as const,
    spreadPercent: '12',
    legs: [
      { containerId: drum, volume: { value: '20', unit: 'L' as const } },
      { containerId: tote },
    ],
    filters: [{ count: 2, size: 'medium' as const, state: 'drained' as const }],
    absorbents: { mass: { value: '1.5', unit: 'lb_avdp' as const } },
    breatherCaps: 1,
    refill: { volume: { value: '18', unit: 'gal_us' as const } },
    note: 'warm',
  }
  const read = factsOfValues(valuesOfFacts(facts, site.timeZone, 'kg'), around)
  expect(read).toEqual({ ok: true, facts })
})

test('a time the clocks skipped moves forward and says so', () => {
  expect(instantOf({ kind: 'at', local: '2025-03-09T02:10' }, around.now, site.timeZone)).toEqual({
    occurredAt: '2025-03-09T03:10:00-05:00',
    adjusted: 'moved-forward',
  })
})

function container(code: string, changes: Partial<Container>): Container {
  return {
    id: code,
    code,
    streamId,
    stream: { id: streamId, code: 'mineral', name: 'Mineral', kind: 'fluid', labelWords: '' },
    litres: '0',
    roomLitres: '100',
    hold: null,
    onPickup: null,
    retiredAt: null,
    ...changes,
  } as Container
}

test('the smallest sufficient room is the best fit; the others say why they are not', () => {
  const containers = [
    container('ESTER', { streamId: 'other', roomLitres: '70' }),
    container('WIDE', { roomLitres: '900' }),
    container('TIGHT', { roomLitres: '71' }),
    container('SHORT', { roomLitres: '12' }),
    container('HELD', { hold: { reason: 'solvent smell' } as Container['hold'], roomLitres: '75' }),
    container('GONE', { retiredAt: '2025-01-01T00:00:00Z' }),
  ]
  const wanted = { streamId, litres: '70' }
  expect(
    rankContainers(containers, wanted).map(({ container: { code }, unfit }) => [code, unfit]),
  ).toEqual([
    ['TIGHT', undefined],
    ['WIDE', undefined],
    ['SHORT', 'not-enough-room'],
    ['HELD', 'held'],
    ['ESTER', 'other-stream'],
  ])
  expect(bestContainer(containers.slice(4), wanted)).toBeUndefined()
})

test('an amendment moves the difference, from one container to another too', () => {
  const containers = [
    { id: drum, code: 'C-201', litres: '100' },
    { id: tote, code: 'C-202', litres: '7' },
  ]
  const legs = [{ containerId: drum, containerCode: 'C-201', volume: null, litres: '70' }]
  const volume = { value: '30', unit: 'L' as const }
  expect(amendEffect({ legs }, { volume, legs: [{ containerId: drum }] }, containers)).toEqual([
    { containerId: drum, code: 'C-201', fromLitres: '100', toLitres: '60' },
  ])
  expect(amendEffect({ legs }, { volume, legs: [{ containerId: tote }] }, containers)).toEqual([
    { containerId: drum, code: 'C-201', fromLitres: '100', toLitres: '30' },
    { containerId: tote, code: 'C-202', fromLitres: '7', toLitres: '37' },
  ])
})
