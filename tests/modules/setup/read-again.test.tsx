import { screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { holdAccessToken } from '@/modules/api/access-token'
import { RecordScreen } from '@/modules/setup/record-screen'
import { fakeFetch, problemReply } from '../api/fake-fetch'
import { renderSignedIn } from '../screen-parts'
import { catalogue, technician } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))
jest.mock('@/modules/offline/queue-store', () => jest.requireActual('../phone-memory'))

const administrator = { ...technician, role: 'administrator' as const }
const before = { ...catalogue.machines[0], version: 'first' }
let standing = before
let requests: ReturnType<typeof fakeFetch>

function ifMatches() {
  return requests
    .filter(({ method }) => method === 'PUT')
    .map(({ headers }) => headers.get('If-Match')?.replaceAll('"', ''))
}

beforeEach(() => {
  localStorage.clear()
  holdAccessToken('held')
  standing = before
  requests = fakeFetch(({ method, path, headers }) => {
    if (path === '/api/catalogue') return { status: 200, body: catalogue }
    const isCurrent = headers.get('If-Match')?.replaceAll('"', '') === standing.version
    if (method === 'PUT' && !isCurrent) return problemReply(409, 'changed-under-you')
    return { status: 200, body: standing }
  })
})

test('read again, what was typed stays, what was not shows what stands now, and a clash is told', async () => {
  renderSignedIn(<RecordScreen name="machines" id={before.id ?? ''} />, administrator)
  const model = await screen.findByLabelText(/^Model/)
  await userEvent.clear(model)
  await userEvent.type(model, 'P210')
  standing = { ...before, version: 'second', model: 'P205', serial: 'SN-77' }
  await userEvent.click(screen.getByRole('button', { name: 'Save' }))
  await userEvent.click(await screen.findByRole('button', { name: 'Read it again' }))

  expect(await screen.findByText(/was changed to P205 meanwhile/)).toBeInTheDocument()
  expect(screen.getByLabelText(/^Model/)).toHaveValue('P210')
  expect(screen.getByLabelText(/^Serial number/)).toHaveValue('SN-77')
  expect(screen.queryByText('Somebody changed this while you were reading')).toBeNull()

  await userEvent.click(screen.getByRole('button', { name: 'Save' }))
  expect(ifMatches()).toEqual(['first', 'second'])
  expect(requests.findLast(({ method }) => method === 'PUT')?.body).toMatchObject({
    model: 'P210',
    serial: 'SN-77',
  })
})

test('a record fetched again when the signal is back does not let an old form overwrite it', async () => {
  renderSignedIn(<RecordScreen name="machines" id={before.id ?? ''} />, administrator)
  const make = await screen.findByLabelText(/^Make/)
  standing = { ...before, version: 'second', code: 'M-19' }
  window.dispatchEvent(new Event('online'))
  await screen.findByRole('heading', { level: 1, name: 'M-19' })
  await userEvent.type(make, ' Works')
  await userEvent.click(screen.getByRole('button', { name: 'Save' }))
  expect(
    await screen.findByText('Somebody changed this while you were reading'),
  ).toBeInTheDocument()
  expect(ifMatches()).toEqual(['first'])
})
