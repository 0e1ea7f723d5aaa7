import { eq } from 'drizzle-orm'
import { organisations } from '@/db/schema/organisations'
import { asService } from '@/db/tenancy'
import { signInAs } from '../factories'
import { aPickupYard } from '../pickups'
import type { TestApp } from '../test-app'
import type { AskedWorld } from './asked-request'

/** A yard of the demo company (only it has a mailbox) with one person of each role. */
export async function anAskedWorld(test: TestApp): Promise<AskedWorld> {
  const yard = await aPickupYard(test)
  const { organisation, id } = yard.site
  await asService(test.opened.db, (tx) =>
    tx.update(organisations).set({ isDemo: true }).where(eq(organisations.id, organisation.id)),
  )
  return {
    ...yard,
    technician: await signInAs(test, organisation, 'technician', [id]),
    auditor: await signInAs(test, organisation, 'auditor'),
    administrator: organisation.administrator,
    nextPassword: () => 'the next invented word',
  }
}
