import type { Database } from '@/db/client'
import { organisations } from '@/db/schema/organisations'
import { asService } from '@/db/tenancy'
import type { ActContext } from '../act-context'
import type { DemoInfo } from '../app-services'

/**
 * The demo company of a database: made when the database is empty, and whom one may sign in as. Null where a company
 * of its own was set up.
 */
export async function openDemo(
  db: Database,
  tools: Pick<ActContext, 'log' | 'publicUrl' | 'clock'>,
): Promise<DemoInfo | null> {
  const find = () =>
    asService(db, (tx) => tx.select({ isDemo: organisations.isDemo }).from(organisations))
  let found = await find()
  if (found.length === 0) {
    // Loaded only where it is needed: the next start need not read a year of drains.
    const { makeDemo } = await import('./make-demo')
    await makeDemo(db, tools, { until: tools.clock(), seed: 'quillbrook' })
    found = await find()
  }
  if (!found.some(({ isDemo }) => isDemo)) return null
  const { demoInfo } = await import('./demo-people')
  return demoInfo
}
