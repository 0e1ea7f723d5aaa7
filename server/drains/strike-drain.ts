import { and, eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { listStandingMovements, lockBook } from '@/db/queries/book'
import { findDrain, listRevisions } from '@/db/queries/drains'
import { drainRevisions, drains } from '@/db/schema/drains'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { containersOfMovements } from '../book/containers-of-movements'
import { reverseMovements } from '../book/reverse-movements'
import { evaluateSiteLimits } from '../limits/evaluate-site-limits'
import { problem } from '../problem'
import { closeDrainMarks, markBelowZero } from './raise-marks'

/**
 * Strikes out a drain that did not happen, or that stands twice: all its lines are mirrored, its words stay readable.
 * @throws Problem not-found, already-struck, changed-under-you
 */
export async function strikeDrain(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: { expectedRevision: number; reason: string },
): Promise<void> {
  const before = await findDrain(tx, { id })
  if (before === undefined) throw problem('not-found')
  demand(context, 'strike-drain', { siteId: before.siteId })
  if (before.state === 'struck') throw problem('already-struck')
  await lockBook(tx, before.siteId)
  const revision = body.expectedRevision + 1
  const [taken] = await tx
    .update(drains)
    .set({ revision, state: 'struck' })
    .where(
      and(
        eq(drains.id, id),
        eq(drains.revision, body.expectedRevision),
        eq(drains.state, 'standing'),
      ),
    )
    .returning({ id: drains.id })
  if (taken === undefined) throw problem('changed-under-you')
  const old = await listStandingMovements(tx, { drainId: id })
  await reverseMovements(tx, context, before.siteId, old, body.reason)
  const last = (await listRevisions(tx, [id])).at(-1)
  await tx.insert(drainRevisions).values({
    organisationId: context.person.organisationId,
    drainId: id,
    revision,
    facts: last?.revision.facts ?? {},
    act: 'struck',
    reasonText: body.reason,
    madeBy: context.person.id,
    madeAt: context.clock(),
  })
  await closeDrainMarks(tx, context, id, 'Struck out')
  await markBelowZero(tx, context, before.siteId, await containersOfMovements(tx, old))
  await writeAudit(tx, context, {
    act: 'strike-drain',
    subjectKind: 'drain',
    subjectId: id,
    siteId: before.siteId,
    details: { number: before.number, reason: body.reason },
  })
  await evaluateSiteLimits(tx, context, before.siteId)
}
