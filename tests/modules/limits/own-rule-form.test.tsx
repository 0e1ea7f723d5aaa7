import { screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { holdAccessToken } from '@/modules/api/access-token'
import { RulesScreen } from '@/modules/limits/rules-screen'
import type { Rule } from '@/shared/contracts/limits'
import { fakeFetch, problemReply } from '../api/fake-fetch'
import { openDialogsPlainly, renderSignedIn } from '../screen-parts'
import { catalogue, technician } from '../workshop'

jest.mock('expo-router', () => jest.requireActual('../expo-router-fake'))
jest.mock('@/modules/offline/queue-store', () => jest.requireActual('../phone-memory'))

const officer = { ...technician, role: 'officer' as const }
const rule: Rule = {
  id: '6f0c2b4e-0000-4000-8000-000000000070',
  siteId: catalogue.sites[0]?.id ?? '',
  origin: 'own',
  definition: {
    id: 'own',
    jurisdiction: '',
    title: 'On hand in the yard',
    measure: 'contents-volume',
    scope: 'site',
    streams: { classes: ['used_oil'], streamIds: [] },
    threshold: { value: '240', unit: 'gal_us' },
    comparison: 'gt',
    warnPercent: '80',
    minimumCapacity: { value: '55', unit: 'gal_us' },
    leavesOut: [],
    consequence: 'Order a pickup',
    citation: 'Company rule, yard manual 4.2',
    sourceUrl: '',
    confidence: 'own',
    enabledByDefault: true,
    caution: '',
  },
  enabled: true,
  version: 3,
  changedAt: '2026-03-01T08:00:00Z',
  changedBy: null,
  changeReason: '',
  retiredAt: null,
  findings: [],
}
let requests: ReturnType<typeof fakeFetch>

beforeAll(openDialogsPlainly)
beforeEach(() => {
  localStorage.clear()
  holdAccessToken('held')
  requests = fakeFetch(({ path, method }) => {
    if (path === '/api/catalogue') return { status: 200, body: catalogue }
    if (method === 'PUT') return problemReply(409, 'changed-under-you')
    if (path.startsWith('/api/rules')) return { status: 200, body: { rows: [rule] } }
    return problemReply(404, 'not-found')
  })
})

test('a change needs a reason, and keeps what the form does not show', async () => {
  renderSignedIn(<RulesScreen />, officer)
  await userEvent.click(await screen.findByRole('button', { name: /^Change/ }))
  const dialog = screen.getByRole('dialog', { name: 'Change the rule' })
  const limit = within(dialog).getByLabelText('Limit')
  await userEvent.clear(limit)
  await userEvent.type(limit, '200')
  await userEvent.click(within(dialog).getByRole('button', { name: 'Save the rule' }))
  await userEvent.click(await within(dialog).findByRole('link', { name: /^Reason: / }))
  expect(within(dialog).getByLabelText('Reason')).toHaveFocus()
  expect(requests.some(({ method }) => method === 'PUT')).toBe(false)

  await userEvent.type(within(dialog).getByLabelText('Reason'), 'The yard has shrunk')
  await userEvent.click(within(dialog).getByRole('button', { name: 'Save the rule' }))
  await within(dialog).findByText('Somebody changed this while you were reading')
  expect(requests.find(({ method }) => method === 'PUT')?.body).toMatchObject({
    version: 3,
    reason: 'The yard has shrunk',
    threshold: { value: '200', unit: 'gal_us' },
    streams: { classes: ['used_oil'], streamIds: [] },
    minimumCapacity: { value: '55', unit: 'gal_us' },
  })
  expect(within(dialog).getByLabelText('Limit')).toHaveValue('200')
})

test('whoever only reads the rules is offered no change', async () => {
  renderSignedIn(<RulesScreen />, technician)
  expect(await screen.findByRole('heading', { name: 'On hand in the yard' })).toBeInTheDocument()
  expect(screen.getByText('For review under Company rule, yard manual 4.2')).toBeInTheDocument()
  expect(screen.queryByRole('button')).not.toBeInTheDocument()
})
