import { screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { holdAccessToken } from '@/modules/api/access-token'
import { YardScreen } from '@/modules/yard/yard-screen'
import { fakeFetch, problemReply, type FakeReply } from '../api/fake-fetch'
import { renderSignedIn } from '../screen-parts'
import { catalogue, containers, technician, yard } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))
jest.mock('@/modules/offline/queue-store', () => jest.requireActual('../phone-memory'))

let today: FakeReply

beforeEach(() => {
  localStorage.clear()
  holdAccessToken('held')
  today = { status: 200, body: yard }
  fakeFetch(({ path }) => {
    if (path === '/api/catalogue') return { status: 200, body: catalogue }
    return path.startsWith('/api/yard') ? today : problemReply(404, 'not-found')
  })
})

test('the container nearest to its line comes first, whatever its code', async () => {
  const [half, empty] = containers
  const full = {
    ...half,
    id: technician.id,
    code: 'C-209',
    litres: '190',
    roomLitres: '7.6',
    level: 'near',
  }
  today = { status: 200, body: { ...yard, containers: [empty, half, full] } }
  renderSignedIn(<YardScreen />, technician)
  const list = await screen.findByRole('region', { name: 'Containers near their line' })
  const named = within(list)
    .getAllByRole('link')
    .map((link) => link.getAttribute('aria-label')?.slice(0, 5))
  expect(named.slice(0, 3)).toEqual(['C-209', 'C-201', 'C-202'])
  expect(within(list).getByText('Near line')).toBeInTheDocument()
})

test('what needs a look says what was found and leads to its drain', async () => {
  const mark = {
    id: technician.id,
    siteId: catalogue.sites[0]?.id,
    drainId: technician.id,
    drainNumber: 'D-26-0028',
    containerId: null,
    containerCode: null,
    code: 'over-fill-line',
    details: { container: 'C-201', overLitres: '37.85411784', roomLitres: '0' },
    raisedAt: '2026-03-02T15:00:00Z',
    reviewedAt: null,
    reviewedBy: null,
    reviewNote: null,
  }
  today = { status: 200, body: { ...yard, marks: [mark] } }
  renderSignedIn(<YardScreen />, technician)
  expect(await screen.findByText(/C-201 was filled 10.0.gal over its line/)).toBeInTheDocument()
  expect(screen.getByRole('link', { name: 'D-26-0028' })).toHaveAttribute(
    'href',
    '/drains/D-26-0028',
  )
})

test('the cautions are hidden for the day, and can be called back', async () => {
  const first = renderSignedIn(<YardScreen />, technician)
  await userEvent.click(await screen.findByRole('button', { name: 'Hide for today' }))
  expect(screen.queryByText(/Let the fluid cool/)).not.toBeInTheDocument()
  first.unmount()

  today = { status: 200, body: { ...yard, today: '2026-03-03' } }
  renderSignedIn(<YardScreen />, technician)
  expect(await screen.findByText(/Let the fluid cool/)).toBeInTheDocument()
})

test('without any answer the page says that drains can still be logged', async () => {
  today = 'no signal'
  renderSignedIn(<YardScreen />, technician)
  expect(await screen.findByText('No answer from the server')).toBeInTheDocument()
  expect(screen.getByText(/You can still log drains/)).toBeInTheDocument()
})
