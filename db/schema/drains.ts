import {
  boolean,
  date,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core'
import { exact, instant, organisationId } from './columns'
import { containers, machines, sites, streams } from './sites'

/** One drain as it stands now; what was typed at each revision is in drain_revisions. */
export const drains = pgTable(
  'drains',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    number: text('number').notNull(),
    machineId: uuid('machine_id'),
    machineText: text('machine_text').notNull().default(''),
    streamId: uuid('stream_id').notNull(),
    occurredAt: instant('occurred_at').notNull(),
    occurredOn: date('occurred_on', { mode: 'string' }).notNull(),
    enteredValue: text('entered_value').notNull(),
    enteredUnit: text('entered_unit').notNull(),
    litres: exact('litres').notNull(),
    method: text('method').notNull(),
    isEstimate: boolean('is_estimate').notNull(),
    state: text('state', { enum: ['standing', 'struck'] }).notNull(),
    revision: integer('revision').notNull(),
    recordedAt: instant('recorded_at').notNull(),
    recordedBy: uuid('recorded_by').notNull(),
    /** SHA-256 over the canonical first body, to tell a retry from a reused id. */
    contentHash: text('content_hash').notNull(),
  },
  (table) => [
    unique('drains_organisation_id').on(table.organisationId, table.id),
    unique('drains_number_once').on(table.organisationId, table.number),
    foreignKey({
      name: 'drains_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
    foreignKey({
      name: 'drains_machine',
      columns: [table.organisationId, table.machineId],
      foreignColumns: [machines.organisationId, machines.id],
    }),
    foreignKey({
      name: 'drains_stream',
      columns: [table.organisationId, table.streamId],
      foreignColumns: [streams.organisationId, streams.id],
    }),
    index('drains_site_time').on(table.siteId, table.occurredAt, table.id),
    index('drains_machine_time').on(table.machineId, table.occurredAt),
  ],
)

/** What a drain said at each revision, as typed. Append-only. */
export const drainRevisions = pgTable(
  'drain_revisions',
  {
    organisationId: organisationId(),
    drainId: uuid('drain_id').notNull(),
    revision: integer('revision').notNull(),
    /** DrainFacts of shared/contracts/drains.ts; the shape is stored, so it only grows. */
    facts: jsonb('facts').notNull(),
    act: text('act', { enum: ['recorded', 'amended', 'struck'] }).notNull(),
    reasonCode: text('reason_code'),
    reasonText: text('reason_text').notNull().default(''),
    madeBy: uuid('made_by').notNull(),
    madeAt: instant('made_at').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.drainId, table.revision] }),
    foreignKey({
      name: 'drain_revisions_drain',
      columns: [table.organisationId, table.drainId],
      foreignColumns: [drains.organisationId, drains.id],
    }),
  ],
)

/** A record that needs a look: what the server noticed, and who looked. */
export const marks = pgTable(
  'marks',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    drainId: uuid('drain_id'),
    containerId: uuid('container_id'),
    code: text('code').notNull(),
    details: jsonb('details').$type<Record<string, string>>().notNull(),
    raisedAt: instant('raised_at').notNull(),
    reviewedAt: instant('reviewed_at'),
    reviewedBy: uuid('reviewed_by'),
    reviewNote: text('review_note'),
  },
  (table) => [
    unique('marks_organisation_id').on(table.organisationId, table.id),
    foreignKey({
      name: 'marks_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
    foreignKey({
      name: 'marks_drain',
      columns: [table.organisationId, table.drainId],
      foreignColumns: [drains.organisationId, drains.id],
    }),
    foreignKey({
      name: 'marks_container',
      columns: [table.organisationId, table.containerId],
      foreignColumns: [containers.organisationId, containers.id],
    }),
    index('marks_drain_id').on(table.drainId),
    index('marks_site_open').on(table.siteId, table.reviewedAt),
  ],
)

/** A quantity moved from one container to another of the same site. */
export const transfers = pgTable(
  'transfers',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    contentHash: text('content_hash').notNull(),
    note: text('note').notNull().default(''),
    recordedAt: instant('recorded_at').notNull(),
    recordedBy: uuid('recorded_by').notNull(),
  },
  (table) => [
    foreignKey({
      name: 'transfers_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
  ],
)
