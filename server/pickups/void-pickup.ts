import { and, eq, inArray } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { listStandingMovements } from '@/db/queries/book'
import { pickups } from '@/db/schema/pickups'
import { stagesBefore } from '@/shared/pickup-stages'
import type { ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { containersOfMovements } from '../book/containers-of-movements'
import { reverseMovements } from '../book/reverse-movements'
import { markBelowZero } from '../drains/raise-marks'
import { evaluateSiteLimits } from '../limits/evaluate-site-limits'
import { problem } from '../problem'
import { demandStep, getPickup } from './get-pickup'
import { mailDocument } from './mail-document'
import { makeDocument } from './make-document'

/**
 * Voids a pickup. A number that was given stays given; fluid that had left goes back to its containers by mirror
 * lines; the paper is made again, marked VOID. After a receipt it is settled or corrected instead.
 * @throws Problem wrong-stage, changed-under-you, not-found
 */
export async function voidPickup(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: { version: number; reason: string },
): Promise<void> {
  const found = await getPickup(tx, context, 'void-pickup', id)
  demandStep(found, 'void', body.version)
  const { pickup, site } = found
  if (pickup.receivedAt !== null) throw problem('wrong-stage', { facts: { stage: pickup.stage } })
  const shipped = await listStandingMovements(tx, { pickupId: id })
  await reverseMovements(tx, context, site.id, shipped, body.reason)
  const voided = await tx
    .update(pickups)
    .set({
      stage: 'voided',
      voidedAt: context.clock(),
      voidedBy: context.person.id,
      voidReason: body.reason,
      version: body.version + 1,
    })
    .where(
      and(
        eq(pickups.id, id),
        eq(pickups.version, body.version),
        inArray(pickups.stage, stagesBefore('void')),
      ),
    )
    .returning({ id: pickups.id })
  if (voided.length === 0) throw problem('changed-under-you')
  await writeAudit(tx, context, {
    act: 'void-pickup',
    subjectKind: 'pickup',
    subjectId: id,
    siteId: site.id,
    details: { reason: body.reason, number: pickup.number, linesReversed: shipped.length },
  })
  if (pickup.number !== null) {
    const document = await makeDocument(tx, context, id, 'void-manifest')
    await mailDocument(tx, context, id, document.id, 'voided')
  }
  await markBelowZero(tx, context, site.id, await containersOfMovements(tx, shipped))
  await evaluateSiteLimits(tx, context, site.id)
}
