import { index, integer, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { instant, organisationId } from './columns'

/** Who did what when, written in the same transaction as the act. Append-only. */
export const audit = pgTable(
  'audit',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id'),
    personId: uuid('person_id'),
    act: text('act').notNull(),
    subjectKind: text('subject_kind').notNull(),
    subjectId: uuid('subject_id').notNull(),
    details: jsonb('details').$type<Record<string, unknown>>().notNull(),
    at: instant('at').notNull(),
  },
  (table) => [
    index('audit_subject').on(table.subjectId, table.at),
    index('audit_organisation_time').on(table.organisationId, table.at),
  ],
)

/** Mail to be sent, written in the same transaction as the act that causes it. */
export const outbox = pgTable(
  'outbox',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    toAddress: text('to_address').notNull(),
    toName: text('to_name').notNull(),
    subject: text('subject').notNull(),
    body: text('body').notNull(),
    documentId: uuid('document_id'),
    attachmentName: text('attachment_name'),
    createdAt: instant('created_at').notNull(),
    state: text('state', { enum: ['waiting', 'sent', 'kept', 'failed'] }).notNull(),
    attempts: integer('attempts').notNull().default(0),
    nextAttemptAt: instant('next_attempt_at').notNull(),
    sentAt: instant('sent_at'),
    lastError: text('last_error').notNull().default(''),
  },
  (table) => [index('outbox_due').on(table.state, table.nextAttemptAt)],
)
