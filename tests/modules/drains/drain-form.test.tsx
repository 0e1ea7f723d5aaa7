import { screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { holdAccessToken } from '@/modules/api/access-token'
import { DrainFormScreen } from '@/modules/drains/drain-form-screen'
import type { RecordedDrain } from '@/modules/offline/queued-record'
import { fakeFetch, problemReply, type FakeReply } from '../api/fake-fetch'
import { phone } from '../phone-memory'
import { openDialogsPlainly, renderSignedIn } from '../screen-parts'
import { catalogue, containers, machineId, recordedDrain, technician, yard } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))

jest.mock('@/modules/offline/queue-store', () => jest.requireActual('../phone-memory'))

let questions: { code: string; facts: Record<string, string> }[] = []
let answerOf: (body: RecordedDrain) => FakeReply | Promise<FakeReply>
let sent: ReturnType<typeof fakeFetch>

beforeEach(() => {
  localStorage.clear()
  phone.records.clear()
  phone.drafts.clear()
  holdAccessToken('held')
  openDialogsPlainly()
  questions = []
  answerOf = (body) => ({ status: 201, body: recordedDrain(body) })
  sent = fakeFetch(({ method, path, body }) => {
    if (path === '/api/catalogue') return { status: 200, body: catalogue }
    if (path.startsWith('/api/containers')) return { status: 200, body: { rows: containers } }
    if (path.startsWith('/api/yard')) return { status: 200, body: yard }
    if (path === '/api/drains/questions') return { status: 200, body: { questions } }
    if (method === 'POST' && path === '/api/drains') return answerOf(body as RecordedDrain)
    return problemReply(404, 'not-found')
  })
})

/** Figures stand with their unit by a space that does not break. */
const said = (text: string) => text.replace(/(\d) (gal|L)\b/g, '$1\u00a0$2')

const recordsSent = () =>
  sent
    .filter(({ method, path }) => method === 'POST' && path === '/api/drains')
    .map(({ body }) => body as RecordedDrain)

async function openForm() {
  renderSignedIn(
    <DrainFormScreen machine={undefined} container={undefined} record={undefined} />,
    technician,
  )
  await screen.findByRole('button', { name: /From machine/ })
}

async function press(...keys: string[]) {
  const pad = within(screen.getByRole('group', { name: 'Keypad' }))
  for (const key of keys) await userEvent.click(pad.getByRole('button', { name: key }))
}

async function chooseMachine() {
  await userEvent.click(screen.getByRole('button', { name: /From machine/ }))
  await userEvent.click(await screen.findByRole('button', { name: /M-09 Pendru P200/ }))
}

test('machine, keypad, save: the container is found, the record sent once, the card says so', async () => {
  await openForm()
  await chooseMachine()
  // The press gives 300 L: only C-202 comes near.
  expect(screen.getByRole('button', { name: /Into container: C-202/ })).toBeInTheDocument()
  await press('1', '8', 'Decimal point', '5')
  expect(screen.getByRole('img')).toHaveAccessibleName(
    said('C-202: 18.5 gal of 52.2 gal after this drain; room left 33.7 gal'),
  )
  await userEvent.click(screen.getByRole('button', { name: said('Save 18.5 gal') }))

  const heading = await screen.findByRole('heading', {
    name: said('Saved 18.5 gal from M-09 Pendru P200 into C-202'),
  })
  await waitFor(() => expect(heading).toHaveFocus())
  expect(await screen.findByText('In the book · D-26-0028')).toBeInTheDocument()
  expect(recordsSent()).toHaveLength(1)
  expect(recordsSent()[0]).toMatchObject({
    machine: { kind: 'listed', machineId },
    volume: { value: '18.5', unit: 'gal_us' },
    legs: [{ containerId: containers[1]?.id }],
    answers: [],
  })
})

test('a unit typed in the field wins over the button, and is said', async () => {
  await openForm()
  const field = screen.getByLabelText('Volume drained, in gallons')
  await userEvent.type(field, '70 l')
  expect(screen.getByText('You typed the unit, so it is now litres.')).toBeInTheDocument()
  expect(screen.getByRole('button', { name: said('Save 70 L') })).toBeInTheDocument()
})

test('what is missing is said at once and nothing is sent', async () => {
  await openForm()
  await userEvent.click(screen.getByRole('button', { name: 'Save' }))
  expect(await screen.findByText('Enter the volume drained')).toBeInTheDocument()
  expect(recordsSent()).toHaveLength(0)
})

test('more than the room asks to split; the first container is filled to its line, the rest is exact', async () => {
  await openForm()
  await chooseMachine()
  await press('6', '0')
  expect(screen.getByText(/Over by 7.8/)).toBeInTheDocument()
  await userEvent.click(screen.getByRole('button', { name: 'Split over two' }))
  expect(screen.getByLabelText('Poured into C-202')).toHaveValue('52.2')
  expect(screen.getByText(/The rest: 7.8/)).toBeInTheDocument()
  await userEvent.click(screen.getByRole('button', { name: said('Save 60 gal') }))
  await screen.findByRole('heading', { name: /^Saved/ })
  expect(recordsSent()[0]?.legs).toEqual([
    { containerId: containers[1]?.id, volume: { value: '52.2', unit: 'gal_us' } },
    { containerId: containers[0]?.id },
  ])
})

test('a question is answered in place, and the answer goes with the record', async () => {
  questions = [
    {
      code: 'looks-like-litres',
      facts: { machine: 'M-09', expectedLitres: '285', typedLitres: '189', meantLitres: '50' },
    },
  ]
  await openForm()
  await chooseMachine()
  await press('5', '0')
  await userEvent.click(screen.getByRole('button', { name: said('Save 50 gal') }))
  const panel = await screen.findByRole('region', { name: 'One question before this is saved' })
  expect(panel).toHaveTextContent('50 gal is far more than M-09 holds, but 50 L fits')
  expect(recordsSent()).toHaveLength(0)
  await userEvent.click(within(panel).getByRole('button', { name: said('50 gal is right') }))
  await userEvent.click(screen.getByRole('button', { name: said('Save 50 gal') }))
  await screen.findByRole('heading', { name: /^Saved/ })
  expect(recordsSent()[0]?.answers).toEqual([
    { code: 'looks-like-litres', answer: '50\u00a0gal is right' },
  ])
})

test('without signal it is saved on the phone and says so', async () => {
  answerOf = () => 'no signal'
  await openForm()
  await chooseMachine()
  await press('3')
  await userEvent.click(screen.getByRole('button', { name: said('Save 3 gal') }))
  await screen.findByRole('heading', { name: /^Saved/ })
  expect(await screen.findByText(/It will be sent when there is signal/)).toBeInTheDocument()
  expect([...phone.records.values()]).toMatchObject([{ state: 'queued', tries: 1 }])
})

test('a refusal comes back in place with everything typed, and the mended record keeps its id', async () => {
  answerOf = () =>
    problemReply(400, 'time-in-future', {
      fields: [{ path: 'occurredAt', code: 'time-in-future', detail: 'in the future' }],
    })
  await openForm()
  await chooseMachine()
  await press('1', '2')
  await userEvent.type(screen.getByLabelText('Note'), 'warm')
  await userEvent.click(screen.getByRole('button', { name: said('Save 12 gal') }))

  expect(await screen.findByText('The time is in the future')).toBeInTheDocument()
  expect(screen.getByLabelText('Volume drained, in gallons')).toHaveValue('12')
  expect(screen.getByLabelText('Note')).toHaveValue('warm')
  expect(screen.getByRole('group', { name: 'Time of the drain' })).toHaveTextContent(
    'Time of the drain must be now or in the past',
  )

  answerOf = (body) => ({ status: 201, body: recordedDrain(body) })
  await userEvent.click(screen.getByRole('button', { name: said('Save 12 gal') }))
  expect(await screen.findByText('In the book · D-26-0028')).toBeInTheDocument()
  const [first, second] = recordsSent()
  expect(second?.id).toBe(first?.id)
})
