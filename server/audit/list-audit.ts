import { and, desc, eq, isNull, lt, or } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { ofSites } from '@/db/queries/sites'
import { people } from '@/db/schema/organisations'
import { audit } from '@/db/schema/trail'
import type { listAudit as contract } from '@/shared/contracts/set-up'
import type { ActContext } from '../act-context'
import { pageOf, readCursor } from '../http/cursor'
import { sitesSeen } from '../sites-seen'

/** Who did what when, newest first: of the sites a person sees, and of what belongs to no site. */
export async function listAudit(
  tx: Transaction,
  context: ActContext,
  query: z.output<typeof contract.query>,
) {
  const after = readCursor(query.cursor)
  const seen = sitesSeen(context)
  const found = await tx
    .select({ entry: audit, name: people.name })
    .from(audit)
    .leftJoin(people, eq(people.id, audit.personId))
    .where(
      and(
        query.subjectId === undefined ? undefined : eq(audit.subjectId, query.subjectId),
        seen === null ? undefined : or(isNull(audit.siteId), ofSites(audit.siteId, seen)),
        after === undefined
          ? undefined
          : or(
              lt(audit.at, new Date(after.at)),
              and(eq(audit.at, new Date(after.at)), lt(audit.id, after.id)),
            ),
      ),
    )
    .orderBy(desc(audit.at), desc(audit.id))
    .limit(query.limit + 1)
  const { rows, next } = pageOf(found, query.limit, ({ entry }) => ({
    at: entry.at.toISOString(),
    id: entry.id,
  }))
  return {
    rows: rows.map(({ entry, name }) => ({
      ...entry,
      at: entry.at.toISOString(),
      by: entry.personId === null || name === null ? null : { id: entry.personId, name },
    })),
    next,
  }
}
