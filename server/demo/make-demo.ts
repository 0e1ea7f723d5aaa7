import { eq, sql } from 'drizzle-orm'
import type { Database, Transaction } from '@/db/client'
import { listContainersWithContents } from '@/db/queries/containers'
import { outbox } from '@/db/schema/trail'
import { asService } from '@/db/tenancy'
import type { ActContext } from '../act-context'
import { hashPassword } from '../people/passwords'
import { hasOrganisation, makeOrganisation } from '../people/set-up-organisation'
import { organisationId, personCalled, quillbrook } from './company'
import { administrator, companySteps } from './company-steps'
import { demoId } from './demo-id'
import { demoPassword } from './demo-people'
import { replay, type DemoStep } from './replay'
import { seasonSteps } from './season-steps'
import { springStories } from './spring-stories'
import { yearDrainSteps } from './year-drains'
import { yearPickupSteps } from './year-pickups'
import { yearStories } from './year-stories'

/**
 * Makes the demo company on an empty database, by the acts people use, all in one transaction: a process that is
 * killed on the way leaves nothing, and where there is an organisation nothing is made.
 * @param given what would happen after `until` is left out; without a seed the fixed year and its sequel stand alone
 * @returns whether it was made
 */
export async function makeDemo(
  db: Database,
  tools: Pick<ActContext, 'log' | 'publicUrl'>,
  given: { until: Date; seed?: string },
): Promise<boolean> {
  const passwordHash = await hashPassword(demoPassword)
  return asService(db, async (tx) => {
    // The same number as the set-up of a first organisation: of two, one waits and then finds what the other made.
    await tx.execute(sql`select pg_advisory_xact_lock(20250309)`)
    if (await hasOrganisation(tx)) return false
    await foundCompany(tx, passwordHash)
    const happened = (steps: readonly DemoStep[]) => steps.filter(({ at }) => at <= given.until)
    await replay(
      tx,
      tools,
      happened([
        ...companySteps(demoPassword),
        ...yearDrainSteps(),
        ...yearPickupSteps(),
        ...yearStories(),
        ...springStories(),
      ]),
    )
    if (given.seed !== undefined) {
      const steps = seasonSteps(given.until, given.seed, await litresByContainer(tx))
      await replay(tx, tools, happened(steps))
    }
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

/** What stands in each container when the season begins: only its plan looks at it. */
async function litresByContainer(tx: Transaction): Promise<Map<string, number>> {
  const found = await listContainersWithContents(tx, { siteIds: null })
  return new Map(found.map(({ container, litres }) => [container.code, Number(litres)]))
}
