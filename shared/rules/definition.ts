import { z } from 'zod'
import { massUnits, volumeUnits } from '../quantities/units'

/** A limit as data: what is measured, against what, exactly how, and under which citation. */

export const ruleMeasures = [
  'contents-volume',
  'contents-mass',
  'container-capacity',
  'days-since-first-fill',
  'generated-mass-per-calendar-month',
] as const
export type RuleMeasure = (typeof ruleMeasures)[number]

/** site: one sum; container: each by itself; vehicle: everything in the site's van containers together. */
export const ruleScopes = ['site', 'container', 'vehicle'] as const

export const ruleUnits = [...volumeUnits, ...massUnits, 'days'] as const
export type RuleUnit = (typeof ruleUnits)[number]

const decimalText = z.string().regex(/^\d{1,12}(\.\d{1,6})?$/, 'not-a-decimal')

/** Of which streams: classes such as used_oil, or streams by id; empty lists mean every stream. */
export const ruleStreams = z.strictObject({
  classes: z.array(z.string().min(1).max(60)).max(20),
  streamIds: z.array(z.uuid()).max(50),
})

export const ruleDefinition = z.object({
  id: z.string().min(1).max(80),
  jurisdiction: z.string().max(40),
  title: z.string().trim().min(1).max(160),
  measure: z.enum(ruleMeasures),
  scope: z.enum(ruleScopes),
  streams: ruleStreams,
  threshold: z.strictObject({ value: decimalText, unit: z.enum(ruleUnits) }),
  comparison: z.enum(['gt', 'gte']),
  /** Share of the threshold at which the rule warns. */
  warnPercent: z.string().regex(/^\d{1,3}$/, 'not-a-percentage'),
  /** Containers below this capacity do not count. */
  minimumCapacity: z.strictObject({ value: decimalText, unit: z.enum(volumeUnits) }).nullable(),
  /** What the law leaves out and this product cannot see; shown with the working. */
  leavesOut: z.array(z.string().max(200)).max(12),
  consequence: z.string().trim().max(300),
  citation: z.string().trim().max(160),
  sourceUrl: z.string().max(500),
  confidence: z.enum(['source-read', 'memory', 'own']),
  enabledByDefault: z.boolean(),
  caution: z.string().max(500),
})
export type RuleDefinition = z.infer<typeof ruleDefinition>
