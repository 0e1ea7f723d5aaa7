import type { z } from 'zod'
import type { Transaction } from '@/db/client'
import { permits } from '@/db/schema/sites'
import type { permitBody } from '@/shared/contracts/set-up'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'

/** Adds a permit to a hauler or facility that exists. @throws Problem id-reused, not-allowed */
export async function addPermit(
  tx: Transaction,
  context: ActContext,
  partyId: string,
  body: z.output<typeof permitBody>,
): Promise<void> {
  demand(context, 'change-set-up')
  await tx.insert(permits).values({
    ...body,
    partyId,
    organisationId: context.person.organisationId,
    createdAt: context.clock(),
  })
  await writeAudit(tx, context, {
    act: 'change-set-up',
    subjectKind: 'party',
    subjectId: partyId,
    details: { what: 'permit', given: body },
  })
}
