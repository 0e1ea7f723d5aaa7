import { z } from 'zod'
import { massUnits, volumeUnits } from '../quantities/units'

/** Parts that contracts share. Decimal figures travel as strings: JSON numbers are floats. */

export const nothing = z.strictObject({})
export const noReply = z.undefined()

/** Read whatever its case, and compared in one. */
export const id = z.uuid().toLowerCase()

/** Counts the changes of a record; no greater than the database counts. */
export const revision = z.number().int().min(0).max(2_147_483_647)
export const idParams = z.strictObject({ id })

/** Any exact decimal, at most 20 digits before and 18 after the point: what numeric(38,18) holds. */
export const decimal = z.string().regex(/^-?\d{1,20}(\.\d{1,18})?$/, 'not-a-decimal')

/** A typed figure above zero: at most 8 digits before and 5 after the point. */
export const positiveDecimal = z
  .string()
  .regex(/^\d{1,8}(\.\d{1,5})?$/, 'not-a-positive-decimal')
  .refine((value) => /[1-9]/.test(value), 'not-positive')

export const percentDecimal = z.string().regex(/^\d{1,3}(\.\d{1,3})?$/, 'not-a-percentage')

export const volumeUnit = z.enum(volumeUnits)
export const massUnit = z.enum(massUnits)
export const anyUnit = z.enum([...volumeUnits, ...massUnits])

export const volume = z.strictObject({ value: positiveDecimal, unit: volumeUnit })
export const mass = z.strictObject({ value: positiveDecimal, unit: massUnit })
export const quantity = z.strictObject({ value: positiveDecimal, unit: anyUnit })

/** A quantity in a reply: any exact decimal with its unit. */
export const shownQuantity = z.object({ value: decimal, unit: anyUnit })

export type Volume = z.infer<typeof volume>
export type Mass = z.infer<typeof mass>
export type Quantity = z.infer<typeof quantity>

/** A calendar day of a site: YYYY-MM-DD. */
export const day = z.iso.date().refine((value) => value >= '1900-01-01', 'too-long-ago')
/** An instant with its offset or Z. */
export const instant = z.iso
  .datetime({ offset: true })
  .refine((value) => value >= '1900-01-02', 'too-long-ago')

/** One line of text: trimmed, no control characters and no halves of one, at most `most` characters. */
export function line(most: number) {
  return z
    .string()
    .trim()
    .max(most)
    .regex(/^[^\u0000-\u001f\u007f\p{Surrogate}]*$/u, 'control-characters')
}

export function requiredLine(most: number) {
  return line(most).min(1)
}

/** Several lines: as typed, trimmed at the ends; only tab and line breaks among the control characters. */
export function lines(most: number) {
  return z
    .string()
    .trim()
    .max(most)
    .regex(/^[^\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f\p{Surrogate}]*$/u, 'control-characters')
}

/** Short code of a site, machine, container or stream: capitals, digits and dashes. */
export const code = z
  .string()
  .trim()
  .regex(/^[A-Z0-9][A-Z0-9-]{0,15}$/, 'not-a-code')

export const pageQuery = {
  cursor: z.string().max(200).optional(),
  limit: z.coerce.number().int().min(1).max(200).default(50),
}

/** A page of rows; `next` is the cursor of the following page, null on the last. */
export function page<T extends z.ZodType>(row: T) {
  return z.object({ rows: z.array(row), next: z.string().nullable() })
}

/** What a mark, a container or a line calls another record by. */
export const named = z.object({ id, name: z.string() })
export const coded = z.object({ id, code: z.string(), name: z.string() })

export const mark = z.object({
  id,
  siteId: id,
  drainId: id.nullable(),
  drainNumber: z.string().nullable(),
  containerId: id.nullable(),
  containerCode: z.string().nullable(),
  /** A question code of shared/drain-questions.ts, or `balance-below-zero`. */
  code: z.string(),
  details: z.record(z.string(), z.string()),
  raisedAt: instant,
  reviewedAt: instant.nullable(),
  reviewedBy: z.string().nullable(),
  reviewNote: z.string().nullable(),
})
export type Mark = z.infer<typeof mark>
