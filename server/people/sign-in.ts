import type { KeyObject } from 'node:crypto'
import type { Transaction } from '@/db/client'
import { findSignedInPerson, lockLivingSession } from '@/db/queries/people'
import { sessions } from '@/db/schema/organisations'
import { eq } from 'drizzle-orm'
import { problem } from '../problem'
import {
  accessSeconds,
  accessToken,
  newRefreshToken,
  refreshHash,
  sessionDays,
  sessionOfToken,
} from './tokens'

type Tools = { clock: () => Date; newId: () => string; secret: KeyObject }

/** Two tabs may use one token at the same moment: the one just replaced is good for this long, and nobody replaces again. */
const graceMilliseconds = 30_000
const dayMilliseconds = 86_400_000

/** Opens a session for a person whose password was right. */
export async function openSession(
  tx: Transaction,
  tools: Tools,
  person: { id: string; organisationId: string },
  device: string,
) {
  const now = tools.clock()
  const sessionId = tools.newId()
  const token = newRefreshToken(sessionId)
  await tx.insert(sessions).values({
    id: sessionId,
    organisationId: person.organisationId,
    personId: person.id,
    tokenHash: refreshHash(token),
    rotatedAt: now,
    createdAt: now,
    expiresAt: new Date(now.getTime() + sessionDays * dayMilliseconds),
    device: device.slice(0, 200),
  })
  return { reply: await sessionReply(tx, tools, person.id, sessionId), token }
}

/**
 * Exchanges a refresh token. The present one is replaced, at most once in half a minute, so that whatever was under way
 * with the one before it still arrives. Any other token of a living session was copied: it ends the session, for the
 * thief as well.
 * @returns undefined when the session is over; no token when the one in the cookie stays
 */
export async function rotateSession(tx: Transaction, tools: Tools, token: string) {
  const session = await sessionOf(tx, tools, token)
  if (session === undefined) return undefined
  const now = tools.clock()
  const hash = refreshHash(token)
  const isFresh = now.getTime() - session.rotatedAt.getTime() <= graceMilliseconds
  const isPresent = hash === session.tokenHash
  if (!isPresent && !(isFresh && hash === session.previousTokenHash)) {
    await tx.update(sessions).set({ endedAt: now }).where(eq(sessions.id, session.id))
    return undefined
  }
  const reply = await sessionReply(tx, tools, session.personId, session.id)
  if (isFresh) return { reply, token: undefined }
  const next = newRefreshToken(session.id)
  await tx
    .update(sessions)
    .set({
      tokenHash: refreshHash(next),
      previousTokenHash: hash,
      rotatedAt: now,
      expiresAt: new Date(now.getTime() + sessionDays * dayMilliseconds),
    })
    .where(eq(sessions.id, session.id))
  return { reply, token: next }
}

/** Ends the session of a refresh token, an old one too; an unknown one is no secret worth telling. */
export async function closeSession(tx: Transaction, tools: Tools, token: string): Promise<void> {
  const session = await sessionOf(tx, tools, token)
  if (session !== undefined) {
    await tx.update(sessions).set({ endedAt: tools.clock() }).where(eq(sessions.id, session.id))
  }
}

async function sessionOf(tx: Transaction, tools: Tools, token: string) {
  const sessionId = sessionOfToken(token)
  return sessionId === undefined ? undefined : lockLivingSession(tx, sessionId, tools.clock())
}

async function sessionReply(tx: Transaction, tools: Tools, personId: string, sessionId: string) {
  const person = await findSignedInPerson(tx, personId)
  if (person === undefined) throw problem('sign-in-required')
  const claims = { personId, organisationId: person.organisation.id, sessionId }
  return {
    accessToken: accessToken(tools.secret, claims, tools.clock()),
    expiresInSeconds: accessSeconds,
    person,
  }
}
