import { z } from 'zod'
import { roles } from '../policies'
import { defineContract } from './define-contract'
import { id, line, nothing, noReply, requiredLine } from './values'

const tag = 'session'

export const password = z.string().min(10).max(200)
export const email = z.email().max(200)

export const signedInPerson = z.object({
  id,
  name: z.string(),
  email: z.string(),
  role: z.enum(roles),
  siteIds: z.array(id),
  organisation: z.object({ id, name: z.string(), isDemo: z.boolean() }),
})
export type SignedInPerson = z.infer<typeof signedInPerson>

/** The refresh token travels only in an httpOnly cookie, never in this body. */
export const sessionReply = z.object({
  accessToken: z.string(),
  expiresInSeconds: z.number().int(),
  person: signedInPerson,
})

export const signInBody = z.strictObject({ email, password: z.string().min(1).max(200) })

export const signIn = defineContract({
  name: 'signIn',
  method: 'post',
  path: '/session',
  summary: 'Sign in with e-mail and password',
  tag,
  access: 'public',
  body: signInBody,
  reply: sessionReply,
  problems: ['sign-in-refused', 'too-many-requests'],
})

export const refreshSession = defineContract({
  name: 'refreshSession',
  method: 'post',
  path: '/session/refresh',
  summary: 'Exchange the refresh cookie for a new access token and a new cookie',
  tag,
  access: 'public',
  reply: sessionReply,
  problems: ['sign-in-required'],
})

export const signOut = defineContract({
  name: 'signOut',
  method: 'delete',
  path: '/session',
  summary: 'End the session of the refresh cookie',
  tag,
  access: 'public',
  reply: noReply,
  status: 204,
})

export const readMe = defineContract({
  name: 'readMe',
  method: 'get',
  path: '/me',
  summary: 'The person who is signed in',
  tag,
  access: 'read-own-account',
  reply: signedInPerson,
})

export const changeMyPassword = defineContract({
  name: 'changeMyPassword',
  method: 'post',
  path: '/me/password',
  summary: 'Change the own password; ends every other session',
  tag,
  access: 'change-own-password',
  body: z.strictObject({ current: z.string().min(1).max(200), next: password }),
  reply: noReply,
  status: 204,
  problems: ['sign-in-refused'],
})

export const setUpOrganisationBody = z.strictObject({
  organisationName: requiredLine(120),
  phone: line(40),
  name: requiredLine(120),
  email,
  password,
})

/** Only on an empty product: makes the organisation and its first administrator and signs in. */
export const setUpOrganisation = defineContract({
  name: 'setUpOrganisation',
  method: 'post',
  path: '/organisation',
  summary: 'Make the organisation and its first administrator on an empty product',
  tag,
  access: 'public',
  body: setUpOrganisationBody,
  reply: sessionReply,
  status: 201,
  problems: ['already-set-up', 'too-many-requests'],
})

/** What the sign-in page needs to know before anyone is signed in. */
export const readStatus = defineContract({
  name: 'readStatus',
  method: 'get',
  path: '/status',
  summary: 'Is the product set up, and does it show the demo company',
  tag,
  access: 'public',
  reply: z.object({
    isSetUp: z.boolean(),
    demo: z
      .object({
        password: z.string(),
        people: z.array(
          z.object({ name: z.string(), email: z.string(), role: z.enum(roles), does: z.string() }),
        ),
      })
      .nullable(),
    version: z.string(),
  }),
})

export const readHealth = defineContract({
  name: 'readHealth',
  method: 'get',
  path: '/health',
  summary: 'Is the server up, on which database and version',
  tag,
  access: 'public',
  query: nothing,
  reply: z.object({
    status: z.enum(['up', 'down']),
    version: z.string(),
    database: z.object({
      kind: z.enum(['pglite', 'postgres']),
      serverVersion: z.string(),
      answers: z.boolean(),
    }),
  }),
})
