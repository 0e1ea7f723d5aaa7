import type { Transaction } from '@/db/client'
import { findActingPerson } from '@/db/queries/people'
import type { ActingPerson } from '../act-context'
import { problem } from '../problem'

/**
 * The person of an access token, as the database has them now: a retired account or an ended session is out at once,
 * not when the token runs out.
 * @throws Problem sign-in-required
 */
export async function getActingPerson(
  tx: Transaction,
  claims: { personId: string; sessionId: string },
): Promise<ActingPerson> {
  const person = await findActingPerson(tx, claims)
  if (person === undefined) throw problem('sign-in-required')
  return person
}
