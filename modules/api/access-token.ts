import type { z } from 'zod'
import { refreshSession, type sessionReply } from '@/shared/contracts/session'
import { fetchReply } from './fetch-reply'
import { isProblem } from './problem-error'
import { withLock } from './with-lock'

export type SessionReply = z.output<typeof sessionReply>

/**
 * The access token lives in this variable only: a reload forgets it and asks again with the httpOnly cookie, so
 * nothing that reads storage can take it.
 */
let held: string | undefined
let refreshing: Promise<SessionReply> | undefined
const lossListeners = new Set<() => void>()

export function accessToken(): string | undefined {
  return held
}

export function holdAccessToken(token: string | undefined): void {
  held = token
}

/** Called when the server no longer knows the session: the gate then shows the sign-in page. */
export function onSessionLost(listener: () => void): () => void {
  lossListeners.add(listener)
  return () => lossListeners.delete(listener)
}

/**
 * A new access token for the refresh cookie. Single flight in this tab and one tab at a time: the cookie's token
 * rotates, and two refreshes with the same one would look like theft.
 * @throws ProblemError sign-in-required when the session is over; OfflineError
 */
export function refreshAccess(): Promise<SessionReply> {
  refreshing ??= withLock('ebbmark-refresh', refreshOnce).finally(() => {
    refreshing = undefined
  })
  return refreshing
}

async function refreshOnce(): Promise<SessionReply> {
  try {
    const reply = await fetchReply(refreshSession, {})
    held = reply.accessToken
    return reply
  } catch (error) {
    if (isProblem(error, 'sign-in-required')) {
      held = undefined
      for (const listener of lossListeners) listener()
    }
    throw error
  }
}
