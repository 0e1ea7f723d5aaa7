import { Router } from 'express'
import { and, desc, eq, lt, or } from 'drizzle-orm'
import { organisations } from '@/db/schema/organisations'
import { outbox } from '@/db/schema/trail'
import { listMailbox } from '@/shared/contracts/pickups'
import type { AppServices } from '../app-services'
import { pageOf, readCursor } from '../http/cursor'
import { serve } from '../http/route'
import { problem } from '../problem'

/** The local mailbox: only the demo has one, and only while no mail server is set. */
export function mailRoutes(services: AppServices): Router {
  const router = Router()
  serve(router, services, listMailbox, async (tx, context, { query }) => {
    const [organisation] = await tx
      .select({ isDemo: organisations.isDemo })
      .from(organisations)
      .where(eq(organisations.id, context.person.organisationId))
    if (!organisation?.isDemo || !services.keepsMail) throw problem('not-found')
    const cursor = readCursor(query.cursor)
    const found = await tx
      .select()
      .from(outbox)
      .where(
        cursor === undefined
          ? undefined
          : or(
              lt(outbox.createdAt, new Date(cursor.at)),
              and(eq(outbox.createdAt, new Date(cursor.at)), lt(outbox.id, cursor.id)),
            ),
      )
      .orderBy(desc(outbox.createdAt), desc(outbox.id))
      .limit(query.limit + 1)
    const { rows, next } = pageOf(found, query.limit, (row) => ({
      at: row.createdAt.toISOString(),
      id: row.id,
    }))
    return { rows: rows.map((row) => ({ ...row, createdAt: row.createdAt.toISOString() })), next }
  })
  return router
}
