import { and, eq, isNull } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { marks } from '@/db/schema/drains'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { problem } from '../problem'

/** An officer has looked at a mark and says what was found. @throws Problem not-found, already-reviewed */
export async function reviewMark(
  tx: Transaction,
  context: ActContext,
  id: string,
  note: string,
): Promise<void> {
  const [before] = await tx.select().from(marks).where(eq(marks.id, id)).limit(1)
  if (before === undefined) throw problem('not-found')
  demand(context, 'review-mark', { siteId: before.siteId })
  const reviewed = await tx
    .update(marks)
    .set({ reviewedAt: context.clock(), reviewedBy: context.person.id, reviewNote: note })
    .where(and(eq(marks.id, id), isNull(marks.reviewedAt)))
    .returning({ id: marks.id })
  if (reviewed.length === 0) throw problem('already-reviewed')
  await writeAudit(tx, context, {
    act: 'review-mark',
    subjectKind: 'mark',
    subjectId: id,
    siteId: before.siteId,
    details: { code: before.code, note },
  })
}
