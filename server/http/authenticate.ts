import type { KeyObject } from 'node:crypto'
import type { Request, RequestHandler } from 'express'
import { Passport } from 'passport'
import { ExtractJwt, Strategy as JwtStrategy } from 'passport-jwt'
import { z } from 'zod'
import { problem } from '../problem'

/** What an access token says; everything else is read from the database at every request. */
export type Claims = { personId: string; organisationId: string; sessionId: string }

const payload = z.object({ sub: z.uuid(), org: z.uuid(), sid: z.uuid(), exp: z.number() })

declare module 'express-serve-static-core' {
  interface Request {
    claims?: Claims
  }
}

/** Reads the bearer token where there is one; a request without one is nobody's and goes on. */
export function readBearer(secret: KeyObject, clock: () => Date): RequestHandler {
  const passport = new Passport()
  const strategy = new JwtStrategy(
    {
      jwtFromRequest: ExtractJwt.fromAuthHeaderAsBearerToken(),
      // A KeyObject: a string would be tried as a public key at every request. The types only know strings.
      secretOrKey: secret as unknown as string,
      algorithms: ['HS256'],
      audience: 'ebbmark-api',
      // Looked at below: the library would ask the machine's clock, not the product's.
      ignoreExpiration: true,
    },
    (token: unknown, done) => {
      const read = payload.safeParse(token)
      if (!read.success || read.data.exp * 1000 <= clock().getTime()) done(null, false)
      else
        done(null, {
          personId: read.data.sub,
          organisationId: read.data.org,
          sessionId: read.data.sid,
        })
    },
  )
  passport.use(strategy)
  const reader: RequestHandler = (request, response, next) => {
    const check = passport.authenticate(
      'jwt',
      { session: false },
      (error: unknown, claims: Claims | false) => {
        if (!error && claims) request.claims = claims
        next(error ?? undefined)
      },
    ) as RequestHandler
    void check(request, response, next)
  }
  return reader
}

/** @throws Problem sign-in-required */
export function claimsOf(request: Request): Claims {
  if (request.claims === undefined) throw problem('sign-in-required')
  return request.claims
}
