import { useCallback, useEffect, useMemo, useState, type ReactNode } from 'react'
import type { z } from 'zod'
import {
  setUpOrganisation,
  signIn,
  signOut,
  type SignedInPerson,
  type setUpOrganisationBody,
  type signInBody,
} from '@/shared/contracts/session'
import {
  holdAccessToken,
  onSessionLost,
  refreshAccess,
  type SessionReply,
} from '../api/access-token'
import { call } from '../api/call'
import { forgetReplies } from '../api/kept-replies'
import { OfflineError } from '../api/problem-error'
import {
  forgetPerson,
  onPersonChangedElsewhere,
  oweSessionEnd,
  owesSessionEnd,
  rememberedPerson,
  rememberPerson,
} from './remembered-person'
import { SessionContext, type SessionState } from './session-context'

/**
 * Knows who is signed in. A remembered person is let in at once, so that the yard opens without signal; the server
 * confirms with the refresh cookie, or ends it.
 */
export function SessionProvider({ children }: { children: ReactNode }) {
  const [state, setState] = useState<SessionState>(initialState)

  const begin = useCallback((reply: SessionReply) => {
    holdAccessToken(reply.accessToken)
    rememberPerson(reply.person)
    setState({ status: 'signed-in', person: reply.person })
  }, [])

  const end = useCallback((hasEnded: boolean) => {
    holdAccessToken(undefined)
    forgetPerson()
    setState({ status: 'signed-out', hasEnded })
  }, [])

  useEffect(() => {
    const stopLoss = onSessionLost(() => end(true))
    const stopElsewhere = onPersonChangedElsewhere(() => {
      holdAccessToken(undefined)
      setState(initialState())
    })
    return () => {
      stopLoss()
      stopElsewhere()
    }
  }, [end])

  useEffect(() => {
    const settle = () => void settleWithServer().then((reply) => reply && begin(reply))
    settle()
    window.addEventListener('online', settle)
    return () => window.removeEventListener('online', settle)
  }, [begin])

  const value = useMemo(
    () => ({
      state,
      signIn: async (body: z.input<typeof signInBody>) => begin(await call(signIn, { body })),
      setUp: async (body: z.input<typeof setUpOrganisationBody>) =>
        begin(await call(setUpOrganisation, { body })),
      signOut: async (person: SignedInPerson) => {
        await forgetReplies(person.id).catch(() => undefined)
        end(false)
        await endOnServer()
      },
    }),
    [state, begin, end],
  )
  return <SessionContext value={value}>{children}</SessionContext>
}

function initialState(): SessionState {
  const person = rememberedPerson()
  return person === undefined
    ? { status: 'signed-out', hasEnded: false }
    : { status: 'signed-in', person }
}

/** After a load or when signal is back: confirms the remembered person, or tells the server of a sign-out it missed. */
async function settleWithServer(): Promise<SessionReply | undefined> {
  if (owesSessionEnd()) await endOnServer()
  // Without a remembered person there is no cookie worth asking with.
  if (rememberedPerson() === undefined) return undefined
  try {
    return await refreshAccess()
  } catch {
    // A lost session was told to its listeners; without signal the remembered person stays.
    return undefined
  }
}

async function endOnServer(): Promise<void> {
  oweSessionEnd(true)
  try {
    await call(signOut, {})
    oweSessionEnd(false)
  } catch (error) {
    if (!(error instanceof OfflineError)) oweSessionEnd(false)
  }
}
