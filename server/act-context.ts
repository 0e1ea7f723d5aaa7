import type { Logger } from 'pino'
import { can, type Act, type Role } from '@/shared/policies'
import { problem } from './problem'

/** Who acts, as the policy sees them. */
export type ActingPerson = {
  id: string
  name: string
  email: string
  role: Role
  siteIds: string[]
  organisationId: string
}

/** What every act is handed besides its transaction and its input; nothing in it is global. */
export type ActContext = {
  person: ActingPerson
  /** The present instant; tests and the demo choose it. */
  clock: () => Date
  newId: () => string
  log: Logger
  /** Address of the product as people reach it, without a slash at the end; goes into QR codes and mail. */
  publicUrl: string
}

/**
 * Refuses with `not-allowed` unless the policy table lets this person do this act (on this site).
 * A site the person may not see is `not-found`, so that its existence is not told.
 */
export function demand(context: ActContext, act: Act, subject: { siteId?: string } = {}): void {
  if (!can(context.person, act)) throw problem('not-allowed')
  if (!can(context.person, act, subject)) throw problem('not-found')
}
