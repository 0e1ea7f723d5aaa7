import { eq } from 'drizzle-orm'
import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { lockBook } from '@/db/queries/book'
import { listContainersOfLegs } from '@/db/queries/drains'
import { transfers } from '@/db/schema/drains'
import type { recordTransferBody } from '@/shared/contracts/containers'
import { containerQuestionsOf } from '@/shared/drain-questions'
import { toLitres } from '@/shared/quantities/convert'
import { isEstimate, spreadOf } from '@/shared/quantities/methods'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { accountOf } from '../book/account-of'
import { postMovements } from '../book/post-movements'
import { contentHash } from '../content-hash'
import { presentInQuestion } from '../drains/present-in-question'
import { markBelowZero, raiseContainerMarks } from '../drains/raise-marks'
import { evaluateSiteLimits } from '../limits/evaluate-site-limits'
import { fieldProblem, problem } from '../problem'
import { getSite } from '../sites-seen'

const futureAllowance = 5 * 60_000

/**
 * Moves fluid from one container to another of the same site. Unlike a drain this is an act not yet done: a held or
 * retired container refuses it. Over the line or into another stream is marked.
 * @throws Problem id-reused, same-container, wrong-site, container-held, retired, time-in-future, not-found
 */
export async function recordTransfer(
  tx: Transaction,
  context: ActContext,
  body: z.output<typeof recordTransferBody>,
): Promise<{ isRepeated: boolean; recordedAt: Date }> {
  const hash = contentHash(body)
  // Before anything is read: a hold, a retirement and a retry are seen, or wait for this to end.
  await lockBook(tx, body.siteId)
  const [before] = await tx.select().from(transfers).where(eq(transfers.id, body.id)).limit(1)
  if (before !== undefined) {
    if (before.contentHash !== hash || before.recordedBy !== context.person.id)
      throw problem('id-reused')
    return { isRepeated: true, recordedAt: before.recordedAt }
  }
  demand(context, 'record-transfer', { siteId: body.siteId })
  const site = await getSite(tx, context, body.siteId)
  const occurredAt = new Date(body.occurredAt)
  if (occurredAt.getTime() > context.clock().getTime() + futureAllowance) {
    throw fieldProblem(
      'time-in-future',
      'occurredAt',
      'in-future',
      'The time must be now or in the past',
    )
  }
  if (body.fromContainerId === body.toContainerId) {
    throw fieldProblem('same-container', 'toContainerId', 'same', 'Choose another container')
  }
  const found = await listContainersOfLegs(tx, [body.fromContainerId, body.toContainerId])
  const at = (id: string, field: string) => {
    const one = found.find(({ container }) => container.id === id)
    if (one === undefined)
      throw fieldProblem('fields-refused', field, 'unknown', 'There is no such container')
    if (one.container.siteId !== site.id) {
      throw fieldProblem('wrong-site', field, 'wrong-site', 'That belongs to another site', {
        name: one.container.code,
      })
    }
    if (one.hold !== null) {
      throw problem('container-held', {
        facts: { container: one.container.code, reason: one.hold.reason },
      })
    }
    if (one.container.retiredAt !== null)
      throw fieldProblem('retired', field, 'retired', 'Choose another container')
    return one
  }
  const source = at(body.fromContainerId, 'fromContainerId')
  const target = at(body.toContainerId, 'toContainerId')
  const { container: from } = source
  const { container: to } = target
  const litres = toLitres(body.volume.value, body.volume.unit)
  const questions = containerQuestionsOf(
    { streamId: from.streamId, streamName: source.streamName },
    { container: presentInQuestion(target), litres },
  )
  const recordedAt = context.clock()
  await tx.insert(transfers).values({
    id: body.id,
    organisationId: context.person.organisationId,
    siteId: site.id,
    contentHash: hash,
    note: body.note,
    recordedAt,
    recordedBy: context.person.id,
  })
  await postMovements(tx, context, site.id, [
    {
      streamId: from.streamId,
      fromAccountId: await accountOf(tx, context, site.id, {
        kind: 'container',
        containerId: from.id,
      }),
      toAccountId: await accountOf(tx, context, site.id, { kind: 'container', containerId: to.id }),
      litres,
      kilograms: '0',
      pieces: 0,
      enteredValue: body.volume.value,
      enteredUnit: body.volume.unit,
      method: body.method,
      spreadPercent: spreadOf(body.method),
      isEstimate: isEstimate(body.method),
      reason: 'transfer',
      transferId: body.id,
      occurredAt,
      note: body.note,
    },
  ])
  await raiseContainerMarks(tx, context, site.id, questions)
  await markBelowZero(tx, context, site.id, [from.id, to.id])
  await writeAudit(tx, context, {
    act: 'record-transfer',
    subjectKind: 'transfer',
    subjectId: body.id,
    siteId: site.id,
    details: { from: from.code, to: to.code, volume: body.volume },
  })
  await evaluateSiteLimits(tx, context, site.id)
  return { isRepeated: false, recordedAt }
}
