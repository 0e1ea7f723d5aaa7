import { createHash, createSecretKey, randomBytes, type KeyObject } from 'node:crypto'
import jwt from 'jsonwebtoken'

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

/** 256 random bits; only their hash is stored. */
export function newRefreshToken(): string {
  return randomBytes(32).toString('base64url')
}

export function refreshHash(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}
