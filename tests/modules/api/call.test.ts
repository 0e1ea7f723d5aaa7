import { accessToken, holdAccessToken, onSessionLost } from '@/modules/api/access-token'
import { call } from '@/modules/api/call'
import { addressOf } from '@/modules/api/fetch-reply'
import { OfflineError, ProblemError } from '@/modules/api/problem-error'
import { listDrains } from '@/shared/contracts/drains'
import { readMe, readStatus } from '@/shared/contracts/session'
import { siteContracts } from '@/shared/contracts/set-up'
import { fakeFetch, problemReply } from './fake-fetch'

const person = {
  id: '6f0c2b4e-0000-4000-8000-000000000001',
  name: 'Ines Okerlund',
  email: 'ines@quillbrook.example.com',
  role: 'technician' as const,
  siteIds: [],
  organisation: {
    id: '6f0c2b4e-0000-4000-8000-000000000002',
    name: 'Quillbrook Plant & Lift',
    isDemo: true,
  },
}
const session = (accessTokenSent: string) => ({
  accessToken: accessTokenSent,
  expiresInSeconds: 600,
  person,
})

afterEach(() => {
  holdAccessToken(undefined)
})

test('the path is filled and empty query values are left out', () => {
  expect(
    addressOf(listDrains, { query: { siteId: 'a', search: '', from: undefined, limit: 50 } }),
  ).toBe('/api/drains?siteId=a&limit=50')
  expect(addressOf(siteContracts.read, { params: { id: 'a/b' } })).toBe('/api/sites/a%2Fb')
})

test('the token goes with the request, the version as If-Match', async () => {
  holdAccessToken('held')
  const requests = fakeFetch(() => problemReply(404, 'not-found'))
  await expect(
    call(siteContracts.change, {
      params: { id: person.id },
      body: {} as never,
      ifMatch: '7',
    }),
  ).rejects.toMatchObject({ code: 'not-found' })
  expect(requests[0]?.headers.get('Authorization')).toBe('Bearer held')
  expect(requests[0]?.headers.get('If-Match')).toBe('"7"')
})

test('many calls with an old token refresh it once and are answered', async () => {
  holdAccessToken('old')
  const requests = fakeFetch(({ path, headers }) => {
    if (path === '/api/session/refresh') return { status: 200, body: session('new') }
    return headers.get('Authorization') === 'Bearer new'
      ? { status: 200, body: person }
      : problemReply(401, 'sign-in-required')
  })
  const names = await Promise.all([1, 2, 3].map(async () => (await call(readMe, {})).name))
  expect(names).toEqual(['Ines Okerlund', 'Ines Okerlund', 'Ines Okerlund'])
  expect(requests.filter(({ path }) => path === '/api/session/refresh')).toHaveLength(1)
  expect(accessToken()).toBe('new')
})

test('a session the server no longer knows is told once, and the call is refused', async () => {
  const lost = jest.fn()
  const stop = onSessionLost(lost)
  fakeFetch(() => problemReply(401, 'sign-in-required'))
  await expect(call(readMe, {})).rejects.toBeInstanceOf(ProblemError)
  expect(lost).toHaveBeenCalledTimes(1)
  stop()
})

test('no signal is not a lost session', async () => {
  const lost = jest.fn()
  const stop = onSessionLost(lost)
  fakeFetch(() => 'no signal')
  await expect(call(readMe, {})).rejects.toBeInstanceOf(OfflineError)
  expect(lost).not.toHaveBeenCalled()
  stop()
})

test('an answer that is not ours, from a portal or a proxy, counts as no answer', async () => {
  fakeFetch(() => ({ status: 502, body: 'Bad gateway', type: 'text/html' }))
  await expect(call(readStatus, {})).rejects.toBeInstanceOf(OfflineError)
})

test('a reply that breaks the contract is a refusal, never handed on', async () => {
  fakeFetch(() => ({ status: 200, body: { isSetUp: 'yes' } }))
  await expect(call(readStatus, {})).rejects.toMatchObject({ code: 'internal' })
})
