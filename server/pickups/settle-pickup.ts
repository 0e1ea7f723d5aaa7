import { and, eq, inArray } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { listPickupLines } from '@/db/queries/pickups'
import { pickups } from '@/db/schema/pickups'
import { stagesBefore } from '@/shared/pickup-stages'
import { absolute, isNegative, isPositive, isZero, subtract } from '@/shared/quantities/decimals'
import { profileOf } from '@/shared/rules/profiles'
import type { ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { accountOf } from '../book/account-of'
import { postMovements, type MovementDraft } from '../book/post-movements'
import { problem } from '../problem'
import { demandStep, getPickup } from './get-pickup'

/**
 * Closes a pickup: what stays on the hauler's account is the difference, and goes to adjustment with its cause.
 * @throws Problem nothing-received, cause-required, wrong-stage, changed-under-you
 */
export async function settlePickup(
  tx: Transaction,
  context: ActContext,
  id: string,
  body: { version: number; cause: string; note: string },
): Promise<void> {
  const found = await getPickup(tx, context, 'settle-pickup', id)
  demandStep(found, 'settle', body.version)
  const { pickup, site, hauler } = found
  if (pickup.receivedAt === null || pickup.receivedOn === null || hauler === null)
    throw problem('nothing-received')
  const differs = pickup.stage === 'differs'
  if (differs && (body.cause === 'within-rule' || body.note === '')) {
    throw problem('cause-required', {
      fields: [
        body.cause === 'within-rule'
          ? { path: 'cause', code: 'cause-required', detail: 'Choose why the quantities differ' }
          : { path: 'note', code: 'note-required', detail: 'Write what was found' },
      ],
      facts: { percent: profileOf(site.profile).differsPercent },
    })
  }
  const hauling = await accountOf(tx, context, site.id, { kind: 'hauler', partyId: hauler.id })
  const adjusting = await accountOf(tx, context, site.id, { kind: 'adjustment' })
  const drafts = (await listPickupLines(tx, [id])).flatMap(({ line, stream }): MovementDraft[] => {
    const isSolid = stream.kind === 'solid'
    // Each measure by itself: a line may have lost kilograms and gained a piece.
    const left = {
      litres: subtract(line.shippedLitres, line.receivedLitres ?? '0'),
      kilograms: subtract(line.shippedKilograms, line.receivedKilograms ?? '0'),
      pieces: String(line.pieces - (line.receivedPieces ?? 0)),
    }
    const draft = (lost: boolean): MovementDraft => {
      const part = (value: string) =>
        isZero(value) || isNegative(value) === lost ? '0' : absolute(value)
      return {
        streamId: line.streamId,
        fromAccountId: lost ? hauling : adjusting,
        toAccountId: lost ? adjusting : hauling,
        litres: part(left.litres),
        kilograms: part(left.kilograms),
        pieces: Number(part(left.pieces)),
        // Nobody typed this figure: it is what the two typed ones leave over, an estimate when one of them was.
        enteredValue: part(isSolid ? left.kilograms : left.litres),
        enteredUnit: isSolid ? 'kg' : 'L',
        method: body.cause,
        spreadPercent: null,
        isEstimate: line.receivedMethod === 'estimate' || line.receivedDensity !== null,
        reason: 'adjustment',
        pickupId: id,
        pickupLineId: line.id,
        occurredAt: context.clock(),
        note: body.note,
      }
    }
    return [draft(true), draft(false)].filter(
      ({ litres, kilograms, pieces }) => isPositive(litres) || isPositive(kilograms) || pieces > 0,
    )
  })
  await postMovements(tx, context, site.id, drafts)
  const settled = await tx
    .update(pickups)
    .set({
      stage: 'settled',
      settledAt: context.clock(),
      settledBy: context.person.id,
      settleCause: body.cause,
      settleNote: body.note,
      version: body.version + 1,
    })
    .where(
      and(
        eq(pickups.id, id),
        eq(pickups.version, body.version),
        inArray(pickups.stage, stagesBefore('settle')),
      ),
    )
    .returning({ id: pickups.id })
  if (settled.length === 0) throw problem('changed-under-you')
  await writeAudit(tx, context, {
    act: 'settle-pickup',
    subjectKind: 'pickup',
    subjectId: id,
    siteId: site.id,
    details: { cause: body.cause, note: body.note },
  })
}
