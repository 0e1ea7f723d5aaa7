import { render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { SWRConfig } from 'swr'
import { accessToken, holdAccessToken } from '@/modules/api/access-token'
import { SessionProvider } from '@/modules/session/session-provider'
import { SignInScreen } from '@/modules/session/sign-in-screen'
import '@/modules/ui/words'
import { fakeFetch, problemReply, type FakeReply } from '../api/fake-fetch'
import { technician } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))

const demo = {
  password: 'level-line-2025',
  people: [{ name: technician.name, email: technician.email, role: 'technician', does: 'S2' }],
}
let status: Record<string, unknown>
let signInReply: FakeReply

beforeEach(() => {
  localStorage.clear()
  holdAccessToken(undefined)
  status = { isSetUp: true, demo: null, version: '0.1.0' }
  signInReply = {
    status: 200,
    body: { accessToken: 'fresh', expiresInSeconds: 600, person: technician },
  }
})

function openSignIn(next?: string) {
  const sent = fakeFetch(({ path }) => {
    if (path === '/api/status') return { status: 200, body: status }
    if (path === '/api/session') return signInReply
    return {
      status: 200,
      body: { accessToken: 'fresh', expiresInSeconds: 600, person: technician },
    }
  })
  render(
    <SWRConfig value={{ provider: () => new Map() }}>
      <SessionProvider>
        <SignInScreen next={next} />
      </SessionProvider>
    </SWRConfig>,
  )
  return sent
}

async function fill(email: string, password: string) {
  await userEvent.type(await screen.findByLabelText('E-mail'), email)
  await userEvent.type(screen.getByLabelText('Password'), password)
  await userEvent.click(screen.getByRole('button', { name: 'Sign in' }))
}

test('a refusal is said in place, and what was typed stays', async () => {
  signInReply = problemReply(401, 'sign-in-refused')
  openSignIn()
  await fill('wren@quillbrook.example.com', 'not this one')
  expect(await screen.findByRole('alert')).toHaveTextContent('E-mail or password do not match')
  expect(screen.getByLabelText('E-mail')).toHaveValue('wren@quillbrook.example.com')
  expect(screen.getByLabelText('Password')).toHaveValue('not this one')
  expect(accessToken()).toBeUndefined()
  expect(localStorage.getItem('ebbmark.person')).toBeNull()
})

test('an address that is none is refused before anything is sent', async () => {
  const sent = openSignIn()
  await fill('wren', 'something')
  expect(await screen.findByRole('alert')).toHaveTextContent('Enter an e-mail address')
  expect(sent.filter(({ path }) => path === '/api/session')).toEqual([])
})

test('signed in, the page that was asked for comes next, and the token is in no store', async () => {
  openSignIn('/drains/D-26-0028')
  await fill('wren@quillbrook.example.com', 'level-line-2025')
  expect(await screen.findByText('went to /drains/D-26-0028')).toBeInTheDocument()
  expect(accessToken()).toBe('fresh')
  expect(JSON.stringify({ ...localStorage })).not.toContain('fresh')
})

test.each(['https://elsewhere.example.com', '//elsewhere.example.com', 'javascript:alert(1)'])(
  'a next page outside the product (%s) is not followed',
  async (next) => {
    openSignIn(next)
    await fill('wren@quillbrook.example.com', 'level-line-2025')
    expect(await screen.findByText('went to /yard')).toBeInTheDocument()
  },
)

test('the demo signs in as one of its people with one tap', async () => {
  status = { ...status, demo }
  const sent = openSignIn()
  await userEvent.click(await screen.findByRole('button', { name: /Sign in as Wren Dalquist/ }))
  await waitFor(() => expect(screen.getByText('went to /yard')).toBeInTheDocument())
  expect(sent.find(({ path }) => path === '/api/session')?.body).toEqual({
    email: technician.email,
    password: demo.password,
  })
})

test('an empty product asks for its company first', async () => {
  status = { ...status, isSetUp: false }
  openSignIn()
  expect(await screen.findByRole('heading', { name: 'Set up Ebbmark' })).toBeInTheDocument()
  await userEvent.click(screen.getByRole('button', { name: 'Make the company' }))
  expect(await screen.findByText('Enter the name of the company')).toBeInTheDocument()
})
