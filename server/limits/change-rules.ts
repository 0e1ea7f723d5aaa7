import { and, eq } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { flags, rules } from '@/db/schema/limits'
import type * as contracts from '@/shared/contracts/limits'
import { ruleDefinition, type RuleDefinition } from '@/shared/rules/definition'
import { massUnits, volumeUnits } from '@/shared/quantities/units'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { fieldProblem, problem } from '../problem'
import { getSite } from '../sites-seen'
import { evaluateSiteLimits } from './evaluate-site-limits'

type OwnRule = z.output<typeof contracts.ownRuleBody>

/** Writes a company's own rule; it is on from the first moment. @throws Problem fields-refused, not-found, id-reused */
export async function createRule(
  tx: Transaction,
  context: ActContext,
  body: OwnRule & { id: string; siteId: string },
): Promise<void> {
  demand(context, 'change-rules', { siteId: body.siteId })
  await getSite(tx, context, body.siteId)
  await tx.insert(rules).values({
    id: body.id,
    organisationId: context.person.organisationId,
    siteId: body.siteId,
    origin: 'own',
    definition: definitionOf(body.id, body),
    enabled: true,
    version: 1,
    changedAt: context.clock(),
    changedBy: context.person.id,
  })
  await follow(tx, context, body.siteId, body.id, { what: 'create', title: body.title })
}

/** @throws Problem not-found, pack-rule-fixed, changed-under-you, fields-refused */
export async function changeRule(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: OwnRule & { version: number; reason: string },
): Promise<string> {
  const before = await getOwnRule(tx, context, id)
  await setRule(tx, context, id, body.version, {
    definition: definitionOf(id, body),
    version: body.version + 1,
    changeReason: body.reason,
  })
  await follow(tx, context, before.siteId, id, { what: 'change', reason: body.reason })
  return before.siteId
}

/** Switching off withdraws the rule's open flags: nobody need review what is no longer measured. */
export async function switchRule(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: { enabled: boolean; reason: string; version: number },
): Promise<string> {
  const before = await getRule(tx, context, id)
  await setRule(tx, context, id, body.version, {
    enabled: body.enabled,
    version: body.version + 1,
    changeReason: body.reason,
  })
  if (!body.enabled) await withdrawFlags(tx, context, id)
  await follow(tx, context, before.siteId, id, {
    what: body.enabled ? 'on' : 'off',
    reason: body.reason,
  })
  return before.siteId
}

/** @throws Problem not-found, pack-rule-fixed */
export async function retireRule(
  tx: Transaction,
  context: ActContext,
  id: string,
): Promise<string> {
  const before = await getOwnRule(tx, context, id)
  await tx
    .update(rules)
    .set({
      retiredAt: context.clock(),
      enabled: false,
      changedAt: context.clock(),
      changedBy: context.person.id,
    })
    .where(eq(rules.id, id))
  await withdrawFlags(tx, context, id)
  await follow(tx, context, before.siteId, id, { what: 'retire' })
  return before.siteId
}

function definitionOf(id: string, body: OwnRule): RuleDefinition {
  const { unit } = body.threshold
  const isVolume = (volumeUnits as readonly string[]).includes(unit)
  const isMass = (massUnits as readonly string[]).includes(unit)
  const fits = {
    'contents-volume': isVolume,
    'container-capacity': isVolume,
    'contents-mass': isMass,
    'generated-mass-per-calendar-month': isMass,
    'days-since-first-fill': unit === 'days',
  }[body.measure]
  if (!fits)
    throw fieldProblem(
      'fields-refused',
      'threshold.unit',
      'unit-does-not-fit',
      'Choose a unit that fits what is measured',
    )
  const isMonthly = body.measure === 'generated-mass-per-calendar-month'
  return ruleDefinition.parse({
    title: body.title,
    measure: body.measure,
    // Days belong to one container each, a month to the site.
    scope: body.measure === 'days-since-first-fill' ? 'container' : isMonthly ? 'site' : body.scope,
    streams: body.streams,
    threshold: body.threshold,
    comparison: body.comparison,
    warnPercent: body.warnPercent,
    minimumCapacity: body.minimumCapacity,
    consequence: body.consequence,
    citation: body.citation,
    id,
    jurisdiction: 'own',
    leavesOut: [],
    sourceUrl: '',
    confidence: 'own',
    enabledByDefault: true,
    caution: '',
  })
}

async function getRule(tx: Transaction, context: ActContext, id: string) {
  const [found] = await tx.select().from(rules).where(eq(rules.id, id)).limit(1)
  if (found === undefined) throw problem('not-found')
  demand(context, 'change-rules', { siteId: found.siteId })
  return found
}

async function getOwnRule(tx: Transaction, context: ActContext, id: string) {
  const found = await getRule(tx, context, id)
  if (found.origin !== 'own') throw problem('pack-rule-fixed')
  return found
}

async function setRule(
  tx: Transaction,
  context: ActContext,
  id: string,
  version: number,
  columns: Partial<typeof rules.$inferInsert>,
): Promise<void> {
  const changed = await tx
    .update(rules)
    .set({ ...columns, changedAt: context.clock(), changedBy: context.person.id })
    .where(and(eq(rules.id, id), eq(rules.version, version)))
    .returning({ id: rules.id })
  if (changed.length === 0) throw problem('changed-under-you')
}

async function withdrawFlags(tx: Transaction, context: ActContext, ruleId: string): Promise<void> {
  await tx
    .update(flags)
    .set({ state: 'withdrawn', endedAt: context.clock(), changedAt: context.clock() })
    .where(and(eq(flags.ruleId, ruleId), eq(flags.state, 'open')))
}

async function follow(
  tx: Transaction,
  context: ActContext,
  siteId: string,
  id: string,
  details: Record<string, unknown>,
): Promise<void> {
  await writeAudit(tx, context, {
    act: 'change-rules',
    subjectKind: 'rule',
    subjectId: id,
    siteId,
    details,
  })
  await evaluateSiteLimits(tx, context, siteId)
}
