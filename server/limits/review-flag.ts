import { and, eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { flags } from '@/db/schema/limits'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { problem } from '../problem'

/** An officer has looked at a flag and says what was found. @throws Problem not-found, already-reviewed */
export async function reviewFlag(
  tx: Transaction,
  context: ActContext,
  id: string,
  note: string,
): Promise<void> {
  const [before] = await tx.select().from(flags).where(eq(flags.id, id)).limit(1)
  if (before === undefined) throw problem('not-found')
  demand(context, 'review-flag', { siteId: before.siteId })
  const reviewed = await tx
    .update(flags)
    .set({
      state: 'reviewed',
      reviewedAt: context.clock(),
      reviewedBy: context.person.id,
      reviewNote: note,
    })
    .where(and(eq(flags.id, id), eq(flags.state, 'open')))
    .returning({ id: flags.id })
  if (reviewed.length === 0) throw problem('already-reviewed')
  await writeAudit(tx, context, {
    act: 'review-flag',
    subjectKind: 'flag',
    subjectId: id,
    siteId: before.siteId,
    details: { rule: before.rule.title, note },
  })
}
