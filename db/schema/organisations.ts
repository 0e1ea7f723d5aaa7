import { sql } from 'drizzle-orm'
import {
  boolean,
  foreignKey,
  index,
  pgTable,
  primaryKey,
  text,
  unique,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core'
import { instant, organisationId } from './columns'
import { sites } from './sites'

export const organisations = pgTable('organisations', {
  id: uuid('id').primaryKey(),
  name: text('name').notNull(),
  email: text('email').notNull(),
  phone: text('phone').notNull().default(''),
  isDemo: boolean('is_demo').notNull().default(false),
  createdAt: instant('created_at').notNull(),
})

export const people = pgTable(
  'people',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId().references(() => organisations.id),
    name: text('name').notNull(),
    email: text('email').notNull(),
    phone: text('phone').notNull().default(''),
    role: text('role', { enum: ['technician', 'officer', 'auditor', 'administrator'] }).notNull(),
    passwordHash: text('password_hash').notNull(),
    version: text('version').notNull(),
    createdAt: instant('created_at').notNull(),
    retiredAt: instant('retired_at'),
  },
  (table) => [
    unique('people_organisation_id').on(table.organisationId, table.id),
    // One address signs in to one account, whatever its case and organisation.
    uniqueIndex('people_email_once').on(sql`lower(${table.email})`),
  ],
)

export const personSites = pgTable(
  'person_sites',
  {
    organisationId: organisationId(),
    personId: uuid('person_id').notNull(),
    siteId: uuid('site_id').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.personId, table.siteId] }),
    foreignKey({
      name: 'person_sites_person',
      columns: [table.organisationId, table.personId],
      foreignColumns: [people.organisationId, people.id],
    }),
    foreignKey({
      name: 'person_sites_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
  ],
)

/** One signed-in device; its refresh token rotates at every use and only its hash is kept. */
export const sessions = pgTable(
  'sessions',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    personId: uuid('person_id').notNull(),
    tokenHash: text('token_hash').notNull(),
    previousTokenHash: text('previous_token_hash'),
    rotatedAt: instant('rotated_at').notNull(),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
    endedAt: instant('ended_at'),
    device: text('device').notNull().default(''),
  },
  (table) => [
    foreignKey({
      name: 'sessions_person',
      columns: [table.organisationId, table.personId],
      foreignColumns: [people.organisationId, people.id],
    }),
    index('sessions_person_id').on(table.personId),
  ],
)
