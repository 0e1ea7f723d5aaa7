import { and, eq, isNull } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { flags, rules } from '@/db/schema/limits'
import { compare } from '@/shared/quantities/decimals'
import type { RuleDefinition } from '@/shared/rules/definition'
import { evaluateRule } from '@/shared/rules/evaluate-rule'
import type { RuleFinding } from '@/shared/rules/finding'
import type { ActContext } from '../act-context'
import { gatherSiteFacts } from './site-facts'

type Context = Pick<ActContext, 'newId' | 'clock'>
type RuleRow = typeof rules.$inferSelect
type FlagRow = typeof flags.$inferSelect

/**
 * Measures a site's rules in the transaction that changed what they measure. One crossing makes one flag, not one a
 * drain (decision 9): while a flag stands its highest figure is kept; once the measure has fallen below the warn line
 * the crossing is over, and the next one is a flag of its own.
 */
export async function evaluateSiteLimits(
  tx: Transaction,
  context: Context,
  siteId: string,
): Promise<void> {
  const enabled = await tx
    .select()
    .from(rules)
    .where(and(eq(rules.siteId, siteId), eq(rules.enabled, true), isNull(rules.retiredAt)))
  if (enabled.length === 0) return
  const read = enabled.map((row) => ({ row, definition: row.definition }))
  const facts = await gatherSiteFacts(
    tx,
    siteId,
    context.clock(),
    read.map(({ definition }) => definition),
  )
  const standing = await tx
    .select()
    .from(flags)
    .where(and(eq(flags.siteId, siteId), isNull(flags.endedAt)))
  for (const { row, definition } of read) {
    const findings = evaluateRule(definition, facts)
    for (const finding of findings) {
      await keepFlag(tx, context, row, definition, finding, standing)
    }
    // What is no longer measured has ended as well: an emptied container has no days, a retired one no capacity.
    const gone = standing.filter(
      ({ ruleId, periodKey }) =>
        ruleId === row.id && !findings.some((finding) => finding.periodKey === periodKey),
    )
    for (const flag of gone) await endCrossing(tx, context, flag)
  }
}

async function keepFlag(
  tx: Transaction,
  context: Context,
  rule: RuleRow,
  definition: RuleDefinition,
  finding: RuleFinding,
  standing: readonly FlagRow[],
): Promise<void> {
  const flag = standing.find(
    ({ ruleId, periodKey }) => ruleId === rule.id && periodKey === finding.periodKey,
  )
  if (flag === undefined) {
    await raiseFlag(tx, context, rule, definition, finding)
    return
  }
  if (finding.level === 'below') {
    await endCrossing(tx, context, flag)
    return
  }
  const current = flag.finding
  const isHigher = compare(finding.measured, current.measured) > 0
  const isWorse = flag.level === 'warn' && finding.level === 'limit'
  if (!isHigher && !isWorse) return
  await tx
    .update(flags)
    .set({
      finding,
      level: isWorse ? 'limit' : flag.level,
      // Who reviewed a warning has not reviewed the limit.
      state: isWorse ? 'open' : flag.state,
      rule: definition,
      ruleVersion: rule.version,
      changedAt: context.clock(),
    })
    .where(eq(flags.id, flag.id))
}

async function raiseFlag(
  tx: Transaction,
  context: Context,
  rule: RuleRow,
  definition: RuleDefinition,
  finding: RuleFinding,
): Promise<void> {
  if (finding.level === 'below') return
  await tx
    .insert(flags)
    .values({
      id: context.newId(),
      organisationId: rule.organisationId,
      siteId: rule.siteId,
      ruleId: rule.id,
      ruleVersion: rule.version,
      periodKey: finding.periodKey,
      level: finding.level,
      state: 'open',
      rule: definition,
      finding,
      raisedAt: context.clock(),
      changedAt: context.clock(),
    })
    // Somebody else has just raised it: one crossing, one flag.
    .onConflictDoNothing()
}

/** The measure is below the warn line again: the flag stays for its review, its crossing is over. */
async function endCrossing(tx: Transaction, context: Context, flag: FlagRow): Promise<void> {
  await tx
    .update(flags)
    .set({ endedAt: context.clock(), changedAt: context.clock() })
    .where(eq(flags.id, flag.id))
}
