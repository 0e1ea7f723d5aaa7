import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import { constraintName } from '@/db/constraint-problems'
import { books, movements } from '@/db/schema/book'
import { drainRevisions } from '@/db/schema/drains'
import { flags } from '@/db/schema/limits'
import { documents, pickups, signatures } from '@/db/schema/pickups'
import { holds } from '@/db/schema/sites'
import { audit } from '@/db/schema/trail'
import { aFilledDrum, aPickupYard, signedOut, type PickupYard } from '../helpers/pickups'
import { aSite } from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

/**
 * Facts beside the book attacked with raw SQL by the database's own owner, over a world made through the acts: what was
 * written down, signed or numbered stays as it was.
 */
let product: TestApp
let yard: PickupYard
let pickupId: string

beforeAll(async () => {
  product = await testApp()
  yard = await aPickupYard(product)
  const drum = await aFilledDrum(yard, { value: '50', unit: 'L' })
  pickupId = (await signedOut(yard, [drum])).id
})
afterAll(() => product.close())

const db = () => product.opened.db

async function refusal(work: PromiseLike<unknown>): Promise<string> {
  try {
    await work
  } catch (error) {
    return constraintName(error) ?? String(error)
  }
  return 'not refused'
}

describe.each([
  ['a revision of a drain', drainRevisions, { act: 'struck' }, 'drain_revisions_append_only'],
  ['a document', documents, { sha256: '0'.repeat(64) }, 'documents_append_only'],
  ['a signature', signatures, { name: 'Somebody Else' }, 'signatures_append_only'],
  ['the trail', audit, { act: 'read-own-account' }, 'audit_append_only'],
] as const)('%s', (_, table, change, trigger) => {
  test('is there to be attacked', async () => {
    expect((await db().select().from(table)).length).toBeGreaterThan(0)
  })

  test('is not changed', async () => {
    expect(
      await refusal(
        db()
          .update(table)
          .set(change as never),
      ),
    ).toBe(trigger)
  })

  test('is not removed', async () => {
    expect(await refusal(db().delete(table))).toBe(trigger)
  })
})

describe('the number of a manifest', () => {
  const change = (values: Partial<typeof pickups.$inferInsert>) =>
    refusal(db().update(pickups).set(values).where(eq(pickups.id, pickupId)))

  test('is not changed', async () => {
    expect(await change({ number: 'S1-25-999-X' })).toBe('pickups_keep_their_number')
  })

  test('is not taken back', async () => {
    expect(await change({ number: null, issuedAt: null })).toBe('pickups_keep_their_number')
  })

  test('stays when something else changes', async () => {
    expect(await change({ note: 'a note' })).toBe('not refused')
  })

  test('comes with the issue, and no issue without it', async () => {
    expect(await change({ issuedAt: null })).toBe('pickups_number_on_issue')
    const planned = { id: randomUUID(), number: null, issuedAt: new Date() }
    const [row] = await db().select().from(pickups).where(eq(pickups.id, pickupId))
    if (row === undefined) throw new Error('there is no pickup')
    expect(
      await refusal(
        db()
          .insert(pickups)
          .values({ ...row, ...planned }),
      ),
    ).toBe('pickups_number_on_issue')
  })

  test('is given once', async () => {
    const [row] = await db().select().from(pickups).where(eq(pickups.id, pickupId))
    if (row === undefined) throw new Error('there is no pickup')
    const again = refusal(
      db()
        .insert(pickups)
        .values({ ...row, id: randomUUID() }),
    )
    expect(await again).toMatch(/^pickups_.*(number|sequence).*/)
  })
})

test('a container is held once at a time', async () => {
  const drum = await aFilledDrum(yard, { value: '5', unit: 'L' })
  const hold = (released: Date | null) => ({
    id: randomUUID(),
    organisationId: yard.site.organisation.id,
    siteId: yard.site.id,
    containerId: drum.id,
    reason: 'smells of solvent',
    heldBy: yard.officer.id,
    heldAt: new Date(),
    releasedAt: released,
    releasedBy: released === null ? null : yard.officer.id,
    releaseNote: released === null ? null : 'none found',
  })
  expect(await refusal(db().insert(holds).values(hold(new Date())))).toBe('not refused')
  expect(await refusal(db().insert(holds).values(hold(null)))).toBe('not refused')
  expect(await refusal(db().insert(holds).values(hold(null)))).toBe('holds_one_open')
})

test('a rule raises one standing flag for a period; a later one is another flag', async () => {
  const rule = {
    id: randomUUID(),
    siteId: yard.site.id,
    title: 'Own line of used oil',
    measure: 'contents-volume',
    scope: 'site',
    streams: { classes: ['used_oil'], streamIds: [] },
    threshold: { value: '1', unit: 'L' },
    comparison: 'gt',
    warnPercent: '90',
    minimumCapacity: null,
    consequence: '',
    citation: '',
  }
  expect((await yard.officer.post('/rules', rule)).status).toBe(201)
  const [flag] = await db().select().from(flags).where(eq(flags.ruleId, rule.id))
  if (flag === undefined) throw new Error('there is no flag')
  const second = () =>
    refusal(
      db()
        .insert(flags)
        .values({ ...flag, id: randomUUID() }),
    )
  expect(await second()).toBe('flags_one_per_period')
  await db().update(flags).set({ endedAt: new Date() }).where(eq(flags.id, flag.id))
  expect(await second()).toBe('not refused')
})

describe('a line of the book', () => {
  test('needs an open book of its own organisation', async () => {
    const [line] = await db().select().from(movements).limit(1)
    if (line === undefined) throw new Error('there is no line')
    const nowhere = { ...line, id: randomUUID(), siteId: randomUUID() }
    expect(await refusal(db().insert(movements).values(nowhere))).toBe('movements_have_a_book')
    const foreign = await aSite(product)
    const astray = { ...line, id: randomUUID(), siteId: foreign.id }
    expect(await refusal(db().insert(movements).values(astray))).toBe('movements_have_a_book')
  })

  test('keeps its book: a book is not removed', async () => {
    const empty = await aSite(product)
    const removing = db().delete(books).where(eq(books.siteId, empty.id))
    expect(await refusal(removing)).toBe('books_only_by_movements')
  })
})

test('every trigger that is in the database is one that these tests know', async () => {
  const { rows } = (await db().execute(
    sql`select tgname from pg_trigger where not tgisinternal order by tgname`,
  )) as unknown as { rows: { tgname: string }[] }
  expect(rows.map(({ tgname }) => tgname)).toEqual([
    'audit_append_only',
    'audit_never_truncated',
    'balances_never_truncated',
    'balances_only_by_movements',
    'books_never_truncated',
    'books_only_by_movements',
    'documents_append_only',
    'documents_never_truncated',
    'drain_revisions_append_only',
    'drain_revisions_never_truncated',
    'movements_append_only',
    'movements_extend_the_chain',
    'movements_mirror_their_target',
    'movements_move_the_balances',
    'movements_never_truncated',
    'pickups_keep_their_number',
    'signatures_append_only',
    'signatures_never_truncated',
  ])
})
