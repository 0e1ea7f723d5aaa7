import { z } from 'zod'
import { measuringMethods } from '../quantities/methods'
import { defineContract } from './define-contract'
import {
  day,
  decimal,
  id,
  idParams,
  instant,
  line,
  lines,
  mark,
  mass,
  named,
  page,
  pageQuery,
  percentDecimal,
  requiredLine,
  revision,
  shownQuantity,
  volume,
} from './values'

const tag = 'drains'

export const filterSizes = ['small', 'medium', 'large', 'element'] as const
export const filterStates = ['draining', 'drained', 'crushed', 'not-drained'] as const

export const machineChoice = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('listed'), machineId: id }),
  z.strictObject({ kind: z.literal('unlisted'), description: requiredLine(120) }),
])

/** The part poured into one container. The last leg may leave out its volume: it takes the exact remainder. */
export const drainLeg = z.strictObject({ containerId: id, volume: volume.optional() })

export const spentFilters = z.strictObject({
  count: z.number().int().min(1).max(500),
  size: z.enum(filterSizes),
  state: z.enum(filterStates),
  containerId: id.optional(),
})

/** What was drained, as typed: recorded once, and again in full at every amendment. */
export const drainFacts = z.strictObject({
  machine: machineChoice,
  streamId: id,
  fluidId: id.optional(),
  occurredAt: instant,
  volume,
  method: z.enum(measuringMethods),
  /** Of this measurement, in per cent; left out, the method's own. */
  spreadPercent: percentDecimal.optional(),
  legs: z.array(drainLeg).min(1).max(8),
  filters: z.array(spentFilters).max(20).default([]),
  absorbents: z.strictObject({ mass, containerId: id.optional() }).optional(),
  breatherCaps: z.number().int().min(0).max(200).default(0),
  refill: z.strictObject({ volume, fluidId: id.optional() }).optional(),
  note: lines(1000).default(''),
})
export type DrainFacts = z.infer<typeof drainFacts>

/** Answers to what the screen asked before saving: question code and the reason chosen or typed. */
export const answers = z
  .array(z.strictObject({ code: requiredLine(40), answer: requiredLine(300) }))
  .max(12)
  .default([])

export const recordDrainBody = drainFacts.extend({ id, siteId: id, answers })
export type RecordDrainBody = z.infer<typeof recordDrainBody>

export const amendReasons = [
  'mistyped',
  'wrong-container',
  'wrong-unit',
  'measured-again',
  'other',
] as const
export const amendDrainBody = drainFacts.extend({
  expectedRevision: revision,
  reason: z.strictObject({ code: z.enum(amendReasons), text: line(300).default('') }),
  answers,
})
export type AmendDrainBody = z.infer<typeof amendDrainBody>

export const question = z.object({
  code: z.string(),
  /** Figures and names for the words of the question (catalogue key drains.questions.<code>). */
  facts: z.record(z.string(), z.string()),
})
export type Question = z.infer<typeof question>

export const drainRevision = z.object({
  revision: z.number().int(),
  act: z.enum(['recorded', 'amended', 'struck']),
  facts: drainFacts.strip(),
  reasonCode: z.string().nullable(),
  reasonText: z.string(),
  by: named,
  at: instant,
})

export const drainRow = z.object({
  id,
  number: z.string(),
  siteId: id,
  machine: z.object({ id: id.nullable(), code: z.string().nullable(), description: z.string() }),
  stream: z.object({ id, code: z.string(), name: z.string() }),
  occurredAt: instant,
  occurredOn: z.iso.date(),
  timeZone: z.string(),
  volume: shownQuantity,
  litres: decimal,
  method: z.enum(measuringMethods),
  isEstimate: z.boolean(),
  legs: z.array(
    z.object({
      containerId: id,
      containerCode: z.string(),
      volume: shownQuantity.nullable(),
      litres: decimal,
    }),
  ),
  filterCount: z.number().int(),
  state: z.enum(['standing', 'struck']),
  revision: z.number().int(),
  needsLook: z.boolean(),
  recordedBy: named,
  recordedAt: instant,
})
export type DrainRow = z.infer<typeof drainRow>

export const drain = drainRow.extend({
  fluid: named.nullable(),
  spreadPercent: z.string(),
  filters: z.array(spentFilters.strip().extend({ containerCode: z.string().nullable() })),
  absorbents: z.object({ mass: shownQuantity, containerCode: z.string().nullable() }).nullable(),
  breatherCaps: z.number().int(),
  refill: z.object({ volume: shownQuantity, fluid: named.nullable() }).nullable(),
  note: z.string(),
  revisions: z.array(drainRevision),
  marks: z.array(mark),
  /** What stands in each container of the legs after this save, so that the picture is true. */
  containersAfter: z.array(
    z.object({
      containerId: id,
      containerCode: z.string(),
      litres: decimal,
      fillLineLitres: decimal,
      roomLitres: decimal,
    }),
  ),
})
export type Drain = z.infer<typeof drain>

export const listDrains = defineContract({
  name: 'listDrains',
  method: 'get',
  path: '/drains',
  summary: 'Drains, newest first',
  tag,
  access: 'read-drains',
  query: z.strictObject({
    siteId: id.optional(),
    machineId: id.optional(),
    containerId: id.optional(),
    from: day.optional(),
    to: day.optional(),
    state: z.enum(['standing', 'struck', 'needs-a-look']).optional(),
    search: line(60).optional(),
    ...pageQuery,
  }),
  reply: page(drainRow),
})

export const readDrain = defineContract({
  name: 'readDrain',
  method: 'get',
  path: '/drains/:id',
  summary: 'One drain with its revisions; the id or the number D-25-0028',
  tag,
  access: 'read-drains',
  params: z.strictObject({ id: z.union([id, z.string().regex(/^D-\d{2}-\d{4,}$/)]) }),
  reply: drain,
  problems: ['not-found'],
})

/** Asks first: what the server would mark if this were saved. Saves nothing. */
export const askAboutDrain = defineContract({
  name: 'askAboutDrain',
  method: 'post',
  path: '/drains/questions',
  summary: 'What should be asked before this drain is saved',
  tag,
  access: 'record-drain',
  body: recordDrainBody,
  reply: z.object({ questions: z.array(question) }),
  problems: ['time-in-future', 'legs-do-not-sum', 'not-found', 'wrong-site'],
})

export const recordDrain = defineContract({
  name: 'recordDrain',
  method: 'post',
  path: '/drains',
  summary: 'Record a drain; the same id with the same content is answered again',
  tag,
  access: 'record-drain',
  body: recordDrainBody,
  reply: drain,
  status: 201,
  problems: ['id-reused', 'time-in-future', 'legs-do-not-sum', 'not-found', 'wrong-site'],
})

export const amendDrain = defineContract({
  name: 'amendDrain',
  method: 'post',
  path: '/drains/:id/amend',
  summary: 'Correct a drain: old lines mirrored, new lines posted',
  tag,
  access: 'amend-drain',
  params: idParams,
  body: amendDrainBody,
  reply: drain,
  problems: [
    'not-found',
    'changed-under-you',
    'already-struck',
    'time-in-future',
    'legs-do-not-sum',
    'wrong-site',
  ],
})

export const strikeDrain = defineContract({
  name: 'strikeDrain',
  method: 'post',
  path: '/drains/:id/strike',
  summary: 'Strike out a drain that did not happen or stands twice',
  tag,
  access: 'strike-drain',
  params: idParams,
  body: z.strictObject({ expectedRevision: revision, reason: requiredLine(300) }),
  reply: drain,
  problems: ['not-found', 'changed-under-you', 'already-struck'],
})

export const listMarks = defineContract({
  name: 'listMarks',
  method: 'get',
  path: '/marks',
  summary: 'Records that need a look',
  tag,
  access: 'read-marks',
  query: z.strictObject({
    siteId: id.optional(),
    state: z.enum(['open', 'reviewed']).default('open'),
    ...pageQuery,
  }),
  reply: page(mark),
})

export const reviewMark = defineContract({
  name: 'reviewMark',
  method: 'post',
  path: '/marks/:id/review',
  summary: 'Note what was found and close the mark',
  tag,
  access: 'review-mark',
  params: idParams,
  body: z.strictObject({ note: requiredLine(500) }),
  reply: mark,
  problems: ['not-found', 'already-reviewed'],
})
