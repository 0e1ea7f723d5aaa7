import type { Transaction } from '@/db/client'
import { audit } from '@/db/schema/trail'
import type { Act } from '@/shared/policies'
import type { ActContext } from '../act-context'

/** Writes who did what in the act's own transaction: both happen or neither. */
export async function writeAudit(
  tx: Transaction,
  context: Pick<ActContext, 'newId' | 'clock'> & { person: { id: string; organisationId: string } },
  entry: {
    act: Act
    subjectKind: string
    subjectId: string
    siteId?: string | null
    details?: Record<string, unknown>
  },
): Promise<void> {
  await tx.insert(audit).values({
    id: context.newId(),
    organisationId: context.person.organisationId,
    siteId: entry.siteId ?? null,
    personId: context.person.id,
    act: entry.act,
    subjectKind: entry.subjectKind,
    subjectId: entry.subjectId,
    details: entry.details ?? {},
    at: context.clock(),
  })
}
