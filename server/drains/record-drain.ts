import type { Transaction } from '@/db/client'
import { lockBook } from '@/db/queries/book'
import { findDrain, takeNumber } from '@/db/queries/drains'
import { drainRevisions, drains } from '@/db/schema/drains'
import { localDay, yearOf } from '@/shared/calendar'
import { drainFacts, type RecordDrainBody } from '@/shared/contracts/drains'
import { formatDrainNumber } from '@/shared/document-numbers'
import { isEstimate } from '@/shared/quantities/methods'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { contentHash } from '../content-hash'
import { evaluateSiteLimits } from '../limits/evaluate-site-limits'
import { problem } from '../problem'
import { getSite } from '../sites-seen'
import { askQuestions } from './ask-questions'
import { postDrain } from './post-drain'
import { markBelowZero, raiseDrainMarks } from './raise-marks'
import { resolveDrain } from './resolve-drain'

/**
 * Records a drain. What was poured is a fact: it is never refused for being too much, in the wrong container or odd,
 * only marked.
 * @returns the id, and whether this very record was there already
 * @throws Problem id-reused, time-in-future, legs-do-not-sum, wrong-site, fields-refused, not-found
 */
export async function recordDrain(
  tx: Transaction,
  context: ActContext,
  body: RecordDrainBody,
): Promise<{ id: string; isRepeated: boolean }> {
  const hash = contentHash(body)
  // Before anything is read: two who pour into one drum take turns, and a retry finds what it repeats.
  await lockBook(tx, body.siteId)
  const before = await findDrain(tx, { id: body.id })
  if (before !== undefined) {
    if (before.contentHash !== hash || before.recordedBy !== context.person.id)
      throw problem('id-reused')
    return { id: before.id, isRepeated: true }
  }
  demand(context, 'record-drain', { siteId: body.siteId })
  const site = await getSite(tx, context, body.siteId)
  if (site.retiredAt !== null) throw problem('retired')
  const facts = drainFacts.strip().parse(body)
  const resolved = await resolveDrain(tx, context, site, facts)
  const questions = await askQuestions(tx, body.id, resolved)
  const occurredOn = localDay(resolved.occurredAt, site.timeZone)
  const year = yearOf(occurredOn)
  const { organisationId, id: recordedBy } = context.person
  const number = formatDrainNumber(
    year,
    await takeNumber(tx, { organisationId, scopeId: organisationId, kind: 'drain', year }),
  )
  await tx.insert(drains).values({
    id: body.id,
    organisationId,
    siteId: site.id,
    number,
    ...drainColumns(resolved, occurredOn),
    state: 'standing',
    revision: 1,
    recordedAt: context.clock(),
    recordedBy,
    contentHash: hash,
  })
  await tx.insert(drainRevisions).values({
    organisationId,
    drainId: body.id,
    revision: 1,
    facts,
    act: 'recorded',
    madeBy: recordedBy,
    madeAt: context.clock(),
  })
  await postDrain(tx, context, { id: body.id, revision: 1 }, resolved)
  await raiseDrainMarks(tx, context, { id: body.id, siteId: site.id }, questions, body.answers)
  await markBelowZero(
    tx,
    context,
    site.id,
    body.legs.map(({ containerId }) => containerId),
  )
  await writeAudit(tx, context, {
    act: 'record-drain',
    subjectKind: 'drain',
    subjectId: body.id,
    siteId: site.id,
    details: { number, marks: questions.map(({ code }) => code) },
  })
  await evaluateSiteLimits(tx, context, site.id)
  return { id: body.id, isRepeated: false }
}

/** The columns of a drain that its newest revision decides. */
export function drainColumns(
  resolved: Awaited<ReturnType<typeof resolveDrain>>,
  occurredOn: string,
) {
  const { facts } = resolved
  return {
    machineId: resolved.machine?.id ?? null,
    machineText: facts.machine.kind === 'unlisted' ? facts.machine.description : '',
    streamId: resolved.stream.id,
    occurredAt: resolved.occurredAt,
    occurredOn,
    enteredValue: facts.volume.value,
    enteredUnit: facts.volume.unit,
    litres: resolved.litres,
    method: facts.method,
    isEstimate: isEstimate(facts.method),
  }
}
