import type { KeyObject } from 'node:crypto'
import type { Transaction } from '@/db/client'
import { findSignedInPerson, lockSessionByToken } from '@/db/queries/people'
import { sessions } from '@/db/schema/organisations'
import { eq } from 'drizzle-orm'
import { problem } from '../problem'
import { accessSeconds, accessToken, newRefreshToken, refreshHash, sessionDays } from './tokens'

type Tools = { clock: () => Date; newId: () => string; secret: KeyObject }

/** Two tabs may use one token at the same moment: the one just replaced is good for this long. */
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
  const token = newRefreshToken()
  const sessionId = tools.newId()
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
 * Exchanges a refresh token. The present one is replaced; the one just replaced still answers for half a minute,
 * without another; an older one that comes back was copied, and ends the session.
 * @throws Problem sign-in-required
 */
export async function rotateSession(tx: Transaction, tools: Tools, token: string) {
  const now = tools.clock()
  const hash = refreshHash(token)
  const session = await lockSessionByToken(tx, hash, now)
  if (session === undefined) return undefined
  if (session.tokenHash !== hash) {
    if (now.getTime() - session.rotatedAt.getTime() > graceMilliseconds) {
      await tx.update(sessions).set({ endedAt: now }).where(eq(sessions.id, session.id))
      return undefined
    }
    return { reply: await sessionReply(tx, tools, session.personId, session.id), token: undefined }
  }
  const next = newRefreshToken()
  await tx
    .update(sessions)
    .set({
      tokenHash: refreshHash(next),
      previousTokenHash: hash,
      rotatedAt: now,
      expiresAt: new Date(now.getTime() + sessionDays * dayMilliseconds),
    })
    .where(eq(sessions.id, session.id))
  return { reply: await sessionReply(tx, tools, session.personId, session.id), token: next }
}

/** Ends the session of a refresh token; an unknown one is no secret worth telling. */
export async function closeSession(tx: Transaction, tools: Tools, token: string): Promise<void> {
  const session = await lockSessionByToken(tx, refreshHash(token), tools.clock())
  if (session !== undefined) {
    await tx.update(sessions).set({ endedAt: tools.clock() }).where(eq(sessions.id, session.id))
  }
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
