import { eq, sql } from 'drizzle-orm'
import type { Database, Transaction } from '@/db/client'
import { outbox } from '@/db/schema/trail'
import { asService } from '@/db/tenancy'
import type { ActContext } from '../act-context'
import { hashPassword } from '../people/passwords'
import { hasOrganisation, makeOrganisation } from '../people/set-up-organisation'
import { organisationId, personCalled, quillbrook } from './company'
import { administrator, companySteps } from './company-steps'
import { demoId } from './demo-id'
import { demoPassword } from './demo-people'
import { replay } from './replay'
import { springStories } from './spring-stories'
import { yearDrainSteps } from './year-drains'
import { yearPickupSteps } from './year-pickups'
import { yearStories } from './year-stories'

/**
 * Makes the demo company on an empty database, by the acts people use, all in one transaction: a process that is
 * killed on the way leaves nothing, and where there is an organisation nothing is made.
 * @param until what would happen later is left out
 * @returns whether it was made
 */
export async function makeDemo(
  db: Database,
  tools: Pick<ActContext, 'log' | 'publicUrl'>,
  until: Date,
): Promise<boolean> {
  const passwordHash = await hashPassword(demoPassword)
  return asService(db, async (tx) => {
    // The same number as the set-up of a first organisation: of two, one waits and then finds what the other made.
    await tx.execute(sql`select pg_advisory_xact_lock(20250309)`)
    if (await hasOrganisation(tx)) return false
    await foundCompany(tx, passwordHash)
    const fixed = [
      ...companySteps(demoPassword),
      ...yearDrainSteps(),
      ...yearPickupSteps(),
      ...yearStories(),
      ...springStories(),
    ]
    await replay(
      tx,
      tools,
      fixed.filter(({ at }) => at <= until),
    )
    // Nobody is behind these addresses: what was mailed stays in the local mailbox, also where a mail server is set.
    await tx.execute(sql`select set_config('role', 'ebbmark_service', true)`)
    await tx.update(outbox).set({ state: 'kept' }).where(eq(outbox.organisationId, organisationId))
    return true
  })
}

async function foundCompany(tx: Transaction, passwordHash: string): Promise<void> {
  let made = 0
  await makeOrganisation(
    tx,
    {
      clock: () => new Date('2024-12-16T14:30:00Z'),
      newId: () => demoId(`founding makes ${(made += 1)}`),
    },
    {
      organisationId,
      personId: demoId(administrator),
      organisationName: quillbrook.name,
      phone: quillbrook.phone,
      name: administrator,
      email: personCalled(administrator).email,
      passwordHash,
      isDemo: true,
    },
  )
}
