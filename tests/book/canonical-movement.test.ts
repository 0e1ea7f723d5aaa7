import { createHash } from 'node:crypto'
import { canonicalMovement, hashOfMovement } from '@/server/book/canonical-movement'

/** Hashes that are stored were taken over this very form: it never changes, a later one gets another first line. */
const line: Parameters<typeof canonicalMovement>[0] = {
  id: '00000000-0000-4000-8000-000000000001',
  organisationId: '00000000-0000-4000-8000-000000000002',
  siteId: '00000000-0000-4000-8000-000000000003',
  lineNo: 7,
  streamId: '00000000-0000-4000-8000-000000000004',
  fromAccountId: '00000000-0000-4000-8000-000000000005',
  toAccountId: '00000000-0000-4000-8000-000000000006',
  litres: '70.030118004000000000',
  kilograms: '0.000000000000000000',
  pieces: 0,
  enteredValue: '18.50',
  enteredUnit: 'gal_us',
  method: 'marked-pail',
  spreadPercent: null,
  isEstimate: false,
  reason: 'drain',
  countsAs: 'drain',
  reverses: null,
  drainId: '00000000-0000-4000-8000-000000000007',
  drainRevision: 1,
  pickupId: null,
  pickupLineId: null,
  transferId: null,
  occurredAt: new Date('2025-03-09T03:10:00-05:00'),
  occurredOn: '2025-03-09',
  recordedAt: new Date('2025-03-09T08:15:00.250Z'),
  recordedBy: '00000000-0000-4000-8000-000000000008',
  note: 'two\nlines "quoted"',
  previousHash: '0'.repeat(64),
}

const form = `ebbmark-movement/1
00000000-0000-4000-8000-000000000003
7
00000000-0000-4000-8000-000000000001
00000000-0000-4000-8000-000000000002
00000000-0000-4000-8000-000000000004
00000000-0000-4000-8000-000000000005
00000000-0000-4000-8000-000000000006
70.030118004
0
0
18.50
gal_us
marked-pail

measured
drain
drain

00000000-0000-4000-8000-000000000007
1



2025-03-09T08:10:00.000Z
2025-03-09
2025-03-09T08:15:00.250Z
00000000-0000-4000-8000-000000000008
"two\\nlines \\"quoted\\""
${'0'.repeat(64)}`

test('a line is written field by field, one a line', () => {
  expect(canonicalMovement(line)).toBe(form)
})

test('its hash is SHA-256 over that form in UTF-8', () => {
  expect(hashOfMovement(line)).toBe(createHash('sha256').update(form, 'utf8').digest('hex'))
})

test('a figure is the same however many zeros the database writes behind it', () => {
  expect(hashOfMovement({ ...line, litres: '70.030118004' })).toBe(hashOfMovement(line))
})

test('a note cannot pass for another field', () => {
  const [first, second] = [
    { ...line, note: `x"\n${'0'.repeat(64)}` },
    { ...line, note: 'x"' },
  ]
  expect(canonicalMovement(first).split('\n')).toHaveLength(
    canonicalMovement(second).split('\n').length,
  )
})

test.each(Object.keys(line) as (keyof typeof line)[])('the hash depends on %s', (field) => {
  const value = line[field]
  const other =
    value instanceof Date
      ? new Date(value.getTime() + 1)
      : typeof value === 'boolean'
        ? !value
        : typeof value === 'number'
          ? value + 1
          : field === 'litres' || field === 'kilograms'
            ? '1'
            : `${value ?? ''}x`
  expect(hashOfMovement({ ...line, [field]: other } as typeof line)).not.toBe(hashOfMovement(line))
})
