import {
  boolean,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core'
import type { RuleDefinition } from '@/shared/rules/definition'
import type { RuleFinding } from '@/shared/rules/finding'
import { instant, organisationId } from './columns'
import { sites } from './sites'

/** A limit rule as a site uses it: taken from a pack, or the company's own. */
export const rules = pgTable(
  'rules',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    origin: text('origin', { enum: ['pack', 'own'] }).notNull(),
    packRuleId: text('pack_rule_id'),
    /** RuleDefinition of shared/rules/definition.ts. */
    definition: jsonb('definition').$type<RuleDefinition>().notNull(),
    enabled: boolean('enabled').notNull(),
    version: integer('version').notNull(),
    changedAt: instant('changed_at').notNull(),
    changedBy: uuid('changed_by'),
    changeReason: text('change_reason').notNull().default(''),
    retiredAt: instant('retired_at'),
  },
  (table) => [
    unique('rules_organisation_id').on(table.organisationId, table.id),
    unique('rules_pack_rule_once').on(table.siteId, table.packRuleId),
    foreignKey({
      name: 'rules_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
  ],
)

/** A moment when a rule's warn line or limit was reached; one per rule and period. */
export const flags = pgTable(
  'flags',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    ruleId: uuid('rule_id').notNull(),
    ruleVersion: integer('rule_version').notNull(),
    periodKey: text('period_key').notNull(),
    level: text('level', { enum: ['warn', 'limit'] }).notNull(),
    state: text('state', { enum: ['open', 'reviewed', 'withdrawn'] }).notNull(),
    /** Rule as it stood and the RuleFinding with its working; what the flag rests on. */
    rule: jsonb('rule').$type<RuleDefinition>().notNull(),
    finding: jsonb('finding').$type<RuleFinding>().notNull(),
    raisedAt: instant('raised_at').notNull(),
    changedAt: instant('changed_at').notNull(),
    /** When the measure fell below the warn line again: the crossing is over, its review may still wait. */
    endedAt: instant('ended_at'),
    reviewedAt: instant('reviewed_at'),
    reviewedBy: uuid('reviewed_by'),
    reviewNote: text('review_note'),
  },
  (table) => [
    unique('flags_organisation_id').on(table.organisationId, table.id),
    index('flags_site_state').on(table.siteId, table.state),
    index('flags_rule_period').on(table.ruleId, table.periodKey),
    foreignKey({
      name: 'flags_rule',
      columns: [table.organisationId, table.ruleId],
      foreignColumns: [rules.organisationId, rules.id],
    }),
  ],
)
