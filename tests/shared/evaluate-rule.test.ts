import fc from 'fast-check'
import { evaluateRule, type ContainerFacts, type SiteFacts } from '@/shared/rules/evaluate-rule'
import { ruleDefinition, type RuleDefinition } from '@/shared/rules/definition'
import { rulePack } from '@/shared/rules/packs'

const everyRule = [...rulePack('us-federal-baseline'), ...rulePack('england')]

function packRule(id: string): RuleDefinition {
  const found = everyRule.find((rule) => rule.id === id)
  if (found === undefined) throw new Error(`no rule ${id}`)
  return found
}

function ownRule(more: Partial<RuleDefinition>): RuleDefinition {
  return ruleDefinition.parse({
    id: 'own',
    jurisdiction: 'own',
    title: 'On hand',
    measure: 'contents-volume',
    scope: 'site',
    streams: { classes: [], streamIds: [] },
    threshold: { value: '240', unit: 'gal_us' },
    comparison: 'gt',
    warnPercent: '80',
    minimumCapacity: null,
    leavesOut: [],
    consequence: '',
    citation: '',
    sourceUrl: '',
    confidence: 'own',
    enabledByDefault: true,
    caution: '',
    ...more,
  })
}

let made = 0
function container(more: Partial<ContainerFacts> = {}): ContainerFacts {
  made += 1
  return {
    id: `id-${made}`,
    code: `C-${made}`,
    streamId: 'stream',
    ruleClasses: ['any_oil', 'used_oil'],
    capacity: { value: '55', unit: 'gal_us' },
    litres: '0',
    kilograms: null,
    densityUsed: null,
    firstFilledOn: null,
    everHeld: true,
    isVehicle: false,
    ...more,
  }
}

function facts(containers: ContainerFacts[], more: Partial<SiteFacts> = {}): SiteFacts {
  return { today: '2025-07-01', containers, generated: [], ...more }
}

const drums = (count: number) => Array.from({ length: count }, () => container())
const only = (rule: RuleDefinition, of: SiteFacts) => {
  const [finding, ...others] = evaluateRule(rule, of)
  expect(others).toEqual([])
  if (finding === undefined) throw new Error('nothing was found')
  return finding
}

describe('capacity on site, 40 CFR 112.1(d)(2)(ii): more than 1,320 gal in containers of 55 gal and more', () => {
  const rule = packRule('us-spcc-agg-1320')

  test('24 drums are 1,320 gal, which is not more than 1,320', () => {
    expect(only(rule, facts(drums(24)))).toMatchObject({ measured: '1320', level: 'warn' })
    expect(only(rule, facts(drums(25)))).toMatchObject({ measured: '1375', level: 'limit' })
  })

  test('where at least is the comparison, 1,320 is reached', () => {
    const atLeast = { ...rule, comparison: 'gte' as const }
    expect(only(atLeast, facts(drums(24))).level).toBe('limit')
  })

  test('the warn line is reached at 80 per cent', () => {
    expect(only(rule, facts(drums(19))).level).toBe('below')
    expect(only(rule, facts(drums(20)))).toMatchObject({ measured: '1100', level: 'warn' })
  })

  test('an empty drum counts by its capacity, one that never held anything does not yet', () => {
    const fresh = container({ everHeld: false })
    const found = only(rule, facts([container(), fresh]))
    expect(found.measured).toBe('55')
    expect(found.excluded).toEqual([{ label: fresh.code, reason: 'never-held' }])
  })

  test('208 L are a little less than 55 gal and do not count; 208.2 L do', () => {
    const small = container({ capacity: { value: '208', unit: 'L' } })
    const large = container({ capacity: { value: '208.2', unit: 'L' } })
    expect(only(rule, facts([small])).excluded).toEqual([
      { label: small.code, reason: 'below-minimum-capacity' },
    ])
    expect(only(rule, facts([large])).working).toHaveLength(1)
  })

  test('a stream of no class the rule names does not count, and is not listed as left out', () => {
    const found = only(rule, facts([container({ ruleClasses: [] })]))
    expect(found).toMatchObject({ measured: '0', working: [], excluded: [] })
  })
})

describe('a van, 40 CFR 279.24(a)(1): no more than 55 gal at any time', () => {
  const rule = packRule('us-279-self-transport-55')
  const van = (gallons: string) => container({ isVehicle: true, litres: gallons })

  test('55 gal exactly is not more than 55', () => {
    // 55 x 3.785411784 L
    expect(only(rule, facts([van('208.19764812')])).level).toBe('warn')
    expect(only(rule, facts([van('208.197648120000000001')])).level).toBe('limit')
  })

  test('all sets on the van count together, drums in the yard do not', () => {
    const found = only(rule, facts([van('100'), van('109'), container({ litres: '900' })]))
    expect(found.level).toBe('limit')
    expect(found.working).toHaveLength(2)
  })
})

test('a container of its own is measured by itself, each with a finding of its own', () => {
  const small = container({ capacity: { value: '200', unit: 'L' } })
  const large = container({ capacity: { value: '200.001', unit: 'L' } })
  const found = evaluateRule(packRule('gb-eng-osr-200l'), facts([small, large]))
  expect(found.map(({ periodKey, level }) => [periodKey, level])).toEqual([
    [`container:${small.id}`, 'warn'],
    [`container:${large.id}`, 'limit'],
  ])
})

describe('mass generated in a calendar month', () => {
  const month = (month: string, kilograms: string | null, streamName = 'Spent solvent') => ({
    month,
    streamId: streamName,
    streamName,
    ruleClasses: ['hazardous_waste_nonacute'],
    kilograms,
    densityUsed: kilograms === null ? null : '0.9',
  })

  test('100 kg is not more than 100 kg; 1,000 kg is at least 1,000 kg', () => {
    const sqg = packRule('us-rcra-sqg-100')
    const lqg = packRule('us-rcra-lqg-1000')
    const at = (kilograms: string) => facts([], { generated: [month('2025-03', kilograms)] })
    expect(only(sqg, at('100')).level).toBe('warn')
    expect(only(sqg, at('100.001')).level).toBe('limit')
    expect(only(lqg, at('999.999')).level).toBe('warn')
    expect(only(lqg, at('1000')).level).toBe('limit')
  })

  test('each month is its own, whatever another one holds', () => {
    const generated = [
      month('2025-04', '60'),
      month('2025-03', '60'),
      month('2025-03', '45', 'Rags'),
    ]
    const found = evaluateRule(packRule('us-rcra-sqg-100'), facts([], { generated }))
    expect(found.map(({ periodKey, measured, level }) => [periodKey, measured, level])).toEqual([
      ['2025-03', '105', 'limit'],
      ['2025-04', '60', 'below'],
    ])
    expect(found[0]?.isEstimate).toBe(true)
  })

  test('a stream without a density is named as left out, not counted as nothing', () => {
    const generated = [month('2025-03', null)]
    expect(only(packRule('us-rcra-sqg-100'), facts([], { generated }))).toMatchObject({
      measured: '0',
      excluded: [{ label: 'Spent solvent', reason: 'no-density' }],
    })
  })
})

test('days count from the first filling, an empty container has none', () => {
  const rule = ownRule({
    measure: 'days-since-first-fill',
    scope: 'container',
    threshold: { value: '90', unit: 'days' },
  })
  const filled = container({ firstFilledOn: '2025-04-02' })
  const found = evaluateRule(rule, facts([filled, container()]))
  expect(found.map(({ measured, level }) => [measured, level])).toEqual([['90', 'warn']])
  const later = facts([filled], { today: '2025-07-02' })
  expect(only(rule, later)).toMatchObject({ measured: '91', level: 'limit' })
})

test('40 CFR 262.16(b): day 180 is not more than 180 days; day 181 is', () => {
  const rule = packRule('us-rcra-sqg-180d')
  const filled = container({ firstFilledOn: '2025-01-01', ruleClasses: rule.streams.classes })
  const onDay = (today: string) => only(rule, facts([filled], { today }))
  expect(onDay('2025-06-30')).toMatchObject({ measured: '180', level: 'warn' })
  expect(onDay('2025-07-01')).toMatchObject({ measured: '181', level: 'limit' })
})

test('gallons of a litre sum are exact: ten tenths of a gallon are one gallon', () => {
  const rule = ownRule({ threshold: { value: '1', unit: 'gal_us' } })
  const tenths = Array.from({ length: 10 }, () => container({ litres: '0.3785411784' }))
  expect(only(rule, facts(tenths)).level).toBe('warn')
  expect(only({ ...rule, comparison: 'gte' }, facts(tenths)).level).toBe('limit')
})

test('at any number of drums the level is that of whole numbers', () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 0, max: 60 }),
      fc.integer({ min: 1, max: 60 }),
      fc.constantFrom('gt' as const, 'gte' as const),
      (count, threshold, comparison) => {
        const rule = ownRule({
          measure: 'container-capacity',
          comparison,
          threshold: { value: String(threshold * 55), unit: 'gal_us' },
        })
        const isReached = comparison === 'gt' ? count > threshold : count >= threshold
        const expected = isReached ? 'limit' : count * 100 >= threshold * 80 ? 'warn' : 'below'
        expect(only(rule, facts(drums(count))).level).toBe(expected)
      },
    ),
  )
})

describe('the packs', () => {
  test('switch on by default only what was read in a source', () => {
    const wrong = everyRule.filter(
      ({ enabledByDefault, confidence }) => enabledByDefault && confidence !== 'source-read',
    )
    expect(wrong.map(({ id }) => id)).toEqual([])
  })

  test('cite what they rest on, and give no verdict', () => {
    for (const rule of everyRule) {
      expect(rule.citation).not.toBe('')
      const words = `${rule.title} ${rule.consequence} ${rule.caution}`.toLowerCase()
      expect(words).not.toMatch(/\b(compliant|exempt|in compliance|non-?hazardous)\b/)
    }
  })

  // Thresholds and how they compare, as the named provision words them: "more than" is gt, "or more" is gte.
  test.each([
    ['us-spcc-agg-1320', 'gt', '1320', 'gal_us', '40 CFR 112.1(d)(2)(ii)'],
    ['us-dot-bulk-119', 'gt', '119', 'gal_us', '49 CFR 171.8, 173.150(f)(2)'],
    ['us-rcra-sqg-100', 'gt', '100', 'kg', '40 CFR 260.10, 262.13 Table 1'],
    ['us-rcra-lqg-1000', 'gte', '1000', 'kg', '40 CFR 260.10, 262.13 Table 1'],
    ['us-rcra-sqg-onsite-6000', 'gt', '6000', 'kg', '40 CFR 262.16(b)(1)'],
    ['us-rcra-sqg-180d', 'gt', '180', 'days', '40 CFR 262.16(b)'],
    ['us-rcra-lqg-90d', 'gt', '90', 'days', '40 CFR 262.17(a)'],
    ['gb-eng-osr-200l', 'gt', '200', 'L', 'SI 2001/2954 reg 2(2)(c)'],
  ])('%s is %s %s %s under %s', (id, comparison, value, unit, citation) => {
    expect(packRule(id)).toMatchObject({ comparison, threshold: { value, unit }, citation })
  })

  test('name every rule once', () => {
    expect(new Set(everyRule.map(({ id }) => id)).size).toBe(everyRule.length)
  })
})
