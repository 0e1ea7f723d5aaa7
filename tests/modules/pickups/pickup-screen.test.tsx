import { screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { holdAccessToken } from '@/modules/api/access-token'
import { PickupScreen } from '@/modules/pickups/pickup-screen'
import type { Pickup } from '@/shared/contracts/pickups'
import { fakeFetch, problemReply, type FakeReply } from '../api/fake-fetch'
import { openDialogsPlainly, renderSignedIn } from '../screen-parts'
import { catalogue, containers, technician } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))
jest.mock('@/modules/offline/queue-store', () => jest.requireActual('../phone-memory'))

const officer = { ...technician, role: 'officer' as const }
const by = { id: technician.id, name: technician.name }
const drum = containers[0]

const planned: Pickup = {
  id: '6f0c2b4e-0000-4000-8000-000000000070',
  number: null,
  siteId: catalogue.sites[0]?.id ?? '',
  siteCode: 'S2',
  stage: 'planned',
  hauler: { id: by.id, name: 'Sallowmere Tankers' },
  facility: { id: by.id, name: 'Cinderholt Re-refinery' },
  plannedOn: '2025-07-02',
  signedOutAt: null,
  returnDueOn: null,
  daysSinceSigned: null,
  streams: ['Used mineral fluid'],
  totalLitres: '97.6',
  totalKilograms: '0',
  lineCount: 1,
  version: 1,
  timeZone: 'America/New_York',
  orderNumber: '',
  note: '',
  createdAt: '2025-07-01T12:00:00Z',
  createdBy: by,
  issuedAt: null,
  issuedBy: null,
  lines: [
    {
      id: '6f0c2b4e-0000-4000-8000-000000000071',
      position: 1,
      containerId: drum?.id ?? '',
      containerCode: 'C-201',
      containerType: 'drum',
      containerDescription: '',
      containerCount: 1,
      stream: {
        id: drum?.streamId ?? '',
        code: 'mineral',
        name: 'Used mineral fluid',
        kind: 'fluid',
        wasteCode: '',
      },
      shipped: { value: '25.783', unit: 'gal_us' },
      shippedLitres: '97.6',
      shippedKilograms: '0',
      pieces: 0,
      massKilograms: null,
      massIsEstimate: true,
      densityUsed: null,
      bookLitres: '97.6',
      bookKilograms: '0',
      bookPieces: 0,
      received: null,
      differencePercent: null,
    },
  ],
  missing: [],
  signatures: [],
  documents: [],
  received: null,
  difference: null,
  settled: null,
  voided: null,
  history: [],
}

let pickup: Pickup
let issued: FakeReply
let requests: ReturnType<typeof fakeFetch>

beforeEach(() => {
  localStorage.clear()
  holdAccessToken('held')
  openDialogsPlainly()
  pickup = planned
  issued = problemReply(409, 'permit-expired')
  requests = fakeFetch(({ method, path }) => {
    if (path === '/api/catalogue') return { status: 200, body: catalogue }
    if (method === 'GET') return { status: 200, body: pickup }
    return issued
  })
})

test('an ended permit is explained, with whom to call and who else could come', async () => {
  issued = problemReply(409, 'permit-expired', {
    facts: {
      party: 'Sallowmere Tankers',
      phone: '555-0160',
      number: 'DEMO-ZZD000000001',
      endedOn: '2025-06-30',
      others: 'Oxlip Waste Carriers',
    },
  })
  renderSignedIn(<PickupScreen id={planned.id} />, officer)
  await userEvent.click(await screen.findByRole('button', { name: 'Issue the manifest' }))
  expect(await screen.findByText('A new manifest needs a current permit')).toBeInTheDocument()
  expect(screen.getByText('2025-06-30')).toBeInTheDocument()
  expect(screen.getByText(/Sallowmere Tankers 555-0160/)).toBeInTheDocument()
  expect(screen.getByText('Oxlip Waste Carriers')).toBeInTheDocument()
})

test('issue waits for what is missing and says it', async () => {
  pickup = {
    ...planned,
    hauler: null,
    missing: [
      { code: 'no-hauler', facts: {} },
      { code: 'container-held', facts: { container: 'C-201', reason: 'solvent smell' } },
    ],
  }
  renderSignedIn(<PickupScreen id={planned.id} />, officer)
  expect(await screen.findByText('Choose a hauler')).toBeInTheDocument()
  expect(screen.getByText('C-201 is held: solvent smell')).toBeInTheDocument()
  expect(screen.getByRole('button', { name: 'Issue the manifest' })).toBeDisabled()
})

test('received quantities that were refused stay typed, with the words at their field', async () => {
  pickup = { ...planned, number: 'P-S2-25-001-B', stage: 'signed-out' }
  issued = problemReply(400, 'fields-refused', {
    fields: [{ path: 'lines.0.quantity.unit', code: 'no-density', detail: '' }],
  })
  renderSignedIn(<PickupScreen id={planned.id} />, officer)
  const field = await screen.findByLabelText('Received from C-201')
  await userEvent.type(field, 'some')
  await userEvent.click(screen.getByRole('button', { name: 'Enter received quantities' }))
  expect(await screen.findByText('This must be a number, like 18.5')).toBeInTheDocument()
  expect(requests.some(({ method }) => method === 'POST')).toBe(false)
  await userEvent.clear(field)
  await userEvent.type(field, '85 kg')
  await userEvent.selectOptions(screen.getByLabelText('Unit of C-201'), 'kg')
  await userEvent.click(screen.getByRole('button', { name: 'Enter received quantities' }))
  expect(await screen.findByText(/no density on record: enter a volume/)).toBeInTheDocument()
  expect(field).toHaveValue('85 kg')
  expect(requests.find(({ method }) => method === 'POST')?.body).toMatchObject({
    lines: [{ quantity: { value: '85', unit: 'kg' } }],
  })
})

test('a technician and an auditor read a pickup and find no act', async () => {
  renderSignedIn(<PickupScreen id={planned.id} />, { ...technician, role: 'auditor' })
  expect(await screen.findByText('Sallowmere Tankers')).toBeInTheDocument()
  expect(screen.queryByRole('button', { name: /Issue|Void/ })).not.toBeInTheDocument()
})
