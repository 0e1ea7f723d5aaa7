import { z } from 'zod'
import { ruleDefinition, ruleStreams } from '../rules/definition'
import { ruleFinding } from '../rules/finding'
import { defineContract } from './define-contract'
import {
  id,
  idParams,
  instant,
  line,
  named,
  page,
  pageQuery,
  requiredLine,
  revision,
} from './values'

const tag = 'limits'

export const rule = z.object({
  id,
  siteId: id,
  origin: z.enum(['pack', 'own']),
  definition: ruleDefinition,
  enabled: z.boolean(),
  version: revision,
  changedAt: instant,
  changedBy: named.nullable(),
  changeReason: z.string(),
  retiredAt: instant.nullable(),
  /** What the rule measures right now at the site. */
  findings: z.array(ruleFinding),
})
export type Rule = z.infer<typeof rule>

export const flag = z.object({
  id,
  siteId: id,
  siteCode: z.string(),
  ruleId: id,
  ruleVersion: z.number().int(),
  periodKey: z.string(),
  level: z.enum(['warn', 'limit']),
  state: z.enum(['open', 'reviewed', 'withdrawn']),
  rule: ruleDefinition,
  finding: ruleFinding,
  raisedAt: instant,
  changedAt: instant,
  /** When the measure fell below the warn line again; null while it stands. */
  endedAt: instant.nullable(),
  review: z.object({ at: instant, by: named, note: z.string() }).nullable(),
})
export type Flag = z.infer<typeof flag>

export const listRules = defineContract({
  name: 'listRules',
  method: 'get',
  path: '/rules',
  summary: 'Rules of a site with what they measure now',
  tag,
  access: 'read-limits',
  query: z.strictObject({ siteId: id }),
  reply: z.object({ rows: z.array(rule) }),
  problems: ['not-found'],
})

/** A company's own rule, written by its officer: no jurisdiction, always on until switched off. */
export const ownRuleBody = ruleDefinition
  .pick({
    title: true,
    measure: true,
    scope: true,
    streams: true,
    threshold: true,
    comparison: true,
    warnPercent: true,
    minimumCapacity: true,
    consequence: true,
    citation: true,
  })
  .extend({
    title: requiredLine(160),
    consequence: line(300),
    citation: line(160),
    streams: ruleStreams.extend({ classes: z.array(requiredLine(60)).max(20) }),
  })
  .strict()
export const createRule = defineContract({
  name: 'createRule',
  method: 'post',
  path: '/rules',
  summary: 'Write an own rule',
  tag,
  access: 'change-rules',
  body: ownRuleBody.extend({ id, siteId: id }),
  reply: rule,
  status: 201,
  problems: ['id-reused', 'not-found'],
})
export const changeRule = defineContract({
  name: 'changeRule',
  method: 'put',
  path: '/rules/:id',
  summary: 'Change an own rule; flags keep the version that raised them',
  tag,
  access: 'change-rules',
  params: idParams,
  body: ownRuleBody.extend({ version: revision, reason: requiredLine(300) }),
  reply: rule,
  problems: ['not-found', 'pack-rule-fixed', 'changed-under-you'],
})
export const switchRule = defineContract({
  name: 'switchRule',
  method: 'post',
  path: '/rules/:id/switch',
  summary: 'Switch a rule on or off, with a reason',
  tag,
  access: 'change-rules',
  params: idParams,
  body: z.strictObject({
    enabled: z.boolean(),
    reason: requiredLine(300),
    version: revision,
  }),
  reply: rule,
  problems: ['not-found', 'changed-under-you'],
})
export const retireRule = defineContract({
  name: 'retireRule',
  method: 'post',
  path: '/rules/:id/retire',
  summary: 'Retire an own rule',
  tag,
  access: 'change-rules',
  params: idParams,
  reply: rule,
  problems: ['not-found', 'pack-rule-fixed'],
})

export const listFlags = defineContract({
  name: 'listFlags',
  method: 'get',
  path: '/flags',
  summary: 'Quantity flags, newest first',
  tag,
  access: 'read-limits',
  query: z.strictObject({
    siteId: id.optional(),
    state: z.enum(['open', 'reviewed', 'withdrawn']).optional(),
    ...pageQuery,
  }),
  reply: page(flag),
})
export const readFlag = defineContract({
  name: 'readFlag',
  method: 'get',
  path: '/flags/:id',
  summary: 'One flag with its working',
  tag,
  access: 'read-limits',
  params: idParams,
  reply: flag,
  problems: ['not-found'],
})
export const reviewFlag = defineContract({
  name: 'reviewFlag',
  method: 'post',
  path: '/flags/:id/review',
  summary: 'Review a flag, with a note',
  tag,
  access: 'review-flag',
  params: idParams,
  body: z.strictObject({ note: requiredLine(1000) }),
  reply: flag,
  problems: ['not-found', 'already-reviewed'],
})
