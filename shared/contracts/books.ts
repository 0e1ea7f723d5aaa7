import { z } from 'zod'
import { defineContract } from './define-contract'
import { decimal, id, instant, named, noReply, page, pageQuery, shownQuantity } from './values'

const tag = 'books'

export const groupings = ['stream', 'container', 'hauler', 'facility'] as const
export const shownUnits = ['gal_us', 'L', 'kg'] as const
/** What a group is counted in: fluids in the asked unit, filters in pieces, other solids in kilograms. */
export const groupUnits = [...shownUnits, 'pieces'] as const
export const sides = ['opening', 'in', 'out', 'adjusted', 'closing'] as const

const year = z.coerce.number().int().min(1990).max(2200)

/** What a table of totals is cut by; the export and the lines behind a figure take the same. */
export const totalsQuery = z.strictObject({
  year,
  siteId: id.optional(),
  streamId: id.optional(),
  by: z.enum(groupings).default('stream'),
  unit: z.enum(shownUnits).default('gal_us'),
})
export type TotalsQuery = z.infer<typeof totalsQuery>

/**
 * One figure: `exact` in the group's base unit (litres of a fluid, kilograms of a solid), and `shown` in the asked
 * unit, converted from the exact sum and rounded once, half-even; null where it cannot be said (kilograms of a fluid
 * whose stream has no density).
 */
export const figure = z.object({
  exact: decimal,
  shown: decimal.nullable(),
  lineCount: z.number().int(),
})
export type Figure = z.infer<typeof figure>

const sidesOf = { in: figure, out: figure, adjusted: figure }

export const totalsGroup = z.object({
  /** Key of the group: stream, container, hauler or facility id, followed by the stream id where both matter. */
  id: z.string(),
  label: z.string(),
  streamId: id,
  streamName: z.string(),
  kind: z.enum(['fluid', 'solid']),
  unit: z.enum(groupUnits),
  decimals: z.number().int(),
  densityUsed: decimal.nullable(),
  opening: figure,
  months: z.array(z.object({ month: z.string(), ...sidesOf, closing: figure })),
  total: z.object(sidesOf),
  closing: figure,
  /** Share of `in` that rests on estimates, per cent, one decimal; null when nothing came in. */
  estimatePercent: decimal.nullable(),
})
export type TotalsGroup = z.infer<typeof totalsGroup>

export const totals = z.object({
  year: z.number().int(),
  by: z.enum(groupings),
  unit: z.enum(shownUnits),
  site: named.nullable(),
  groups: z.array(totalsGroup),
  /** Sum of all fluid groups, where more than one; exact in litres. Null when kilograms cannot be said for all. */
  allFluids: totalsGroup.omit({ streamId: true, streamName: true, densityUsed: true }).nullable(),
  drainCounts: z.array(
    z.object({
      month: z.string(),
      count: z.number().int(),
      filters: z.number().int(),
      absorbentKilograms: decimal,
    }),
  ),
  /** True when shown parts do not add up to a shown total because each is rounded once. */
  roundingShows: z.boolean(),
  asOf: instant,
})
export type Totals = z.infer<typeof totals>

export const readTotals = defineContract({
  name: 'readTotals',
  method: 'get',
  path: '/books/totals',
  summary: 'A year by month: opening + in - out + adjusted = closing',
  tag,
  access: 'read-books',
  query: totalsQuery,
  reply: totals,
  problems: ['not-found'],
})

export const listYears = defineContract({
  name: 'listYears',
  method: 'get',
  path: '/books/years',
  summary: 'Years that have lines, newest first',
  tag,
  access: 'read-books',
  query: z.strictObject({ siteId: id.optional() }),
  reply: z.object({ years: z.array(z.number().int()) }),
})

export const bookLine = z.object({
  movementId: id,
  siteId: id,
  siteCode: z.string(),
  lineNo: z.number().int(),
  occurredAt: instant,
  occurredOn: z.iso.date(),
  recordedAt: instant,
  recordedBy: z.string(),
  reason: z.string(),
  countsAs: z.string(),
  isReversal: z.boolean(),
  isReversed: z.boolean(),
  stream: z.object({ id, name: z.string() }),
  from: z.string(),
  to: z.string(),
  litres: decimal,
  kilograms: decimal,
  pieces: z.number().int(),
  /** What this line adds to the opened figure: signed, in the base unit. */
  counted: decimal,
  entered: shownQuantity.nullable(),
  method: z.string(),
  isEstimate: z.boolean(),
  drain: z.object({ id, number: z.string() }).nullable(),
  pickup: z.object({ id, number: z.string().nullable() }).nullable(),
  note: z.string(),
})
export type BookLine = z.infer<typeof bookLine>

/** A stream, a holder and a stream with a dot between, or all fluids. */
function isGroup(value: string): boolean {
  const parts = value.split('.')
  return (
    value === 'all-fluids' ||
    (parts.length <= 2 && parts.every((part) => id.safeParse(part).data === part))
  )
}

export const linesQuery = totalsQuery.extend({
  groupId: z
    .string()
    .refine((value) => isGroup(value), 'not-a-group')
    .optional(),
  month: z
    .string()
    .regex(/^\d{4}-(0[1-9]|1[0-2])$/)
    .optional(),
  side: z.enum(sides).default('in'),
  ...pageQuery,
})

/** The lines one figure sums; `sum` is over all pages and equals the figure's `exact`. */
export const listBookLines = defineContract({
  name: 'listBookLines',
  method: 'get',
  path: '/books/lines',
  summary: 'The lines behind a figure',
  tag,
  access: 'read-books',
  query: linesQuery,
  reply: page(bookLine).extend({ sum: decimal, lineCount: z.number().int(), title: z.string() }),
  problems: ['not-found'],
})

/** Same rows, same order, same filter as on screen; UTF-8, one header row, cells that start a formula are guarded. */
export const exportTotals = defineContract({
  name: 'exportTotals',
  method: 'get',
  path: '/books/totals.csv',
  summary: 'The yearly totals as CSV',
  tag,
  access: 'read-books',
  query: totalsQuery,
  reply: noReply,
  replyType: 'text/csv',
  problems: ['not-found'],
})
export const exportLines = defineContract({
  name: 'exportLines',
  method: 'get',
  path: '/books/lines.csv',
  summary: 'Every line of the year as CSV',
  tag,
  access: 'read-books',
  query: z.strictObject({ year, siteId: id.optional() }),
  reply: noReply,
  replyType: 'text/csv',
  problems: ['not-found'],
})

/** The book's own check, for people: no findings means every balance, hash, number and mirror was recomputed and held. */
export const readBookCheck = defineContract({
  name: 'readBookCheck',
  method: 'get',
  path: '/books/check',
  summary: 'Check the book now',
  tag,
  access: 'read-books',
  reply: z.object({
    movements: z.number().int(),
    accounts: z.number().int(),
    checkedAt: instant,
    findings: z.array(z.object({ code: z.string(), detail: z.string() })),
  }),
})
