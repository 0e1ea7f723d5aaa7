import { and, eq, isNull } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { permits } from '@/db/schema/sites'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { problem } from '../problem'

/**
 * Takes a permit out of use; may be asked twice.
 * @returns the hauler or facility it is of
 * @throws Problem not-found, not-allowed
 */
export async function retirePermit(
  tx: Transaction,
  context: ActContext,
  id: string,
): Promise<string> {
  demand(context, 'change-set-up')
  const [retired] = await tx
    .update(permits)
    .set({ retiredAt: context.clock() })
    .where(and(eq(permits.id, id), isNull(permits.retiredAt)))
    .returning()
  if (retired !== undefined) {
    await writeAudit(tx, context, {
      act: 'change-set-up',
      subjectKind: 'party',
      subjectId: retired.partyId,
      details: { what: 'retire-permit', number: retired.number },
    })
    return retired.partyId
  }
  const [found] = await tx.select().from(permits).where(eq(permits.id, id))
  if (found === undefined) throw problem('not-found')
  return found.partyId
}
