import { convert } from '../quantities/convert'
import { compare, divide, multiply, sum } from '../quantities/decimals'
import type { MassUnit, VolumeUnit } from '../quantities/units'
import { daysBetween } from '../calendar'
import type { RuleDefinition } from './definition'
import type { RuleFinding } from './finding'

/** A container as rules see it. Figures are exact decimal strings. */
export type ContainerFacts = {
  id: string
  code: string
  streamId: string
  ruleClasses: readonly string[]
  /** Capacity as it was entered: compared in its own unit where the rule has the same. */
  capacity: { value: string; unit: VolumeUnit }
  litres: string
  /** Weighed kilograms of solids, or litres x density; null where no density is on record. */
  kilograms: string | null
  densityUsed: string | null
  firstFilledOn: string | null
  everHeld: boolean
  isVehicle: boolean
}

/** What was generated in one month of one stream: by day of generation, never of shipment. */
export type GeneratedFacts = {
  month: string
  streamId: string
  streamName: string
  ruleClasses: readonly string[]
  kilograms: string | null
  densityUsed: string | null
}

export type SiteFacts = {
  /** The site's local day, YYYY-MM-DD. */
  today: string
  containers: readonly ContainerFacts[]
  generated: readonly GeneratedFacts[]
}

type Counted = {
  label: string
  value: string
  containerId: string | null
  density: string
}
type Excluded = { label: string; reason: string }

/**
 * Measures a rule against a site, exactly, in the rule's own unit: 24 drums of 55 gal are 1,320 gal, which is not
 * above 1,320 and is at least 1,320. Says what counted and what did not, never whether a law applies.
 */
export function evaluateRule(rule: RuleDefinition, facts: SiteFacts): RuleFinding[] {
  if (rule.measure === 'generated-mass-per-calendar-month') return generatedFindings(rule, facts)
  const { counted, excluded } = countContainers(rule, facts)
  if (rule.scope !== 'container') return [finding(rule, 'now', '', counted, excluded)]
  return counted.map((line) =>
    finding(rule, `container:${line.containerId ?? ''}`, line.label, [line], []),
  )
}

function generatedFindings(rule: RuleDefinition, facts: SiteFacts): RuleFinding[] {
  const months = [...new Set(facts.generated.map(({ month }) => month))].sort()
  return months.map((month) => {
    const counted: Counted[] = []
    const excluded: Excluded[] = []
    for (const line of facts.generated.filter((entry) => entry.month === month)) {
      if (!isOfRule(rule, line)) continue
      if (line.kilograms === null) excluded.push({ label: line.streamName, reason: 'no-density' })
      else {
        counted.push({
          label: line.streamName,
          value: inUnit(line.kilograms, 'kg', rule),
          containerId: null,
          density: line.densityUsed ?? '',
        })
      }
    }
    return finding(rule, month, month, counted, excluded)
  })
}

function countContainers(rule: RuleDefinition, facts: SiteFacts) {
  const counted: Counted[] = []
  const excluded: Excluded[] = []
  for (const container of facts.containers) {
    if (!isOfRule(rule, container)) continue
    if (container.isVehicle !== (rule.scope === 'vehicle')) continue
    const reason = reasonToLeaveOut(rule, container)
    if (reason !== undefined) {
      excluded.push({ label: container.code, reason })
      continue
    }
    const value = measured(rule, container, facts.today)
    if (value === null) excluded.push({ label: container.code, reason: 'no-density' })
    else {
      const isMass = rule.measure === 'contents-mass'
      counted.push({
        label: container.code,
        value,
        containerId: container.id,
        density: isMass ? (container.densityUsed ?? '') : '',
      })
    }
  }
  return { counted, excluded }
}

function isOfRule(
  rule: RuleDefinition,
  of: { streamId: string; ruleClasses: readonly string[] },
): boolean {
  const { classes, streamIds } = rule.streams
  if (classes.length === 0 && streamIds.length === 0) return true
  return streamIds.includes(of.streamId) || of.ruleClasses.some((name) => classes.includes(name))
}

function reasonToLeaveOut(rule: RuleDefinition, container: ContainerFacts): string | undefined {
  // Empties count by capacity; a container that has never held anything does not yet.
  if (rule.measure === 'container-capacity' && !container.everHeld) return 'never-held'
  if (rule.measure === 'days-since-first-fill' && container.firstFilledOn === null) return 'empty'
  if (rule.minimumCapacity === null) return undefined
  const { value, unit } = rule.minimumCapacity
  const capacity = convert(container.capacity.value, container.capacity.unit, 'L')
  return compare(capacity, convert(value, unit, 'L')) < 0 ? 'below-minimum-capacity' : undefined
}

function measured(rule: RuleDefinition, container: ContainerFacts, today: string): string | null {
  switch (rule.measure) {
    case 'container-capacity':
      return inUnit(container.capacity.value, container.capacity.unit, rule)
    case 'contents-volume':
      return inUnit(container.litres, 'L', rule)
    case 'contents-mass':
      return container.kilograms === null ? null : inUnit(container.kilograms, 'kg', rule)
    case 'days-since-first-fill':
      return String(daysBetween(container.firstFilledOn ?? today, today))
    case 'generated-mass-per-calendar-month':
      return null
  }
}

/** Litres of a gallon rule recur in gallons, so sums are compared in litres: see `finding`. */
function inUnit(value: string, unit: VolumeUnit | MassUnit, rule: RuleDefinition): string {
  return convert(value, unit, rule.threshold.unit as VolumeUnit | MassUnit)
}

function finding(
  rule: RuleDefinition,
  periodKey: string,
  subject: string,
  counted: readonly Counted[],
  excluded: readonly Excluded[],
): RuleFinding {
  const total = sum(counted.map(({ value }) => value))
  const { value: threshold, unit } = rule.threshold
  const warnAt = divide(multiply(threshold, rule.warnPercent), '100', 6)
  return {
    periodKey,
    subject,
    level: levelOf(total, threshold, warnAt, rule.comparison),
    measured: total,
    threshold,
    warnAt,
    unit,
    comparison: rule.comparison,
    isEstimate: counted.some(({ density }) => density !== ''),
    working: [...counted],
    excluded: [...excluded],
  }
}

/**
 * A litre figure in gallons is kept to 30 decimals, so twenty of them may miss their exact sum by 1e-29: both sides
 * are compared at 20 decimals, far finer than what numeric(38,18) can tell apart.
 */
function levelOf(
  total: string,
  threshold: string,
  warnAt: string,
  comparison: 'gt' | 'gte',
): RuleFinding['level'] {
  const against = compare(divide(total, '1', 20), threshold)
  if (comparison === 'gt' ? against > 0 : against >= 0) return 'limit'
  return compare(total, warnAt) >= 0 ? 'warn' : 'below'
}
