import { screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { holdAccessToken } from '@/modules/api/access-token'
import { GroupTable } from '@/modules/books/group-table'
import { LinesScreen } from '@/modules/books/lines-screen'
import type { BookLine, Figure, Totals } from '@/shared/contracts/books'
import { monthsOf } from '@/shared/calendar'
import { fakeFetch, problemReply } from '../api/fake-fetch'
import { visits } from '../expo-router-fake'
import { renderSignedIn } from '../screen-parts'
import { catalogue, technician } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))
jest.mock('@/modules/offline/queue-store', () => jest.requireActual('../phone-memory'))

const auditor = { ...technician, role: 'auditor' as const }
const [stream] = catalogue.streams
const streamId = stream?.id ?? ''
const none: Figure = { exact: '0', shown: '0', lineCount: 0 }
const drained: Figure = { exact: '100.5', shown: '88', lineCount: 2 }

const totals: Totals = {
  year: 2025,
  by: 'stream',
  unit: 'kg',
  site: null,
  groups: [
    {
      id: streamId,
      label: 'Used mineral fluid',
      streamId,
      streamName: 'Used mineral fluid',
      kind: 'fluid',
      unit: 'kg',
      decimals: 0,
      densityUsed: '0.875',
      opening: none,
      months: monthsOf(2025).map((month) => ({
        month,
        in: month === '2025-03' ? drained : none,
        out: none,
        adjusted: none,
        closing: month < '2025-03' ? none : drained,
      })),
      total: { in: drained, out: none, adjusted: none },
      closing: drained,
      estimatePercent: '12.5',
    },
  ],
  allFluids: null,
  drainCounts: [],
  roundingShows: false,
  asOf: '2026-01-02T08:00:00Z',
}

function line(lineNo: number, litres: string, drain: string): BookLine {
  return {
    movementId: `6f0c2b4e-0000-4000-8000-00000000010${lineNo}`,
    siteId: catalogue.sites[0]?.id ?? '',
    siteCode: 'S2',
    lineNo,
    occurredAt: '2025-03-09T15:00:00Z',
    occurredOn: '2025-03-09',
    recordedAt: '2025-03-09T15:01:00Z',
    recordedBy: 'Wren Dalquist',
    reason: 'drain',
    countsAs: 'drain',
    isReversal: false,
    isReversed: false,
    stream: { id: streamId, name: 'Used mineral fluid' },
    from: 'M-09',
    to: 'C-201',
    litres,
    kilograms: '0',
    pieces: 0,
    counted: litres,
    entered: { value: litres, unit: 'L' },
    method: 'meter',
    isEstimate: false,
    drain: { id: technician.id, number: drain },
    pickup: null,
    note: '',
  }
}

const lines = [line(1, '60.5', 'D-25-0004'), line(2, '40', 'D-25-0005')]
let requests: ReturnType<typeof fakeFetch>

beforeEach(() => {
  localStorage.clear()
  visits.length = 0
  holdAccessToken('held')
  requests = fakeFetch(({ path }) => {
    if (path === '/api/catalogue') {
      const density = { kilogramsPerLitre: '0.875', basis: 'measured' }
      return { status: 200, body: { ...catalogue, streams: [{ ...stream, density }] } }
    }
    if (path.startsWith('/api/books/totals')) return { status: 200, body: totals }
    if (path.includes('cursor=')) {
      return {
        status: 200,
        body: { rows: lines.slice(1), next: null, sum: '100.5', lineCount: 2, title: 'Mar 2025' },
      }
    }
    if (path.startsWith('/api/books/lines')) {
      return {
        status: 200,
        body: {
          rows: lines.slice(0, 1),
          next: 'second-page',
          sum: '100.5',
          lineCount: 2,
          title: 'Mar 2025',
        },
      }
    }
    return problemReply(404, 'not-found')
  })
})

test('a figure opens the lines of its month, side and group, and says all that in its name', async () => {
  const address = { year: 2025, by: 'stream', unit: 'kg', siteId: '', streamId: '' } as const
  const [group] = totals.groups
  if (group === undefined) throw new Error('no group')
  renderSignedIn(<GroupTable address={address} group={group} caption="A year" />, auditor)
  const table = await screen.findByRole('region', { name: 'A year' })
  await userEvent.click(
    within(table).getByRole('button', { name: 'In, Mar 2025: 88 kilograms. Open its 2 lines' }),
  )
  const opened = new URL(visits.at(-1) ?? '', 'http://here.example')
  expect(opened.pathname).toBe('/books/2025/lines')
  expect(Object.fromEntries(opened.searchParams)).toMatchObject({
    group: streamId,
    side: 'in',
    month: '2025-03',
    unit: 'kg',
  })
  expect(within(table).queryByRole('button', { name: /^Out/ })).not.toBeInTheDocument()
})

test('the lines add up to the figure in its own unit, and lead to what made them', async () => {
  const params = { year: '2025', unit: 'kg', group: streamId, side: 'in', month: '2025-03' }
  renderSignedIn(<LinesScreen params={params} />, auditor)
  expect(
    await screen.findByText(/2 lines, together 88.kg \(exactly 100\.5 L\)/),
  ).toBeInTheDocument()
  expect(await screen.findByRole('cell', { name: '53' })).toBeInTheDocument()
  expect(screen.getByRole('link', { name: /D-25-0004/ })).toHaveAttribute(
    'href',
    '/drains/D-25-0004',
  )

  await userEvent.click(screen.getByRole('button', { name: 'Show more lines' }))
  expect(await screen.findByRole('link', { name: /D-25-0005/ })).toBeInTheDocument()
  expect(screen.queryByRole('button', { name: 'Show more lines' })).not.toBeInTheDocument()
  const asked = requests.filter(({ path }) => path.startsWith('/api/books/lines'))
  expect(asked.every(({ path }) => path.includes('month=2025-03'))).toBe(true)
})
