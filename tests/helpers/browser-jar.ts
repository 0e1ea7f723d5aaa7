import request, { type Response, type Test } from 'supertest'
import type { TestApp } from './test-app'

const cookieName = 'ebbmark_refresh'

/**
 * A browser as far as sign-in goes: it keeps the refresh cookie it was given, sends it where its path says, and drops it
 * when told so. `token` may be copied, to be sent by somebody else.
 */
export function aBrowser(test: TestApp, token: string | undefined = undefined) {
  const jar = { token }
  const sent = async (asked: Test, path: string): Promise<Response> => {
    if (jar.token !== undefined && path.startsWith('/session'))
      void asked.set('Cookie', `${cookieName}=${jar.token}`)
    const reply = await asked
    const given = cookieOf(reply)
    if (given !== undefined) jar.token = given.value === '' ? undefined : given.value
    return reply
  }
  return {
    jar,
    signIn: (email: string, password: string) =>
      sent(request(test.app).post('/api/session').send({ email, password }), '/session'),
    refresh: () => sent(request(test.app).post('/api/session/refresh'), '/session/refresh'),
    signOut: () => sent(request(test.app).delete('/api/session'), '/session'),
  }
}

/** The refresh cookie a reply sets: its value and its attributes, in small letters. */
export function cookieOf(reply: Response): { value: string; attributes: string[] } | undefined {
  const set = (reply.headers['set-cookie'] ?? []) as unknown as string[]
  const found = set.find((one) => one.startsWith(`${cookieName}=`))
  if (found === undefined) return undefined
  const [pair = '', ...attributes] = found.split('; ')
  return {
    value: decodeURIComponent(pair.slice(cookieName.length + 1)),
    attributes: attributes.map((attribute) => attribute.toLowerCase()),
  }
}
