import { and, desc, eq, lt, or, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { ofSites } from '@/db/queries/sites'
import { flags, rules } from '@/db/schema/limits'
import { people } from '@/db/schema/organisations'
import { sites } from '@/db/schema/sites'
import type { flag, rule } from '@/shared/contracts/limits'
import { evaluateRule } from '@/shared/rules/evaluate-rule'
import { gatherSiteFacts } from './site-facts'

/** Rules of a site with what each measures now, switched on or not. */
export async function presentRules(
  tx: Transaction,
  siteId: string,
  now: Date,
  only?: string,
): Promise<z.input<typeof rule>[]> {
  const rows = await tx
    .select({ rule: rules, by: people.name })
    .from(rules)
    .leftJoin(people, eq(people.id, rules.changedBy))
    .where(and(eq(rules.siteId, siteId), only === undefined ? undefined : eq(rules.id, only)))
    .orderBy(sql`${rules.origin} = 'pack'`, rules.packRuleId, rules.id)
  const read = rows.map((row) => ({
    ...row,
    definition: row.rule.definition,
  }))
  const facts = await gatherSiteFacts(
    tx,
    siteId,
    now,
    read.map(({ definition }) => definition),
  )
  return read.map(({ rule: row, by, definition }) => ({
    ...row,
    definition,
    changedAt: row.changedAt.toISOString(),
    changedBy: row.changedBy === null || by === null ? null : { id: row.changedBy, name: by },
    retiredAt: row.retiredAt?.toISOString() ?? null,
    findings: evaluateRule(definition, facts),
  }))
}

/** Flags, newest first. */
export async function listFlagRows(
  tx: Transaction,
  filter: {
    siteIds: readonly string[] | null
    id?: string
    state?: 'open' | 'reviewed' | 'withdrawn' | undefined
    before?: { at: Date; id: string } | undefined
    limit: number
  },
) {
  const reviewer = alias(people, 'reviewer')
  return tx
    .select({ flag: flags, siteCode: sites.code, reviewer: reviewer.name })
    .from(flags)
    .innerJoin(sites, eq(sites.id, flags.siteId))
    .leftJoin(reviewer, eq(reviewer.id, flags.reviewedBy))
    .where(
      and(
        ofSites(flags.siteId, filter.siteIds),
        filter.id === undefined ? undefined : eq(flags.id, filter.id),
        filter.state === undefined ? undefined : eq(flags.state, filter.state),
        filter.before === undefined
          ? undefined
          : or(
              lt(flags.raisedAt, filter.before.at),
              and(eq(flags.raisedAt, filter.before.at), lt(flags.id, filter.before.id)),
            ),
      ),
    )
    .orderBy(desc(flags.raisedAt), desc(flags.id))
    .limit(filter.limit)
}

export function presentFlag(
  found: Awaited<ReturnType<typeof listFlagRows>>[number],
): z.input<typeof flag> {
  const { flag: row } = found
  return {
    ...row,
    siteCode: found.siteCode,
    raisedAt: row.raisedAt.toISOString(),
    changedAt: row.changedAt.toISOString(),
    endedAt: row.endedAt?.toISOString() ?? null,
    review:
      row.reviewedAt === null || row.reviewedBy === null
        ? null
        : {
            at: row.reviewedAt.toISOString(),
            by: { id: row.reviewedBy, name: found.reviewer ?? '' },
            note: row.reviewNote ?? '',
          },
  }
}
