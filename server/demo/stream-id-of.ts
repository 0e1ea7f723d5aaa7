import { eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { streams } from '@/db/schema/sites'

/** The id of one of the streams the organisation started with. */
export async function streamIdOf(tx: Transaction, code: string): Promise<string> {
  const [found] = await tx.select({ id: streams.id }).from(streams).where(eq(streams.code, code))
  if (found === undefined) throw new Error(`the demo company has no stream ${code}`)
  return found.id
}
