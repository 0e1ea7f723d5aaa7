import { screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { holdAccessToken } from '@/modules/api/access-token'
import { RecordScreen } from '@/modules/setup/record-screen'
import { fakeFetch, problemReply, type FakeReply } from '../api/fake-fetch'
import { renderSignedIn } from '../screen-parts'
import { catalogue, technician } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))
jest.mock('@/modules/offline/queue-store', () => jest.requireActual('../phone-memory'))

const administrator = { ...technician, role: 'administrator' as const }
const fluid = catalogue.fluids[0]
let saved: FakeReply
let requests: ReturnType<typeof fakeFetch>

beforeEach(() => {
  localStorage.clear()
  holdAccessToken('held')
  saved = problemReply(409, 'changed-under-you')
  requests = fakeFetch(({ method, path }) => {
    if (path === '/api/catalogue') return { status: 200, body: catalogue }
    if (method === 'GET') return { status: 200, body: fluid }
    return saved
  })
})

test('what cannot be is said at its field and above, and leads there; nothing is sent', async () => {
  renderSignedIn(<RecordScreen name="containers" id="new" />, administrator)
  await userEvent.type(await screen.findByLabelText('Code'), 'c 1')
  await userEvent.type(screen.getByLabelText('Capacity'), '208 L')
  await userEvent.click(screen.getByRole('button', { name: 'Save' }))
  const [summary] = await screen.findAllByRole('alert')
  if (summary === undefined) throw new Error('no summary')
  await userEvent.click(
    within(summary).getByRole('link', { name: /Use capitals, digits and dashes/ }),
  )
  expect(screen.getByLabelText('Code')).toHaveFocus()
  expect(screen.getByLabelText('Code')).toHaveValue('c 1')
  expect(requests.some(({ method }) => method === 'POST')).toBe(false)
})

test('a typed unit is taken for the capacity', async () => {
  renderSignedIn(<RecordScreen name="containers" id="new" />, administrator)
  await userEvent.type(await screen.findByLabelText('Code'), 'C-207')
  await userEvent.type(screen.getByLabelText('Capacity'), '208 L')
  await userEvent.click(screen.getByRole('button', { name: 'Save' }))
  await screen.findByText('Somebody changed this while you were reading')
  expect(requests.find(({ method }) => method === 'POST')?.body).toMatchObject({
    code: 'C-207',
    capacity: { value: '208', unit: 'L' },
    fillPercent: '95',
    tareKilograms: null,
  })
})

test('a record that somebody changed meanwhile is not overwritten, and what was typed stays', async () => {
  renderSignedIn(<RecordScreen name="fluids" id={fluid?.id ?? ''} />, administrator)
  const name = await screen.findByLabelText('Name')
  await userEvent.clear(name)
  await userEvent.type(name, 'HM 100')
  await userEvent.click(screen.getByRole('button', { name: 'Save' }))
  expect(
    await screen.findByText('Somebody changed this while you were reading'),
  ).toBeInTheDocument()
  expect(screen.getByLabelText('Name')).toHaveValue('HM 100')
  const put = requests.find(({ method }) => method === 'PUT')
  expect(put?.headers.get('If-Match')).toMatch(/^"?1"?$/)
})

test('whoever may not change it reads it', async () => {
  renderSignedIn(<RecordScreen name="fluids" id={fluid?.id ?? ''} />, technician)
  expect(await screen.findByText('An administrator changes this.')).toBeInTheDocument()
  expect(screen.queryByRole('button', { name: /Save|Retire/ })).not.toBeInTheDocument()
  expect(screen.getByLabelText('Name')).toBeDisabled()
})
