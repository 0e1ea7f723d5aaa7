import { bigint, customType, numeric, timestamp, uuid } from 'drizzle-orm/pg-core'

/** An instant, always with zone; read and written as a Date. */
export function instant(name: string) {
  return timestamp(name, { withTimezone: true, precision: 3, mode: 'date' })
}

/** An exact litre or kilogram figure: a decimal string, never a float (decision 2). */
export function exact(name: string) {
  return numeric(name, { precision: 38, scale: 18 })
}

/** A counter that grows by one; read as a number (a book of 2^53 lines is out of reach). */
export function counter(name: string) {
  return bigint(name, { mode: 'number' })
}

/** The organisation every row belongs to; row-level security reads this column. */
export function organisationId() {
  return uuid('organisation_id').notNull()
}

/** Raw bytes of a document. */
export const bytes = customType<{ data: Uint8Array; driverData: Uint8Array }>({
  dataType() {
    return 'bytea'
  },
  fromDriver(value) {
    return new Uint8Array(value)
  },
})
