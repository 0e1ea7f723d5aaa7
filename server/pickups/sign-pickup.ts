import { and, eq, inArray } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { lockBook } from '@/db/queries/book'
import { listDocuments, listPickupLines, listSignatures } from '@/db/queries/pickups'
import { pickups, signatures } from '@/db/schema/pickups'
import { addDays, localDay, offsetOf } from '@/shared/calendar'
import type { SignPickupBody } from '@/shared/contracts/pickups'
import { stagesBefore } from '@/shared/pickup-stages'
import { profileOf } from '@/shared/rules/profiles'
import type { ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { accountOf } from '../book/account-of'
import { postMovements, type MovementDraft } from '../book/post-movements'
import { markBelowZero } from '../drains/raise-marks'
import { evaluateSiteLimits } from '../limits/evaluate-site-limits'
import { problem } from '../problem'
import { demandStep, getPickup, type FoundPickup } from './get-pickup'
import { mailDocument } from './mail-document'
import { makeDocument } from './make-document'

/**
 * Takes one party's signature on the document that was read. When both have signed, the fluid has left: each line
 * moves from its container to the hauler.
 * @returns whether this signature was there already
 * @throws Problem document-changed, container-held, already-signed, wrong-stage, changed-under-you, id-reused
 */
export async function signPickup(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: SignPickupBody,
): Promise<{ isRepeated: boolean }> {
  const found = await getPickup(tx, context, 'sign-pickup', id)
  const given = await listSignatures(tx, id)
  const same = given.find((signature) => signature.id === body.id)
  if (same !== undefined) {
    if (same.party !== body.party || same.name !== body.name) throw problem('id-reused')
    return { isRepeated: true }
  }
  if (given.some(({ party }) => party === body.party)) throw problem('already-signed')
  demandStep(found, 'sign', body.version)
  const [newest] = await listDocuments(tx, id)
  if (newest === undefined || newest.sha256 !== body.documentSha256)
    throw problem('document-changed')
  // Nothing leaves a held container, also when it was held after the manifest was issued.
  await lockBook(tx, found.site.id)
  const lines = await listPickupLines(tx, [id])
  const held = lines.find(({ holdReason }) => holdReason !== null)
  if (held !== undefined) {
    throw problem('container-held', {
      facts: { container: held.container.code, reason: held.holdReason ?? '' },
    })
  }
  const now = context.clock()
  await tx.insert(signatures).values({
    id: body.id,
    organisationId: found.pickup.organisationId,
    pickupId: id,
    party: body.party,
    name: body.name,
    capacity: body.capacity,
    strokes: body.strokes,
    dispute: body.dispute,
    documentSha256: body.documentSha256,
    signedAt: now,
    signedOffset: offsetOf(now, found.site.timeZone),
    takenBy: context.person.id,
  })
  const isComplete = given.length === 1
  const { returnDueDays } = profileOf(found.site.profile)
  const stage = isComplete
    ? {
        stage: 'signed-out' as const,
        signedOutAt: now,
        returnDueOn: addDays(localDay(now, found.site.timeZone), returnDueDays),
      }
    : { stage: 'at-the-gate' as const }
  const moved = await tx
    .update(pickups)
    .set({ ...stage, version: body.version + 1 })
    .where(
      and(
        eq(pickups.id, id),
        eq(pickups.version, body.version),
        inArray(pickups.stage, stagesBefore('sign')),
      ),
    )
    .returning({ id: pickups.id })
  if (moved.length === 0) throw problem('changed-under-you')
  await writeAudit(tx, context, {
    act: 'sign-pickup',
    subjectKind: 'pickup',
    subjectId: id,
    siteId: found.site.id,
    details: { party: body.party, name: body.name, document: body.documentSha256 },
  })
  if (isComplete) {
    await shipLines(tx, context, found, lines)
    const document = await makeDocument(tx, context, id, 'signed-manifest')
    await mailDocument(tx, context, id, document.id, 'signed')
    await evaluateSiteLimits(tx, context, found.site.id)
  }
  return { isRepeated: false }
}

async function shipLines(
  tx: Transaction,
  context: ActContext,
  found: FoundPickup,
  lines: Awaited<ReturnType<typeof listPickupLines>>,
): Promise<void> {
  const { pickup, site, hauler } = found
  if (hauler === null) throw problem('pickup-incomplete')
  const toAccountId = await accountOf(tx, context, site.id, { kind: 'hauler', partyId: hauler.id })
  const drafts: MovementDraft[] = []
  for (const { line, container } of lines) {
    drafts.push({
      streamId: line.streamId,
      fromAccountId: await accountOf(tx, context, site.id, {
        kind: 'container',
        containerId: container.id,
      }),
      toAccountId,
      litres: line.shippedLitres,
      kilograms: line.shippedKilograms,
      pieces: line.pieces,
      enteredValue: line.shippedValue,
      enteredUnit: line.shippedUnit,
      method: 'shipped',
      spreadPercent: null,
      isEstimate: false,
      reason: 'shipment',
      pickupId: pickup.id,
      pickupLineId: line.id,
      occurredAt: context.clock(),
    })
  }
  await postMovements(tx, context, site.id, drafts)
  await markBelowZero(
    tx,
    context,
    site.id,
    lines.map(({ container }) => container.id),
  )
}
