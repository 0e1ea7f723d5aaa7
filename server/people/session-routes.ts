import type { Request, Response } from 'express'
import { Router } from 'express'
import { Passport } from 'passport'
import { Strategy as LocalStrategy } from 'passport-local'
import { eq } from 'drizzle-orm'
import { asService } from '@/db/tenancy'
import { endSessions, findPersonByEmail, findSignedInPerson } from '@/db/queries/people'
import { people } from '@/db/schema/organisations'
import {
  changeMyPassword,
  readMe,
  readStatus,
  refreshSession,
  setUpOrganisation,
  signIn,
  signOut,
} from '@/shared/contracts/session'
import { writeAudit } from '../audit/write-audit'
import type { AppServices } from '../app-services'
import { claimsOf } from '../http/authenticate'
import { serve, servePublic } from '../http/route'
import { problem } from '../problem'
import { hasOrganisation, setUpFirstOrganisation } from './set-up-organisation'
import { hashPassword, passwordMatches } from './passwords'
import { closeSession, openSession, rotateSession } from './sign-in'
import { sessionDays } from './tokens'

const cookieName = 'ebbmark_refresh'

type Account = { id: string; organisationId: string }

/**
 * Sign-in, refresh, sign-out and the own account. The refresh cookie is httpOnly and SameSite=Strict: no other site's
 * page can make a browser send it, so these requests need no further token.
 */
export function sessionRoutes(services: AppServices): Router {
  const router = Router()
  const cookie = {
    httpOnly: true,
    sameSite: 'strict',
    secure: services.publicUrl.startsWith('https:'),
    path: '/api/session',
  } as const
  const keep = (response: Response, token: string | undefined) => {
    if (token === undefined) return
    response.cookie(cookieName, token, { ...cookie, maxAge: sessionDays * 86_400_000 })
  }
  const tokenOf = (request: Request): string | undefined => {
    const cookies = request.cookies as Record<string, unknown>
    const token = cookies[cookieName]
    return typeof token === 'string' && token.length <= 100 ? token : undefined
  }
  const checkPassword = passwordCheck(services)

  servePublic(router, services, signIn, async (_, { request, response }) => {
    const account = await checkPassword(request, response)
    const opened = await asService(services.db, (tx) =>
      openSession(tx, services, account, request.get('User-Agent') ?? ''),
    )
    keep(response, opened.token)
    return opened.reply
  })
  servePublic(router, services, refreshSession, async (_, { request, response }) => {
    const token = tokenOf(request)
    const rotated =
      token === undefined
        ? undefined
        : await asService(services.db, (tx) => rotateSession(tx, services, token))
    if (rotated === undefined) {
      response.clearCookie(cookieName, cookie)
      throw problem('sign-in-required')
    }
    keep(response, rotated.token)
    return rotated.reply
  })
  servePublic(router, services, signOut, async (_, { request, response }) => {
    const token = tokenOf(request)
    if (token !== undefined) await asService(services.db, (tx) => closeSession(tx, services, token))
    response.clearCookie(cookieName, cookie)
    return undefined
  })
  servePublic(router, services, setUpOrganisation, async (_, { body, request, response }) => {
    const passwordHash = await hashPassword(body.password)
    const opened = await asService(services.db, async (tx) => {
      const person = await setUpFirstOrganisation(tx, services, { ...body, passwordHash })
      return openSession(tx, services, person, request.get('User-Agent') ?? '')
    })
    keep(response, opened.token)
    return opened.reply
  })
  servePublic(router, services, readStatus, async () => ({
    isSetUp: await asService(services.db, hasOrganisation),
    demo: services.demo,
    version: services.version,
  }))

  serve(router, services, readMe, async (tx, context) => {
    const person = await findSignedInPerson(tx, context.person.id)
    if (person === undefined) throw problem('sign-in-required')
    return person
  })
  serve(router, services, changeMyPassword, async (tx, context, { body, request }) => {
    const [account] = await tx.select().from(people).where(eq(people.id, context.person.id))
    if (!(await passwordMatches(body.current, account?.passwordHash)))
      throw problem('sign-in-refused')
    await tx
      .update(people)
      .set({ passwordHash: await hashPassword(body.next) })
      .where(eq(people.id, context.person.id))
    await endSessions(tx, context.person.id, context.clock(), claimsOf(request).sessionId)
    await writeAudit(tx, context, {
      act: 'change-own-password',
      subjectKind: 'person',
      subjectId: context.person.id,
    })
    return undefined
  })
  return router
}

/** passport-local: the account whose e-mail and password were sent. @throws Problem sign-in-refused */
function passwordCheck(services: AppServices) {
  const passport = new Passport()
  passport.use(
    new LocalStrategy({ usernameField: 'email', session: false }, (email, password, done) => {
      asService(services.db, (tx) => findPersonByEmail(tx, email))
        .then(async (account) => {
          const matches = await passwordMatches(password, account?.passwordHash)
          done(null, matches && account !== undefined ? account : false)
        })
        .catch(done)
    }),
  )
  return (request: Request, response: Response) =>
    new Promise<Account>((resolve, reject) => {
      const check = passport.authenticate(
        'local',
        { session: false },
        (error: unknown, account: Account | false) => {
          if (error) reject(error instanceof Error ? error : new Error(String(error)))
          else if (!account) reject(problem('sign-in-refused'))
          else resolve(account)
        },
      ) as (request: Request, response: Response, next: (error?: unknown) => void) => void
      check(request, response, (error) =>
        reject(error instanceof Error ? error : new Error(String(error))),
      )
    })
}
