import { sql } from 'drizzle-orm'
import {
  boolean,
  check,
  date,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core'
import { counter, exact, instant, organisationId } from './columns'
import { containers, machines, parties, sites, streams } from './sites'

export const movementReasons = [
  'drain',
  'transfer',
  'shipment',
  'receipt',
  'adjustment',
  'reversal',
  'opening',
] as const

/** Head of a site's book: the last line number and the last hash. Moved only by movements. */
export const books = pgTable(
  'books',
  {
    siteId: uuid('site_id').primaryKey(),
    organisationId: organisationId(),
    lastLineNo: counter('last_line_no').notNull().default(0),
    lastHash: text('last_hash').notNull(),
  },
  (table) => [
    foreignKey({
      name: 'books_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
  ],
)

/** Where a quantity can stand. One account per thing and site. */
export const accounts = pgTable(
  'accounts',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    kind: text('kind', {
      enum: ['machine', 'container', 'hauler', 'facility', 'adjustment', 'outside'],
    }).notNull(),
    containerId: uuid('container_id'),
    machineId: uuid('machine_id'),
    partyId: uuid('party_id'),
    /** of an outside account: 'unlisted-machine', 'floor' or 'opening'. */
    place: text('place'),
  },
  (table) => [
    unique('accounts_site_id').on(table.siteId, table.id),
    unique('accounts_once')
      .on(table.siteId, table.kind, table.containerId, table.machineId, table.partyId, table.place)
      .nullsNotDistinct(),
    foreignKey({
      name: 'accounts_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
    foreignKey({
      name: 'accounts_container',
      columns: [table.organisationId, table.containerId],
      foreignColumns: [containers.organisationId, containers.id],
    }),
    foreignKey({
      name: 'accounts_machine',
      columns: [table.organisationId, table.machineId],
      foreignColumns: [machines.organisationId, machines.id],
    }),
    foreignKey({
      name: 'accounts_party',
      columns: [table.organisationId, table.partyId],
      foreignColumns: [parties.organisationId, parties.id],
    }),
  ],
)

/** The book: append-only lines, each a positive quantity from one account to another. */
export const movements = pgTable(
  'movements',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    lineNo: counter('line_no').notNull(),
    streamId: uuid('stream_id').notNull(),
    fromAccountId: uuid('from_account_id').notNull(),
    toAccountId: uuid('to_account_id').notNull(),
    litres: exact('litres').notNull(),
    kilograms: exact('kilograms').notNull(),
    pieces: integer('pieces').notNull(),
    enteredValue: text('entered_value').notNull(),
    enteredUnit: text('entered_unit').notNull(),
    method: text('method').notNull(),
    spreadPercent: text('spread_percent'),
    isEstimate: boolean('is_estimate').notNull(),
    reason: text('reason', { enum: movementReasons }).notNull(),
    /** What a line counts under in totals: its reason, or for a reversal the reason of its target. */
    countsAs: text('counts_as', { enum: movementReasons }).notNull(),
    reverses: uuid('reverses'),
    drainId: uuid('drain_id'),
    drainRevision: integer('drain_revision'),
    pickupId: uuid('pickup_id'),
    pickupLineId: uuid('pickup_line_id'),
    transferId: uuid('transfer_id'),
    occurredAt: instant('occurred_at').notNull(),
    occurredOn: date('occurred_on', { mode: 'string' }).notNull(),
    recordedAt: instant('recorded_at').notNull(),
    recordedBy: uuid('recorded_by').notNull(),
    note: text('note').notNull().default(''),
    previousHash: text('previous_hash').notNull(),
    hash: text('hash').notNull(),
  },
  (table) => [
    unique('movements_line_no_once').on(table.siteId, table.lineNo),
    unique('movements_reversed_once').on(table.reverses),
    foreignKey({
      name: 'movements_reverses',
      columns: [table.reverses],
      foreignColumns: [table.id],
    }),
    foreignKey({
      name: 'movements_from',
      columns: [table.siteId, table.fromAccountId],
      foreignColumns: [accounts.siteId, accounts.id],
    }),
    foreignKey({
      name: 'movements_to',
      columns: [table.siteId, table.toAccountId],
      foreignColumns: [accounts.siteId, accounts.id],
    }),
    foreignKey({
      name: 'movements_stream',
      columns: [table.organisationId, table.streamId],
      foreignColumns: [streams.organisationId, streams.id],
    }),
    foreignKey({
      name: 'movements_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
    check(
      'movements_move_something',
      sql`${table.litres} >= 0 and ${table.kilograms} >= 0 and ${table.pieces} >= 0
        and (${table.litres} > 0 or ${table.kilograms} > 0 or ${table.pieces} > 0)`,
    ),
    check('movements_between_two_accounts', sql`${table.fromAccountId} <> ${table.toAccountId}`),
    check(
      'movements_reversal_names_its_target',
      sql`(${table.reason} = 'reversal') = (${table.reverses} is not null)
        and (${table.reason} = 'reversal' or ${table.countsAs} = ${table.reason})`,
    ),
    index('movements_from_account').on(table.fromAccountId, table.occurredOn),
    index('movements_to_account').on(table.toAccountId, table.occurredOn),
    index('movements_site_day').on(table.siteId, table.occurredOn),
    index('movements_drain').on(table.drainId),
    index('movements_pickup').on(table.pickupId),
  ],
)

/** What stands on an account, per stream: kept by the movements' own trigger, never by hand. */
export const balances = pgTable(
  'balances',
  {
    accountId: uuid('account_id').notNull(),
    streamId: uuid('stream_id').notNull(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    litres: exact('litres').notNull(),
    kilograms: exact('kilograms').notNull(),
    pieces: integer('pieces').notNull(),
    version: counter('version').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.accountId, table.streamId] }),
    index('balances_site').on(table.siteId),
  ],
)

/** Last number given out, per scope (organisation or site), kind and year: numbers without gaps. */
export const numberSeries = pgTable(
  'number_series',
  {
    organisationId: organisationId(),
    scopeId: uuid('scope_id').notNull(),
    kind: text('kind', { enum: ['drain', 'pickup'] }).notNull(),
    year: integer('year').notNull(),
    last: integer('last').notNull(),
  },
  (table) => [primaryKey({ columns: [table.scopeId, table.kind, table.year] })],
)
