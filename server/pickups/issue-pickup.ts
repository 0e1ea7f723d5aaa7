import { and, eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { lockBook } from '@/db/queries/book'
import { takeNumber } from '@/db/queries/drains'
import { listHaulersWithPermit, listPickupLines } from '@/db/queries/pickups'
import { pickups } from '@/db/schema/pickups'
import { yearOf } from '@/shared/calendar'
import { formatPickupNumber } from '@/shared/document-numbers'
import type { ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { problem } from '../problem'
import { demandStep, getPickup } from './get-pickup'
import { mailDocument } from './mail-document'
import { makeDocument } from './make-document'
import { missingItems } from './missing-items'

/**
 * Issues the manifest: its number (per site and year, without gaps: a refused issue gives it back), its PDF, and the
 * mail to hauler and facility, all in one transaction.
 * @throws Problem permit-expired, pickup-incomplete, wrong-stage, changed-under-you, not-found
 */
export async function issuePickup(
  tx: Transaction,
  context: ActContext,
  id: string,
  version: number,
): Promise<void> {
  const found = await getPickup(tx, context, 'issue-pickup', id)
  demandStep(found, 'issue', version)
  // Takes its turn in the site's book, so that no hold and no other issue of the same container slips past it.
  await lockBook(tx, found.site.id)
  const lines = await listPickupLines(tx, [id])
  const missing = await missingItems(tx, found, lines)
  const expired = missing.find(({ code }) => code === 'permit-expired')
  if (expired !== undefined && found.hauler !== null) {
    const others = await listHaulersWithPermit(tx, found.pickup.plannedOn, found.hauler.id)
    throw problem('permit-expired', {
      facts: {
        party: found.hauler.name,
        phone: found.hauler.phone,
        number: expired.facts.number ?? '',
        endedOn: expired.facts.endedOn ?? '',
        plannedOn: found.pickup.plannedOn,
        others: others.map(({ name }) => name).join(', '),
      },
    })
  }
  if (missing.length > 0) {
    throw problem('pickup-incomplete', {
      facts: { missing: missing.map(({ code }) => code).join(', ') },
    })
  }
  const year = yearOf(found.pickup.plannedOn)
  const sequence = await takeNumber(tx, {
    organisationId: found.pickup.organisationId,
    scopeId: found.site.id,
    kind: 'pickup',
    year,
  })
  const number = formatPickupNumber({ siteCode: found.site.code, year, sequence })
  const issued = await tx
    .update(pickups)
    .set({
      stage: 'ready',
      number,
      version: version + 1,
      issuedAt: context.clock(),
      issuedBy: context.person.id,
    })
    .where(and(eq(pickups.id, id), eq(pickups.version, version), eq(pickups.stage, 'planned')))
    .returning({ id: pickups.id })
  if (issued.length === 0) throw problem('changed-under-you')
  await writeAudit(tx, context, {
    act: 'issue-pickup',
    subjectKind: 'pickup',
    subjectId: id,
    siteId: found.site.id,
    details: { number },
  })
  const document = await makeDocument(tx, context, id, 'manifest')
  await mailDocument(tx, context, id, document.id, 'issued')
}
