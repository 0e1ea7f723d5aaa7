import { useCallback, useMemo } from 'react'
import type { SignedInPerson } from '@/shared/contracts/session'
import { can as personCan, type Act } from '@/shared/policies'
import { useSessionGate } from './session-context'

export type Session = {
  person: SignedInPerson
  /** The table of shared/policies.ts: hides what the server would refuse. */
  can: (act: Act, subject?: { siteId?: string }) => boolean
  signOut: () => Promise<void>
}

/** The signed-in person. Only below the session gate. */
export function useSession(): Session {
  const { state, signOut } = useSessionGate()
  if (state.status !== 'signed-in') throw new Error('nobody is signed in here')
  const { person } = state
  const can = useCallback<Session['can']>(
    (act, subject) => personCan(person, act, subject),
    [person],
  )
  return useMemo(() => ({ person, can, signOut: () => signOut(person) }), [person, can, signOut])
}
