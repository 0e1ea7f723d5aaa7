import { z } from 'zod'
import { roles } from '../policies'
import type { Act } from '../policies'
import { defineContract } from './define-contract'
import { email, password } from './session'
import {
  code,
  day,
  decimal,
  id,
  idParams,
  instant,
  line,
  lines,
  massUnit,
  named,
  noReply,
  percentDecimal,
  positiveDecimal,
  requiredLine,
  shownQuantity,
  volume,
  volumeUnit,
} from './values'

const tag = 'set-up'

/** Every set-up record: an id made by the client, a version for If-Match, retired instead of deleted. */
const record = { id, version: z.string(), retiredAt: instant.nullable() }

/**
 * list, read, create, change, retire and restore of one kind of set-up record.
 * Lists hold retired records too; the screens leave them out of pickers.
 */
function setUpContracts<Body extends z.ZodObject, Reply extends z.ZodType>(
  singular: string,
  path: string,
  body: Body,
  reply: Reply,
  access: { read: Act; change: Act } = { read: 'read-set-up', change: 'change-set-up' },
) {
  const createBody = body.extend({ id })
  return {
    list: defineContract({
      name: `list${singular}`,
      method: 'get',
      path,
      summary: `All records: ${singular}`,
      tag,
      access: access.read,
      reply: z.object({ rows: z.array(reply) }),
    }),
    read: defineContract({
      name: `read${singular}`,
      method: 'get',
      path: `${path}/:id`,
      summary: `One record: ${singular}`,
      tag,
      access: access.read,
      params: idParams,
      reply,
      versioned: true,
      problems: ['not-found'],
    }),
    create: defineContract({
      name: `create${singular}`,
      method: 'post',
      path,
      summary: `Make a record: ${singular}`,
      tag,
      access: access.change,
      body: createBody,
      reply,
      status: 201,
      versioned: true,
      problems: ['code-taken', 'id-reused'],
    }),
    change: defineContract({
      name: `change${singular}`,
      method: 'put',
      path: `${path}/:id`,
      summary: `Change a record: ${singular}`,
      tag,
      access: access.change,
      params: idParams,
      body,
      reply,
      versioned: true,
      problems: ['not-found', 'code-taken', 'changed-under-you', 'version-required'],
    }),
    retire: defineContract({
      name: `retire${singular}`,
      method: 'post',
      path: `${path}/:id/retire`,
      summary: `Retire a record: ${singular}`,
      tag,
      access: access.change,
      params: idParams,
      reply,
      problems: ['not-found', 'still-in-use', 'last-administrator'],
    }),
    restore: defineContract({
      name: `restore${singular}`,
      method: 'post',
      path: `${path}/:id/restore`,
      summary: `Bring a record back: ${singular}`,
      tag,
      access: access.change,
      params: idParams,
      reply,
      problems: ['not-found'],
    }),
  }
}

export const profileIds = ['us-federal-baseline', 'england'] as const

export const siteBody = z.strictObject({
  code,
  name: requiredLine(80),
  address: lines(300),
  phone: line(40),
  identificationNumber: line(40),
  timeZone: requiredLine(60),
  profile: z.enum(profileIds),
  volumeUnit,
  massUnit,
})
export const site = siteBody.extend(record).strip()
export type Site = z.infer<typeof site>
export const siteContracts = setUpContracts('Site', '/sites', siteBody, site)

export const streamKinds = ['fluid', 'solid'] as const
export const densityBases = ['measured', 'data-sheet', 'default'] as const
export const streamBody = z.strictObject({
  code: z
    .string()
    .trim()
    .regex(/^[a-z0-9][a-z0-9-]{0,23}$/, 'not-a-code'),
  name: requiredLine(80),
  kind: z.enum(streamKinds),
  labelWords: line(40),
  wasteCode: line(20),
  ruleClasses: z.array(requiredLine(40)).max(10),
  /** kg per litre at 15 degC; null where no default may be assumed. */
  density: z
    .strictObject({ kilogramsPerLitre: positiveDecimal, basis: z.enum(densityBases) })
    .nullable(),
})
export const stream = streamBody
  .extend({
    ...record,
    density: z.object({ kilogramsPerLitre: decimal, basis: z.enum(densityBases) }).nullable(),
  })
  .strip()
export type Stream = z.infer<typeof stream>
export const streamContracts = setUpContracts('Stream', '/streams', streamBody, stream)

export const fluidBody = z.strictObject({ name: requiredLine(60), streamId: id })
export const fluid = fluidBody.extend(record).strip()
export type Fluid = z.infer<typeof fluid>
export const fluidContracts = setUpContracts('Fluid', '/fluids', fluidBody, fluid)

export const machineBody = z.strictObject({
  siteId: id,
  code,
  make: line(60),
  model: line(60),
  kind: requiredLine(60),
  serial: line(60),
  fluidId: id,
  reservoir: volume.nullable(),
  system: volume.nullable(),
})
export const machine = machineBody
  .extend({
    ...record,
    reservoir: shownQuantity.nullable(),
    system: shownQuantity.nullable(),
    reservoirLitres: decimal.nullable(),
    systemLitres: decimal.nullable(),
    fluidName: z.string(),
    streamId: id,
  })
  .strip()
export type Machine = z.infer<typeof machine>
export const machineContracts = setUpContracts('Machine', '/machines', machineBody, machine)

export const containerTypes = ['drum', 'tote', 'tank', 'pail', 'bin', 'van'] as const
export const containerBody = z.strictObject({
  siteId: id,
  code,
  type: z.enum(containerTypes),
  description: line(80),
  streamId: id,
  capacity: volume,
  fillPercent: percentDecimal.refine(
    (value) => Number(value) > 0 && Number(value) <= 100,
    'not-a-percentage',
  ),
  tareKilograms: positiveDecimal.nullable(),
  place: line(60),
})
/** The set-up face of a container; its contents are in containers.ts. */
export const containerRecord = containerBody
  .extend({
    ...record,
    capacity: shownQuantity,
    capacityLitres: decimal,
    fillLineLitres: decimal,
    tareKilograms: decimal.nullable(),
  })
  .strip()
export type ContainerRecord = z.infer<typeof containerRecord>
export const containerSetUpContracts = setUpContracts(
  'ContainerRecord',
  '/container-records',
  containerBody,
  containerRecord,
)

export const permit = z.object({
  id,
  number: z.string(),
  startsOn: day,
  endsOn: day,
  note: z.string(),
  retiredAt: instant.nullable(),
})
export type Permit = z.infer<typeof permit>
export const partyBody = z.strictObject({
  name: requiredLine(120),
  identificationNumber: requiredLine(40),
  address: lines(300),
  email,
  phone: line(40),
  /** The usual driver of a hauler, the usual clerk of a facility. */
  contactName: line(80),
})
export const party = partyBody
  .extend({ ...record, email: z.string(), permits: z.array(permit) })
  .strip()
export type Party = z.infer<typeof party>
export const haulerContracts = setUpContracts('Hauler', '/haulers', partyBody, party)
export const facilityContracts = setUpContracts('Facility', '/facilities', partyBody, party)

export const permitBody = z
  .strictObject({ id, number: requiredLine(60), startsOn: day, endsOn: day, note: line(200) })
  .refine((value) => value.startsOn <= value.endsOn, {
    path: ['endsOn'],
    message: 'ends-before-start',
  })

export const addPermit = defineContract({
  name: 'addPermit',
  method: 'post',
  path: '/parties/:id/permits',
  summary: 'Add a permit to a hauler or facility',
  tag,
  access: 'change-set-up',
  params: idParams,
  body: permitBody,
  reply: party,
  status: 201,
  problems: ['not-found', 'id-reused'],
})
export const retirePermit = defineContract({
  name: 'retirePermit',
  method: 'post',
  path: '/permits/:id/retire',
  summary: 'Take a permit out of use',
  tag,
  access: 'change-set-up',
  params: idParams,
  reply: party,
  problems: ['not-found'],
})

export const personBody = z.strictObject({
  name: requiredLine(120),
  email,
  phone: line(40),
  role: z.enum(roles),
  siteIds: z.array(id).max(200),
})
export const person = personBody.extend({ ...record, email: z.string() }).strip()
export type Person = z.infer<typeof person>
const people = setUpContracts('Person', '/people', personBody, person, {
  read: 'read-people',
  change: 'change-people',
})
export const personContracts = {
  ...people,
  create: defineContract({
    name: 'createPerson',
    method: 'post',
    path: '/people',
    summary: 'Add a person with a first password',
    tag,
    access: 'change-people',
    body: personBody.extend({ id, password }),
    reply: person,
    status: 201,
    versioned: true,
    problems: ['email-taken', 'id-reused'],
  }),
}
export const setPassword = defineContract({
  name: 'setPassword',
  method: 'post',
  path: '/people/:id/password',
  summary: 'Give a person a new password; ends their sessions',
  tag,
  access: 'change-people',
  params: idParams,
  body: z.strictObject({ password }),
  reply: noReply,
  status: 204,
  problems: ['not-found'],
})

/** Everything the forms choose from, in one call; active records only except sites, which carry all. */
export const readCatalogue = defineContract({
  name: 'readCatalogue',
  method: 'get',
  path: '/catalogue',
  summary: 'What forms choose from: sites, machines, fluids, streams, parties',
  tag,
  access: 'read-set-up',
  reply: z.object({
    organisation: named,
    sites: z.array(site),
    streams: z.array(stream),
    fluids: z.array(fluid),
    machines: z.array(machine),
    haulers: z.array(party),
    facilities: z.array(party),
  }),
})
export type Catalogue = z.infer<typeof readCatalogue.reply>

export const auditEntry = z.object({
  id,
  at: instant,
  by: named.nullable(),
  act: z.string(),
  subjectKind: z.string(),
  subjectId: id,
  details: z.record(z.string(), z.unknown()),
})
export const listAudit = defineContract({
  name: 'listAudit',
  method: 'get',
  path: '/audit',
  summary: 'Who did what when, newest first',
  tag,
  access: 'read-audit',
  query: z.strictObject({
    subjectId: id.optional(),
    cursor: z.string().max(200).optional(),
    limit: z.coerce.number().int().min(1).max(200).default(50),
  }),
  reply: z.object({ rows: z.array(auditEntry), next: z.string().nullable() }),
})
