import { sql } from 'drizzle-orm'
import type { PgTransactionConfig } from 'drizzle-orm/pg-core'
import type { Database, Transaction } from './client'

/**
 * One transaction as a member of one organisation: row-level security shows and takes that organisation's rows only,
 * whatever the query says.
 */
export async function asMember<T>(
  db: Database,
  member: { organisationId: string; personId: string },
  work: (tx: Transaction) => Promise<T>,
): Promise<T> {
  return db.transaction(async (tx) => {
    await tx.execute(sql`select set_config('ebbmark.organisation', ${member.organisationId}, true),
      set_config('ebbmark.person', ${member.personId}, true), set_config('role', 'ebbmark_member', true)`)
    return work(tx)
  })
}

/**
 * One transaction that sees every organisation: sign-in, mail, set-up, checks. Never for a member's request.
 * @param settings a check over many statements asks for 'repeatable read', so that it sees one moment
 */
export async function asService<T>(
  db: Database,
  work: (tx: Transaction) => Promise<T>,
  settings?: PgTransactionConfig,
): Promise<T> {
  return db.transaction(async (tx) => {
    await tx.execute(sql`select set_config('role', 'ebbmark_service', true)`)
    return work(tx)
  }, settings)
}
