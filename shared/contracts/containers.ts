import { z } from 'zod'
import { measuringMethods } from '../quantities/methods'
import { defineContract } from './define-contract'
import { drainRow } from './drains'
import { containerRecord } from './set-up'
import {
  decimal,
  id,
  idParams,
  instant,
  lines,
  mark,
  named,
  requiredLine,
  shownQuantity,
  volume,
} from './values'

const tag = 'containers'

/** Where a level stands: room, near the line (90 % of it), over it, or below zero in the book. */
export const levels = ['room', 'near', 'over', 'below-zero'] as const

export const hold = z.object({
  id,
  reason: z.string(),
  halogensPpm: z.string().nullable(),
  heldBy: named,
  heldAt: instant,
  releasedBy: named.nullable(),
  releasedAt: instant.nullable(),
  releaseNote: z.string().nullable(),
})

/** A container with what the book says is in it. */
export const container = containerRecord.extend({
  siteCode: z.string(),
  stream: z.object({
    id,
    code: z.string(),
    name: z.string(),
    kind: z.enum(['fluid', 'solid']),
    labelWords: z.string(),
  }),
  litres: decimal,
  kilograms: decimal,
  pieces: z.number().int(),
  /** fill line minus litres; negative when over. */
  roomLitres: decimal,
  level: z.enum(levels),
  hold: hold.nullable(),
  /** First day something was poured in since it last stood empty. */
  firstFilledOn: z.iso.date().nullable(),
  ageDays: z.number().int().nullable(),
  hasEstimates: z.boolean(),
  openMarks: z.number().int(),
  /** The pickup that has it on an open plan or manifest. */
  onPickup: z.object({ id, number: z.string().nullable() }).nullable(),
})
export type Container = z.infer<typeof container>

export const containerLine = z.object({
  movementId: id,
  lineNo: z.number().int(),
  occurredOn: z.iso.date(),
  recordedAt: instant,
  reason: z.string(),
  isReversal: z.boolean(),
  isReversed: z.boolean(),
  /** Signed: in is positive, out negative. */
  litres: decimal,
  kilograms: decimal,
  pieces: z.number().int(),
  entered: shownQuantity.nullable(),
  other: z.string(),
  stream: z.string(),
  drain: z.object({ id, number: z.string() }).nullable(),
  pickup: z.object({ id, number: z.string().nullable() }).nullable(),
  /** Litres in the container after this line. */
  litresAfter: decimal,
})

export const containerDetail = container.extend({
  holds: z.array(hold),
  marks: z.array(mark),
  lines: z.array(containerLine),
  hasMoreLines: z.boolean(),
})
export type ContainerDetail = z.infer<typeof containerDetail>

export const listContainers = defineContract({
  name: 'listContainers',
  method: 'get',
  path: '/containers',
  summary: 'Containers with what is in them',
  tag,
  access: 'read-containers',
  query: z.strictObject({
    siteId: id.optional(),
    streamId: id.optional(),
    retired: z.enum(['yes', 'no']).default('no'),
  }),
  reply: z.object({ rows: z.array(container) }),
})

export const readContainer = defineContract({
  name: 'readContainer',
  method: 'get',
  path: '/containers/:id',
  summary: 'One container with its newest lines; the id or the code',
  tag,
  access: 'read-containers',
  params: z.strictObject({ id: z.union([id, z.string().regex(/^[A-Z0-9][A-Z0-9-]{0,15}$/)]) }),
  query: z.strictObject({ lines: z.coerce.number().int().min(1).max(500).default(50) }),
  reply: containerDetail,
  problems: ['not-found'],
})

export const holdContainer = defineContract({
  name: 'holdContainer',
  method: 'post',
  path: '/containers/:id/hold',
  summary: 'Nothing in, nothing out until an officer releases it',
  tag,
  access: 'hold-container',
  params: idParams,
  body: z.strictObject({
    id,
    reason: requiredLine(300),
    halogensPpm: z
      .string()
      .regex(/^\d{1,6}$/, 'not-a-count')
      .nullable()
      .default(null),
  }),
  reply: containerDetail,
  problems: ['not-found', 'already-held', 'id-reused'],
})

export const releaseContainer = defineContract({
  name: 'releaseContainer',
  method: 'post',
  path: '/containers/:id/release',
  summary: 'Release a held container, with the result',
  tag,
  access: 'release-container',
  params: idParams,
  body: z.strictObject({ note: requiredLine(500) }),
  reply: containerDetail,
  problems: ['not-found', 'not-held'],
})

export const recordTransferBody = z.strictObject({
  id,
  siteId: id,
  fromContainerId: id,
  toContainerId: id,
  volume,
  method: z.enum(measuringMethods),
  occurredAt: instant,
  note: lines(500).default(''),
})
export const transferReply = z.object({
  id,
  siteId: id,
  from: containerRecord.pick({ id: true, code: true }),
  to: containerRecord.pick({ id: true, code: true }),
  volume: shownQuantity,
  litres: decimal,
  recordedAt: instant,
})
export const recordTransfer = defineContract({
  name: 'recordTransfer',
  method: 'post',
  path: '/transfers',
  summary: 'Move fluid from one container to another of the same site',
  tag,
  access: 'record-transfer',
  body: recordTransferBody,
  reply: transferReply,
  status: 201,
  problems: [
    'id-reused',
    'not-found',
    'wrong-site',
    'same-container',
    'container-held',
    'retired',
    'time-in-future',
  ],
})

/** Today at one site, in one answer. */
export const readYard = defineContract({
  name: 'readYard',
  method: 'get',
  path: '/yard',
  summary: 'Today at a site: containers near their line, what needs a look, waiting pickups',
  tag,
  access: 'read-yard',
  query: z.strictObject({ siteId: id }),
  reply: z.object({
    today: z.iso.date(),
    containers: z.array(container),
    marks: z.array(mark),
    openFlags: z.number().int(),
    latestDrains: z.array(drainRow),
    drainsToday: z.number().int(),
    litresToday: decimal,
    pickups: z.array(
      z.object({
        id,
        number: z.string().nullable(),
        stage: z.string(),
        hauler: z.string().nullable(),
        plannedOn: z.iso.date(),
      }),
    ),
    lastMachines: z.array(id),
  }),
  problems: ['not-found'],
})
export type Yard = z.infer<typeof readYard.reply>
