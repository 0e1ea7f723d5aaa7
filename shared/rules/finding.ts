import { z } from 'zod'
import { ruleUnits } from './definition'

const figure = z.string().regex(/^-?\d+(\.\d+)?$/)

/** One line of a rule's working: what counted, and how much in the rule's own unit. */
export const workingLine = z.object({
  label: z.string(),
  value: figure,
  containerId: z.string().nullable(),
  /** Density in kg/L where mass was estimated from volume; otherwise empty. */
  density: z.string(),
})

/** What a rule measured at one moment, with everything it rests on. */
export const ruleFinding = z.object({
  /** The period or thing the finding is about: `now`, a month, or a container. */
  periodKey: z.string(),
  subject: z.string(),
  level: z.enum(['below', 'warn', 'limit']),
  measured: figure,
  threshold: figure,
  warnAt: figure,
  unit: z.enum(ruleUnits),
  comparison: z.enum(['gt', 'gte']),
  isEstimate: z.boolean(),
  working: z.array(workingLine),
  excluded: z.array(z.object({ label: z.string(), reason: z.string() })),
})
export type RuleFinding = z.infer<typeof ruleFinding>
