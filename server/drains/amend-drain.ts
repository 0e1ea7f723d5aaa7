import { and, eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { listStandingMovements, lockBook } from '@/db/queries/book'
import { findDrain } from '@/db/queries/drains'
import { drainRevisions, drains } from '@/db/schema/drains'
import { localDay } from '@/shared/calendar'
import { drainFacts, type AmendDrainBody } from '@/shared/contracts/drains'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { reverseMovements } from '../book/reverse-movements'
import { containersOfMovements } from '../book/containers-of-movements'
import { evaluateSiteLimits } from '../limits/evaluate-site-limits'
import { problem } from '../problem'
import { getSite } from '../sites-seen'
import { askQuestions } from './ask-questions'
import { postDrain } from './post-drain'
import { markBelowZero, renewDrainMarks } from './raise-marks'
import { drainColumns } from './record-drain'
import { resolveDrain } from './resolve-drain'

/**
 * Corrects a drain: the lines of its last revision are mirrored, the right ones posted, the old words kept. Its year's
 * number stays, even when the day moves to another year.
 * @throws Problem not-found, already-struck, changed-under-you, and what recording throws
 */
export async function amendDrain(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: AmendDrainBody,
): Promise<void> {
  const before = await findDrain(tx, { id })
  if (before === undefined) throw problem('not-found')
  demand(context, 'amend-drain', { siteId: before.siteId })
  if (before.state === 'struck') throw problem('already-struck')
  const site = await getSite(tx, context, before.siteId)
  await lockBook(tx, site.id)
  const facts = drainFacts.strip().parse(body)
  const revision = body.expectedRevision + 1
  const [taken] = await tx
    .update(drains)
    .set({ revision })
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
  await reverseMovements(tx, context, site.id, old, body.reason.code)
  const resolved = await resolveDrain(tx, context, site, facts)
  const questions = await askQuestions(tx, id, resolved)
  await tx
    .update(drains)
    .set(drainColumns(resolved, localDay(resolved.occurredAt, site.timeZone)))
    .where(eq(drains.id, id))
  await tx.insert(drainRevisions).values({
    organisationId: context.person.organisationId,
    drainId: id,
    revision,
    facts,
    act: 'amended',
    reasonCode: body.reason.code,
    reasonText: body.reason.text,
    madeBy: context.person.id,
    madeAt: context.clock(),
  })
  await postDrain(tx, context, { id, revision }, resolved)
  await renewDrainMarks(
    tx,
    context,
    { id, siteId: site.id },
    questions,
    body.answers,
    `Amended to revision ${revision}`,
  )
  const touched = [
    ...(await containersOfMovements(tx, old)),
    ...body.legs.map(({ containerId }) => containerId),
  ]
  await markBelowZero(tx, context, site.id, touched)
  await writeAudit(tx, context, {
    act: 'amend-drain',
    subjectKind: 'drain',
    subjectId: id,
    siteId: site.id,
    details: {
      number: before.number,
      revision,
      reason: body.reason,
      was: `${before.enteredValue} ${before.enteredUnit}`,
      is: `${facts.volume.value} ${facts.volume.unit}`,
    },
  })
  await evaluateSiteLimits(tx, context, site.id)
}
