import { createHash, createSecretKey, randomBytes, type KeyObject } from 'node:crypto'
import jwt from 'jsonwebtoken'
import { z } from 'zod'

/** An access token is short, so that what it says is never stale for long. */
export const accessSeconds = 600
/** A device that is used within this time stays signed in. */
export const sessionDays = 30

export function secretKey(secret: Buffer): KeyObject {
  return createSecretKey(secret)
}

export function accessToken(
  secret: KeyObject,
  claims: { personId: string; organisationId: string; sessionId: string },
  now: Date,
): string {
  const issuedAt = Math.floor(now.getTime() / 1000)
  const body = {
    org: claims.organisationId,
    sid: claims.sessionId,
    iat: issuedAt,
    exp: issuedAt + accessSeconds,
  }
  return jwt.sign(body, secret, {
    subject: claims.personId,
    audience: 'ebbmark-api',
    algorithm: 'HS256',
  })
}

/**
 * The session it belongs to and 256 random bits; only the hash of the whole is stored. The session is named so that an
 * old token of a living session is known for what it is.
 */
export function newRefreshToken(sessionId: string): string {
  return `${sessionId}.${randomBytes(32).toString('base64url')}`
}

/** The session a refresh token names, whether or not it is that session's present one. */
export function sessionOfToken(token: string): string | undefined {
  const named = z.uuid().safeParse(token.slice(0, token.indexOf('.')))
  return named.data
}

export function refreshHash(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}
