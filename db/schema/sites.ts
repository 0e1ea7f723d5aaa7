import { date, foreignKey, index, jsonb, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core'
import { exact, instant, organisationId } from './columns'

/** Set-up records carry a version for If-Match and are retired, never deleted. */
const setUp = {
  version: text('version').notNull(),
  createdAt: instant('created_at').notNull(),
  retiredAt: instant('retired_at'),
}

export const sites = pgTable(
  'sites',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    code: text('code').notNull(),
    name: text('name').notNull(),
    address: text('address').notNull().default(''),
    phone: text('phone').notNull().default(''),
    identificationNumber: text('identification_number').notNull().default(''),
    timeZone: text('time_zone').notNull(),
    profile: text('profile').notNull(),
    volumeUnit: text('volume_unit').notNull(),
    massUnit: text('mass_unit').notNull(),
    ...setUp,
  },
  (table) => [
    unique('sites_organisation_id').on(table.organisationId, table.id),
    unique('sites_code_once').on(table.organisationId, table.code),
  ],
)

export const streams = pgTable(
  'streams',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    code: text('code').notNull(),
    name: text('name').notNull(),
    /** fluid is counted in litres, solid in kilograms and pieces. */
    kind: text('kind', { enum: ['fluid', 'solid'] }).notNull(),
    labelWords: text('label_words').notNull().default(''),
    wasteCode: text('waste_code').notNull().default(''),
    ruleClasses: jsonb('rule_classes').$type<string[]>().notNull(),
    /** kg per litre at 15 degC; null where no default may be assumed. */
    density: exact('density'),
    densityBasis: text('density_basis', { enum: ['measured', 'data-sheet', 'default'] }),
    ...setUp,
  },
  (table) => [
    unique('streams_organisation_id').on(table.organisationId, table.id),
    unique('streams_code_once').on(table.organisationId, table.code),
  ],
)

export const fluids = pgTable(
  'fluids',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    name: text('name').notNull(),
    streamId: uuid('stream_id').notNull(),
    ...setUp,
  },
  (table) => [
    unique('fluids_organisation_id').on(table.organisationId, table.id),
    unique('fluids_name_once').on(table.organisationId, table.name),
    foreignKey({
      name: 'fluids_stream',
      columns: [table.organisationId, table.streamId],
      foreignColumns: [streams.organisationId, streams.id],
    }),
  ],
)

export const machines = pgTable(
  'machines',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    code: text('code').notNull(),
    make: text('make').notNull().default(''),
    model: text('model').notNull().default(''),
    kind: text('kind').notNull(),
    serial: text('serial').notNull().default(''),
    fluidId: uuid('fluid_id').notNull(),
    reservoirValue: text('reservoir_value'),
    reservoirUnit: text('reservoir_unit'),
    reservoirLitres: exact('reservoir_litres'),
    systemValue: text('system_value'),
    systemUnit: text('system_unit'),
    systemLitres: exact('system_litres'),
    ...setUp,
  },
  (table) => [
    unique('machines_organisation_id').on(table.organisationId, table.id),
    unique('machines_code_once').on(table.organisationId, table.code),
    foreignKey({
      name: 'machines_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
    foreignKey({
      name: 'machines_fluid',
      columns: [table.organisationId, table.fluidId],
      foreignColumns: [fluids.organisationId, fluids.id],
    }),
  ],
)

export const containers = pgTable(
  'containers',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    code: text('code').notNull(),
    type: text('type', { enum: ['drum', 'tote', 'tank', 'pail', 'bin', 'van'] }).notNull(),
    description: text('description').notNull().default(''),
    streamId: uuid('stream_id').notNull(),
    capacityValue: text('capacity_value').notNull(),
    capacityUnit: text('capacity_unit').notNull(),
    capacityLitres: exact('capacity_litres').notNull(),
    fillPercent: text('fill_percent').notNull(),
    fillLineLitres: exact('fill_line_litres').notNull(),
    tareKilograms: exact('tare_kilograms'),
    place: text('place').notNull().default(''),
    ...setUp,
  },
  (table) => [
    unique('containers_organisation_id').on(table.organisationId, table.id),
    unique('containers_code_once').on(table.organisationId, table.code),
    foreignKey({
      name: 'containers_site',
      columns: [table.organisationId, table.siteId],
      foreignColumns: [sites.organisationId, sites.id],
    }),
    foreignKey({
      name: 'containers_stream',
      columns: [table.organisationId, table.streamId],
      foreignColumns: [streams.organisationId, streams.id],
    }),
  ],
)

/** A container that nothing may be poured into or taken from until it is released. */
export const holds = pgTable(
  'holds',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    siteId: uuid('site_id').notNull(),
    containerId: uuid('container_id').notNull(),
    reason: text('reason').notNull(),
    halogensPpm: text('halogens_ppm'),
    heldBy: uuid('held_by').notNull(),
    heldAt: instant('held_at').notNull(),
    releasedBy: uuid('released_by'),
    releasedAt: instant('released_at'),
    releaseNote: text('release_note'),
  },
  (table) => [
    foreignKey({
      name: 'holds_container',
      columns: [table.organisationId, table.containerId],
      foreignColumns: [containers.organisationId, containers.id],
    }),
    index('holds_container_id').on(table.containerId),
  ],
)

/** Haulers and receiving facilities: the other parties of a pickup. */
export const parties = pgTable(
  'parties',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    kind: text('kind', { enum: ['hauler', 'facility'] }).notNull(),
    name: text('name').notNull(),
    identificationNumber: text('identification_number').notNull(),
    address: text('address').notNull().default(''),
    email: text('email').notNull(),
    phone: text('phone').notNull().default(''),
    contactName: text('contact_name').notNull().default(''),
    ...setUp,
  },
  (table) => [
    unique('parties_organisation_id').on(table.organisationId, table.id),
    unique('parties_name_once').on(table.organisationId, table.kind, table.name),
  ],
)

export const permits = pgTable(
  'permits',
  {
    id: uuid('id').primaryKey(),
    organisationId: organisationId(),
    partyId: uuid('party_id').notNull(),
    number: text('number').notNull(),
    startsOn: date('starts_on', { mode: 'string' }).notNull(),
    endsOn: date('ends_on', { mode: 'string' }).notNull(),
    note: text('note').notNull().default(''),
    createdAt: instant('created_at').notNull(),
    retiredAt: instant('retired_at'),
  },
  (table) => [
    foreignKey({
      name: 'permits_party',
      columns: [table.organisationId, table.partyId],
      foreignColumns: [parties.organisationId, parties.id],
    }),
    index('permits_party_id').on(table.partyId),
  ],
)
