import {
  boolean,
  date,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core'
import { bytes, exact, instant, organisationId } from './columns'
import { containers, parties, sites, streams } from './sites'

export const pickups = pgTable(
  'pickups',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    number: text('number'),
    stage: text('stage', {
      enum: ['planned', 'ready', 'at-the-gate', 'signed-out', 'differs', 'settled', 'voided'],
    }).notNull(),
    haulerId: uuid('hauler_id'),
    facilityId: uuid('facility_id'),
    plannedOn: date('planned_on', { mode: 'string' }).notNull(),
    orderNumber: text('order_number').notNull().default(''),
    note: text('note').notNull().default(''),
    version: integer('version').notNull(),
    createdAt: instant('created_at').notNull(),
    createdBy: uuid('created_by').notNull(),
    issuedAt: instant('issued_at'),
    issuedBy: uuid('issued_by'),
    signedOutAt: instant('signed_out_at'),
    returnDueOn: date('return_due_on', { mode: 'string' }),
    receivedAt: instant('received_at'),
    receivedOn: date('received_on', { mode: 'string' }),
    receivedBy: uuid('received_by'),
    receivedTicket: text('received_ticket').notNull().default(''),
    receivedNote: text('received_note').notNull().default(''),
    settledAt: instant('settled_at'),
    settledBy: uuid('settled_by'),
    settleCause: text('settle_cause'),
    settleNote: text('settle_note').notNull().default(''),
    voidedAt: instant('voided_at'),
    voidedBy: uuid('voided_by'),
    voidReason: text('void_reason').notNull().default(''),
    contentHash: text('content_hash').notNull(),
  },
  (table) => [
    unique('pickups_organisation_id').on(table.organisationId, table.id),
    unique('pickups_number_once').on(table.organisationId, table.number),
    foreignKey({
      name: 'pickups_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
    foreignKey({
      name: 'pickups_hauler',
      columns: [table.organisationId, table.haulerId],
      foreignColumns: [parties.organisationId, parties.id],
    }),
    foreignKey({
      name: 'pickups_facility',
      columns: [table.organisationId, table.facilityId],
      foreignColumns: [parties.organisationId, parties.id],
    }),
    index('pickups_site_stage').on(table.siteId, table.stage),
  ],
)

/** One stream out of one container on a pickup. */
export const pickupLines = pgTable(
  'pickup_lines',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    pickupId: uuid('pickup_id').notNull(),
    position: integer('position').notNull(),
    containerId: uuid('container_id').notNull(),
    streamId: uuid('stream_id').notNull(),
    shippedValue: text('shipped_value').notNull(),
    shippedUnit: text('shipped_unit').notNull(),
    shippedLitres: exact('shipped_litres').notNull(),
    shippedKilograms: exact('shipped_kilograms').notNull(),
    pieces: integer('pieces').notNull().default(0),
    containerCount: integer('container_count').notNull().default(1),
    receivedValue: text('received_value'),
    receivedUnit: text('received_unit'),
    receivedLitres: exact('received_litres'),
    receivedKilograms: exact('received_kilograms'),
    receivedPieces: integer('received_pieces'),
    receivedMethod: text('received_method'),
    receivedNote: text('received_note').notNull().default(''),
    /** Of a weighed receipt of a fluid: the density that turned kilograms into litres. */
    receivedDensity: exact('received_density'),
    removed: boolean('removed').notNull().default(false),
  },
  (table) => [
    unique('pickup_lines_organisation_id').on(table.organisationId, table.id),
    foreignKey({
      name: 'pickup_lines_pickup',
      columns: [table.organisationId, table.pickupId],
      foreignColumns: [pickups.organisationId, pickups.id],
    }),
    foreignKey({
      name: 'pickup_lines_container',
      columns: [table.organisationId, table.containerId],
      foreignColumns: [containers.organisationId, containers.id],
    }),
    foreignKey({
      name: 'pickup_lines_stream',
      columns: [table.organisationId, table.streamId],
      foreignColumns: [streams.organisationId, streams.id],
    }),
    index('pickup_lines_pickup_id').on(table.pickupId, table.position),
  ],
)

/** Who signed what, bound to the hash of the document that was read. Append-only. */
export const signatures = pgTable(
  'signatures',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    pickupId: uuid('pickup_id').notNull(),
    party: text('party', { enum: ['generator', 'driver'] }).notNull(),
    name: text('name').notNull(),
    capacity: text('capacity').notNull().default(''),
    /** Drawn lines in a 1000 x 400 box, or null when typed. */
    strokes: jsonb('strokes').$type<[number, number][][]>(),
    dispute: text('dispute').notNull().default(''),
    documentSha256: text('document_sha256').notNull(),
    signedAt: instant('signed_at').notNull(),
    /** Offset of the site's clock at that moment, like -06:00. */
    signedOffset: text('signed_offset').notNull(),
    takenBy: uuid('taken_by').notNull(),
  },
  (table) => [
    unique('signatures_party_once').on(table.pickupId, table.party),
    foreignKey({
      name: 'signatures_pickup',
      columns: [table.organisationId, table.pickupId],
      foreignColumns: [pickups.organisationId, pickups.id],
    }),
  ],
)

/** Bytes as they were issued, with the facts they were drawn from. Append-only. */
export const documents = pgTable(
  'documents',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    pickupId: uuid('pickup_id').notNull(),
    kind: text('kind', { enum: ['manifest', 'signed-manifest', 'void-manifest'] }).notNull(),
    revision: integer('revision').notNull(),
    facts: jsonb('facts').notNull(),
    pages: integer('pages').notNull(),
    bytes: bytes('bytes').notNull(),
    sha256: text('sha256').notNull(),
    /** SHA-256 of the canonical facts: printed on the paper, which cannot carry the hash of itself. */
    factsSha256: text('facts_sha256').notNull(),
    madeAt: instant('made_at').notNull(),
  },
  (table) => [
    unique('documents_revision_once').on(table.pickupId, table.revision),
    foreignKey({
      name: 'documents_pickup',
      columns: [table.organisationId, table.pickupId],
      foreignColumns: [pickups.organisationId, pickups.id],
    }),
    index('documents_sha256').on(table.sha256),
    index('documents_facts_sha256').on(table.factsSha256),
  ],
)
