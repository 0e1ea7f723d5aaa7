import { createContext, use } from 'react'
import type { z } from 'zod'
import type { SignedInPerson, setUpOrganisationBody, signInBody } from '@/shared/contracts/session'

export type SessionState =
  | { status: 'signed-in'; person: SignedInPerson }
  /** `hasEnded`: the server ended it, which the sign-in page says. */
  | { status: 'signed-out'; hasEnded: boolean }

type SessionValue = {
  state: SessionState
  /** @throws ProblemError sign-in-refused, too-many-requests; OfflineError */
  signIn: (body: z.input<typeof signInBody>) => Promise<void>
  /** @throws ProblemError already-set-up, fields-refused; OfflineError */
  setUp: (body: z.input<typeof setUpOrganisationBody>) => Promise<void>
  signOut: (person: SignedInPerson) => Promise<void>
}

export const SessionContext = createContext<SessionValue | undefined>(undefined)

/** The session as the gate and the sign-in page see it; screens use `useSession`. */
export function useSessionGate(): SessionValue {
  const value = use(SessionContext)
  if (value === undefined) throw new Error('SessionProvider is missing')
  return value
}
