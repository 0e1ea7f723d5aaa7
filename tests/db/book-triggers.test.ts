import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import type { OpenedDatabase } from '@/db/client'
import { constraintName } from '@/db/constraint-problems'
import { accounts, balances, books, movements } from '@/db/schema/book'
import { sites, streams } from '@/db/schema/sites'
import { asService } from '@/db/tenancy'
import { makeOrganisation } from '@/server/people/set-up-organisation'
import { testDatabase } from '../helpers/database'

/**
 * The book attacked with raw SQL by the database's own owner: what no act would do, the database refuses by itself.
 */
const firstHash = '0'.repeat(64)
const at = new Date('2025-03-09T10:00:00Z')
const organisationId = randomUUID()
const personId = randomUUID()

let opened: OpenedDatabase
let streamId: string

beforeAll(async () => {
  opened = await testDatabase()
  const tools = { clock: () => at, newId: randomUUID }
  const organisation = {
    organisationId,
    personId,
    organisationName: 'Invented Workshop',
    phone: '',
    name: 'Invented Person',
    email: 'register@book.example.org',
    passwordHash: 'none',
    isDemo: false,
  }
  await asService(opened.db, (tx) => makeOrganisation(tx, tools, organisation))
  const [stream] = await opened.db.select().from(streams).limit(1)
  streamId = stream?.id ?? ''
})
afterAll(() => opened.close())

type Line = typeof movements.$inferInsert

/** A site with an open book and two accounts; `line` makes the next line of it, not yet written. */
async function aBook() {
  const siteId = randomUUID()
  const [from, to] = [randomUUID(), randomUUID()]
  await opened.db.insert(sites).values({
    id: siteId,
    organisationId,
    code: siteId.slice(0, 8),
    name: 'Invented Yard',
    timeZone: 'America/Denver',
    profile: 'us-federal',
    volumeUnit: 'gal_us',
    massUnit: 'lb_avdp',
    version: randomUUID(),
    createdAt: at,
  })
  await opened.db.insert(books).values({ siteId, organisationId, lastHash: firstHash })
  await opened.db.insert(accounts).values([
    { id: from, organisationId, siteId, kind: 'outside', place: 'opening' },
    { id: to, organisationId, siteId, kind: 'outside', place: 'floor' },
  ])
  const line = (lineNo: number, changed: Partial<Line> = {}): Line => ({
    id: randomUUID(),
    organisationId,
    siteId,
    lineNo,
    streamId,
    fromAccountId: from,
    toAccountId: to,
    litres: '10.5',
    kilograms: '0',
    pieces: 0,
    enteredValue: '10.5',
    enteredUnit: 'L',
    method: 'estimate',
    isEstimate: true,
    reason: 'opening',
    countsAs: 'opening',
    occurredAt: at,
    occurredOn: '2025-03-09',
    recordedAt: at,
    recordedBy: personId,
    previousHash: lineNo === 1 ? firstHash : String(lineNo - 1).repeat(64),
    hash: String(lineNo).repeat(64),
    ...changed,
  })
  return { siteId, from, to, line }
}

async function refusal(work: PromiseLike<unknown>): Promise<string> {
  try {
    await work
  } catch (error) {
    return constraintName(error) ?? String(error)
  }
  return 'not refused'
}

const post = (line: Line) => opened.db.insert(movements).values(line)

test('a line moves both balances, exactly', async () => {
  const { from, to, line } = await aBook()
  await post(line(1, { litres: '0.000000000000000001' }))
  await post(line(2, { litres: '3785.411784', kilograms: '2.5', pieces: 3 }))
  const held = await opened.db.select().from(balances)
  const of = (accountId: string) => held.find((balance) => balance.accountId === accountId)
  expect(of(to)).toMatchObject({ litres: '3785.411784000000000001', pieces: 3, version: 2 })
  expect(of(from)).toMatchObject({ litres: '-3785.411784000000000001', pieces: -3, version: 2 })
})

describe('a line, once written', () => {
  test('is not changed', async () => {
    const { siteId, line } = await aBook()
    await post(line(1))
    const changing = opened.db
      .update(movements)
      .set({ note: 'x' })
      .where(eq(movements.siteId, siteId))
    expect(await refusal(changing)).toBe('movements_append_only')
  })

  test('is not removed', async () => {
    const { siteId, line } = await aBook()
    await post(line(1))
    const removing = opened.db.delete(movements).where(eq(movements.siteId, siteId))
    expect(await refusal(removing)).toBe('movements_append_only')
  })
})

test.each([
  ['movements', 'movements_never_truncated'],
  ['balances', 'balances_never_truncated'],
  ['books', 'books_never_truncated'],
  ['audit', 'audit_never_truncated'],
  ['documents', 'documents_never_truncated'],
  ['signatures', 'signatures_never_truncated'],
  ['drain_revisions', 'drain_revisions_never_truncated'],
])('%s cannot be emptied', async (table, trigger) => {
  const emptying = opened.db.execute(sql.raw(`truncate ${table} cascade`))
  const refusedBy = await refusal(emptying)
  // Emptying one empties what hangs on it: the first table asked refuses.
  expect(refusedBy).toMatch(/_never_truncated$/)
  const { rows } = (await opened.db.execute(
    sql`select 1 from pg_trigger where tgname = ${trigger} and tgrelid = ${table}::regclass`,
  )) as unknown as { rows: unknown[] }
  expect(rows).toHaveLength(1)
})

describe('the chain', () => {
  test('takes no line that leaves a number out', async () => {
    const { line } = await aBook()
    await post(line(1))
    expect(await refusal(post(line(3, { previousHash: '1'.repeat(64) })))).toBe(
      'movements_extend_the_chain',
    )
  })

  test('takes no line that names another hash before it', async () => {
    const { line } = await aBook()
    await post(line(1))
    expect(await refusal(post(line(2, { previousHash: 'f'.repeat(64) })))).toBe(
      'movements_extend_the_chain',
    )
  })

  test('takes no second line of the same number', async () => {
    const { line } = await aBook()
    await post(line(1))
    expect(await refusal(post(line(1)))).toBe('movements_extend_the_chain')
  })

  test('its head is moved by lines alone', async () => {
    const { siteId } = await aBook()
    const moving = opened.db.update(books).set({ lastLineNo: 7 }).where(eq(books.siteId, siteId))
    expect(await refusal(moving)).toBe('books_only_by_movements')
  })

  test('a book does not begin in the middle', async () => {
    const { siteId } = await aBook()
    const opening = opened.db.insert(books).values({
      siteId: randomUUID(),
      organisationId,
      lastHash: siteId.padEnd(64, '0'),
    })
    expect(await refusal(opening)).toBe('books_start_at_zero')
  })
})

describe('a balance', () => {
  test('is not changed by hand', async () => {
    const { to, line } = await aBook()
    await post(line(1))
    const changing = opened.db
      .update(balances)
      .set({ litres: '0' })
      .where(eq(balances.accountId, to))
    expect(await refusal(changing)).toBe('balances_only_by_movements')
  })

  test('is not removed by hand', async () => {
    const { to, line } = await aBook()
    await post(line(1))
    expect(await refusal(opened.db.delete(balances).where(eq(balances.accountId, to)))).toBe(
      'balances_only_by_movements',
    )
  })

  test('is not made by hand', async () => {
    const { siteId, to } = await aBook()
    const making = opened.db.insert(balances).values({
      accountId: to,
      streamId,
      organisationId,
      siteId,
      litres: '5',
      kilograms: '0',
      pieces: 0,
      version: 1,
    })
    expect(await refusal(making)).toBe('balances_only_by_movements')
  })
})

describe('a reversal', () => {
  async function aLineToReverse() {
    const { from, to, line } = await aBook()
    const target = line(1)
    await post(target)
    const mirror = (changed: Partial<Line> = {}) =>
      line(2, {
        fromAccountId: to,
        toAccountId: from,
        reason: 'reversal',
        reverses: target.id,
        ...changed,
      })
    return { line, to, target, mirror }
  }

  test('brings the balance back to exactly zero', async () => {
    const { to, mirror } = await aLineToReverse()
    await post(mirror())
    const [held] = await opened.db.select().from(balances).where(eq(balances.accountId, to))
    expect(Number(held?.litres)).toBe(0)
  })

  test.each<[string, Partial<Line>]>([
    ['another quantity', { litres: '10.4' }],
    ['another day', { occurredOn: '2025-03-10' }],
    ['another column of the totals', { countsAs: 'drain' }],
    ['pieces of its own', { pieces: 1 }],
  ])('does not have %s than its target', async (_, changed) => {
    const { mirror } = await aLineToReverse()
    expect(await refusal(post(mirror(changed)))).toBe('movements_mirror_their_target')
  })

  test('does not run the same way as its target', async () => {
    const { target, mirror } = await aLineToReverse()
    const { fromAccountId, toAccountId } = target
    expect(await refusal(post(mirror({ fromAccountId, toAccountId })))).toBe(
      'movements_mirror_their_target',
    )
  })

  test('happens once', async () => {
    const { line, mirror } = await aLineToReverse()
    await post(mirror())
    const { lineNo, previousHash, hash } = line(3)
    expect(await refusal(post(mirror({ lineNo, previousHash, hash })))).toBe(
      'movements_reversed_once',
    )
  })

  test('is not itself reversed', async () => {
    const { line, mirror, target } = await aLineToReverse()
    const reversal = mirror()
    await post(reversal)
    const again = line(3, { reason: 'reversal', reverses: reversal.id, countsAs: 'opening' })
    expect(again.fromAccountId).toBe(target.fromAccountId)
    expect(await refusal(post(again))).toBe('movements_mirror_their_target')
  })

  test('names its target', async () => {
    const { mirror } = await aLineToReverse()
    expect(await refusal(post(mirror({ reverses: null })))).toBe(
      'movements_reversal_names_its_target',
    )
  })
})

describe('a quantity', () => {
  test.each<[string, Partial<Line>]>([
    ['nothing', { litres: '0' }],
    ['less than nothing', { litres: '-1' }],
    ['less than nothing of one kind', { kilograms: '-0.1' }],
  ])('of %s does not move', async (_, changed) => {
    const { line } = await aBook()
    expect(await refusal(post(line(1, changed)))).toBe('movements_move_something')
  })

  test('does not move from an account to itself', async () => {
    const { from, line } = await aBook()
    expect(await refusal(post(line(1, { toAccountId: from })))).toBe(
      'movements_between_two_accounts',
    )
  })

  test("does not move to another site's account", async () => {
    const { line } = await aBook()
    const other = await aBook()
    expect(await refusal(post(line(1, { toAccountId: other.to })))).toBe('movements_to')
  })
})
