import { z } from 'zod'
import { pickupStages } from '../pickup-stages'
import { defineContract } from './define-contract'
import {
  anyUnit,
  day,
  decimal,
  id,
  idParams,
  instant,
  line,
  lines,
  named,
  noReply,
  page,
  pageQuery,
  quantity,
  requiredLine,
  revision,
  shownQuantity,
} from './values'

const tag = 'pickups'

/** A container to go. Left out, the quantity is what the book holds in it (litres, or kilograms and pieces). */
export const plannedLine = z.strictObject({
  id,
  containerId: id,
  quantity: quantity.optional(),
  pieces: z.number().int().min(0).max(100000).default(0),
  containerCount: z.number().int().min(1).max(1000).default(1),
})

const plan = {
  haulerId: id.nullable().default(null),
  facilityId: id.nullable().default(null),
  plannedOn: day,
  orderNumber: line(60).default(''),
  note: lines(1000).default(''),
  lines: z.array(plannedLine).min(1).max(200),
}
export const planPickupBody = z.strictObject({ id, siteId: id, ...plan })
export type PlanPickupBody = z.infer<typeof planPickupBody>
export const changePickupBody = z.strictObject({ version: revision, ...plan })

export const receivedMethods = [
  'weighbridge',
  'facility-meter',
  'facility-gauge',
  'count',
  'estimate',
] as const
export const settleCauses = [
  'within-rule',
  'free-water-decanted',
  'gauge-difference',
  'unit-slip',
  'container-miscount',
  'spilled',
  'other',
] as const

export const pickupLine = z.object({
  id,
  position: z.number().int(),
  containerId: id,
  containerCode: z.string(),
  containerType: z.string(),
  containerDescription: z.string(),
  containerCount: z.number().int(),
  stream: z.object({
    id,
    code: z.string(),
    name: z.string(),
    kind: z.enum(['fluid', 'solid']),
    wasteCode: z.string(),
  }),
  shipped: shownQuantity,
  shippedLitres: decimal,
  shippedKilograms: decimal,
  pieces: z.number().int(),
  /** Mass for the carrier: weighed, or estimated from litres with the density named; null where none may be assumed. */
  massKilograms: decimal.nullable(),
  massIsEstimate: z.boolean(),
  densityUsed: decimal.nullable(),
  /** What the book holds in the container now. */
  bookLitres: decimal,
  bookKilograms: decimal,
  bookPieces: z.number().int(),
  received: z
    .object({
      quantity: shownQuantity,
      litres: decimal,
      kilograms: decimal,
      pieces: z.number().int(),
      method: z.enum(receivedMethods),
      densityUsed: decimal.nullable(),
      note: z.string(),
    })
    .nullable(),
  /** (received - shipped) / shipped in per cent, two decimals; null before a receipt. */
  differencePercent: decimal.nullable(),
})

export const missingItem = z.object({
  /**
   * no-hauler, no-facility, party-retired, permit-missing, permit-expired, no-lines, container-held,
   * container-elsewhere or nothing-in-container
   */
  code: z.string(),
  facts: z.record(z.string(), z.string()),
})

export const signature = z.object({
  id,
  party: z.enum(['generator', 'driver']),
  name: z.string(),
  capacity: z.string(),
  isDrawn: z.boolean(),
  dispute: z.string(),
  documentSha256: z.string(),
  signedAt: instant,
  signedOffset: z.string(),
})

export const documentRow = z.object({
  id,
  kind: z.enum(['manifest', 'signed-manifest', 'void-manifest']),
  revision: z.number().int(),
  sha256: z.string(),
  pages: z.number().int(),
  byteCount: z.number().int(),
  madeAt: instant,
})

export const pickupRow = z.object({
  id,
  number: z.string().nullable(),
  siteId: id,
  siteCode: z.string(),
  stage: z.enum(pickupStages),
  hauler: named.nullable(),
  facility: named.nullable(),
  plannedOn: day,
  signedOutAt: instant.nullable(),
  returnDueOn: day.nullable(),
  daysSinceSigned: z.number().int().nullable(),
  streams: z.array(z.string()),
  totalLitres: decimal,
  totalKilograms: decimal,
  lineCount: z.number().int(),
})
export type PickupRow = z.infer<typeof pickupRow>

export const pickup = pickupRow.extend({
  version: revision,
  timeZone: z.string(),
  orderNumber: z.string(),
  note: z.string(),
  createdAt: instant,
  createdBy: named,
  issuedAt: instant.nullable(),
  issuedBy: named.nullable(),
  lines: z.array(pickupLine),
  /** Empty when the next step may be taken; for a planned pickup: what issue waits for. */
  missing: z.array(missingItem),
  signatures: z.array(signature),
  documents: z.array(documentRow),
  received: z
    .object({ at: instant, on: day, by: named, ticket: z.string(), note: z.string() })
    .nullable(),
  difference: z
    .object({
      litres: decimal,
      kilograms: decimal,
      percent: decimal.nullable(),
      rulePercent: z.string(),
      exceeds: z.boolean(),
    })
    .nullable(),
  settled: z.object({ at: instant, by: named, cause: z.string(), note: z.string() }).nullable(),
  voided: z.object({ at: instant, by: named, reason: z.string() }).nullable(),
  history: z.array(
    z.object({
      at: instant,
      by: z.string().nullable(),
      act: z.string(),
      details: z.record(z.string(), z.unknown()),
    }),
  ),
})
export type Pickup = z.infer<typeof pickup>

export const listPickups = defineContract({
  name: 'listPickups',
  method: 'get',
  path: '/pickups',
  summary: 'Pickups, newest first',
  tag,
  access: 'read-pickups',
  query: z.strictObject({
    siteId: id.optional(),
    stage: z.enum(pickupStages).optional(),
    ...pageQuery,
  }),
  reply: page(pickupRow),
})

export const readPickup = defineContract({
  name: 'readPickup',
  method: 'get',
  path: '/pickups/:id',
  summary: 'One pickup; the id or the number',
  tag,
  access: 'read-pickups',
  params: z.strictObject({ id: z.union([id, z.string().regex(/^[A-Z0-9][A-Z0-9-]{3,40}$/)]) }),
  reply: pickup,
  problems: ['not-found'],
})

export const planPickup = defineContract({
  name: 'planPickup',
  method: 'post',
  path: '/pickups',
  summary: 'Plan a pickup from containers',
  tag,
  access: 'plan-pickup',
  body: planPickupBody,
  reply: pickup,
  status: 201,
  problems: ['id-reused', 'not-found', 'wrong-site', 'retired'],
})

export const changePickup = defineContract({
  name: 'changePickup',
  method: 'put',
  path: '/pickups/:id',
  summary: 'Change a planned pickup',
  tag,
  access: 'plan-pickup',
  params: idParams,
  body: changePickupBody,
  reply: pickup,
  problems: ['not-found', 'changed-under-you', 'wrong-stage', 'wrong-site'],
})

export const issuePickup = defineContract({
  name: 'issuePickup',
  method: 'post',
  path: '/pickups/:id/issue',
  summary: 'Give the manifest its number and make its PDF',
  tag,
  access: 'issue-pickup',
  params: idParams,
  body: z.strictObject({ version: revision }),
  reply: pickup,
  problems: [
    'not-found',
    'changed-under-you',
    'wrong-stage',
    'pickup-incomplete',
    'permit-expired',
  ],
})

const point = z.tuple([z.number().min(0).max(1000), z.number().min(0).max(400)])
export const signPickupBody = z.strictObject({
  id,
  party: z.enum(['generator', 'driver']),
  name: requiredLine(120),
  capacity: line(80).default(''),
  /** Drawn lines in a 1000 x 400 box; left out when the name is typed as the signature. */
  strokes: z.array(z.array(point).min(1).max(2000)).min(1).max(200).nullable().default(null),
  /** Hash of the document that was read: another one means it must be read again. */
  documentSha256: z.string().regex(/^[0-9a-f]{64}$/),
  dispute: lines(500).default(''),
  version: revision,
})
export type SignPickupBody = z.infer<typeof signPickupBody>
export const signPickup = defineContract({
  name: 'signPickup',
  method: 'post',
  path: '/pickups/:id/signatures',
  summary: 'Sign the manifest; when both have signed, the fluid has left',
  tag,
  access: 'sign-pickup',
  params: idParams,
  body: signPickupBody,
  reply: pickup,
  problems: [
    'not-found',
    'changed-under-you',
    'wrong-stage',
    'document-changed',
    'container-held',
    'already-signed',
    'id-reused',
  ],
})

export const receivePickupBody = z.strictObject({
  version: revision,
  receivedOn: day,
  ticket: line(60).default(''),
  note: lines(1000).default(''),
  lines: z
    .array(
      z.strictObject({
        lineId: id,
        /** Nothing received is the value 0. */
        quantity: z.strictObject({
          value: z.string().regex(/^\d{1,8}(\.\d{1,5})?$/, 'not-a-positive-decimal'),
          unit: anyUnit,
        }),
        pieces: z.number().int().min(0).max(100000).default(0),
        method: z.enum(receivedMethods),
        note: line(200).default(''),
      }),
    )
    .min(1)
    .max(200),
})
export type ReceivePickupBody = z.infer<typeof receivePickupBody>
export const receivePickup = defineContract({
  name: 'receivePickup',
  method: 'post',
  path: '/pickups/:id/received',
  summary: 'Enter what the facility received; entering it again corrects it',
  tag,
  access: 'receive-pickup',
  params: idParams,
  body: receivePickupBody,
  reply: pickup,
  problems: ['not-found', 'changed-under-you', 'wrong-stage', 'fields-refused', 'time-in-future'],
})

export const settlePickup = defineContract({
  name: 'settlePickup',
  method: 'post',
  path: '/pickups/:id/settle',
  summary: 'Close a pickup whose received quantities are known and explained',
  tag,
  access: 'settle-pickup',
  params: idParams,
  body: z.strictObject({
    version: revision,
    cause: z.enum(settleCauses),
    note: lines(1000).default(''),
  }),
  reply: pickup,
  problems: ['not-found', 'changed-under-you', 'wrong-stage', 'nothing-received', 'cause-required'],
})

export const voidPickup = defineContract({
  name: 'voidPickup',
  method: 'post',
  path: '/pickups/:id/void',
  summary: 'Void a pickup; it keeps its number, its fluid goes back to the containers',
  tag,
  access: 'void-pickup',
  params: idParams,
  body: z.strictObject({ version: revision, reason: requiredLine(500) }),
  reply: pickup,
  problems: ['not-found', 'changed-under-you', 'wrong-stage'],
})

/** A link to the bytes that works for two minutes without a header, so that a browser can open and print them. */
export const ticketDocument = defineContract({
  name: 'ticketDocument',
  method: 'post',
  path: '/documents/:id/ticket',
  summary: 'A short-lived link to a document',
  tag,
  access: 'read-pickups',
  params: idParams,
  reply: z.object({ url: z.string() }),
  problems: ['not-found'],
})
export const readDocument = defineContract({
  name: 'readDocument',
  method: 'get',
  path: '/documents/:id/file',
  summary: 'The bytes of a document, with its ticket',
  tag,
  access: 'public',
  params: idParams,
  query: z.strictObject({ ticket: z.string().max(1000) }),
  reply: noReply,
  replyType: 'application/pdf',
  problems: ['ticket-expired', 'not-found'],
})

/**
 * Anyone with the paper in hand: is there such a document in the book? Asked by the SHA-256 of the file, by the hash in
 * the paper's QR code (of the facts it was drawn from), or by that hash's first 16 characters, which the paper prints
 * for typing. Tells nothing that the paper does not, but whether it still stands.
 */
export const verifyDocument = defineContract({
  name: 'verifyDocument',
  method: 'get',
  path: '/verify/:hash',
  summary: 'Is this hash, or printed code, that of an issued document',
  tag,
  access: 'public',
  params: z.strictObject({ hash: z.string().regex(/^([0-9a-f]{16}|[0-9a-f]{64})$/) }),
  reply: z.object({
    matches: z.boolean(),
    number: z.string().nullable(),
    kind: documentRow.shape.kind.nullable(),
    revision: z.number().int().nullable(),
    madeAt: instant.nullable(),
    isNewest: z.boolean().nullable(),
    stage: z.enum(pickupStages).nullable(),
    organisation: z.string().nullable(),
  }),
  problems: ['too-many-requests'],
})

export const mailRow = z.object({
  id,
  toAddress: z.string(),
  toName: z.string(),
  subject: z.string(),
  body: z.string(),
  createdAt: instant,
  state: z.enum(['waiting', 'sent', 'kept', 'failed']),
  documentId: id.nullable(),
  attachmentName: z.string().nullable(),
  lastError: z.string(),
})
export const listMailbox = defineContract({
  name: 'listMailbox',
  method: 'get',
  path: '/mailbox',
  summary: 'Mail that stays here because no mail server is set (demo only)',
  tag: 'mail',
  access: 'read-mailbox',
  query: z.strictObject({ ...pageQuery }),
  reply: page(mailRow),
  problems: ['not-found'],
})
