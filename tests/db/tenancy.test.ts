import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import type { OpenedDatabase } from '@/db/client'
import { constraintProblem } from '@/db/constraint-problems'
import { organisations, people } from '@/db/schema/organisations'
import { streams } from '@/db/schema/sites'
import { asMember, asService } from '@/db/tenancy'
import { makeOrganisation } from '@/server/people/set-up-organisation'
import { testDatabase } from '../helpers/database'

let opened: OpenedDatabase
let ours: { organisationId: string; personId: string }
let theirs: { organisationId: string; personId: string }

beforeAll(async () => {
  opened = await testDatabase()
  ours = await anOrganisation('ours@book.example.org')
  theirs = await anOrganisation('theirs@book.example.org')
})
afterAll(() => opened.close())

async function anOrganisation(email: string) {
  const ids = { organisationId: randomUUID(), personId: randomUUID() }
  await asService(opened.db, (tx) =>
    makeOrganisation(
      tx,
      { clock: () => new Date('2025-03-09T10:00:00Z'), newId: randomUUID },
      {
        ...ids,
        organisationName: email,
        phone: '',
        name: 'Invented Person',
        email,
        passwordHash: 'none',
        isDemo: false,
      },
    ),
  )
  return ids
}

test('a member sees the rows of one organisation, whatever the query asks for', async () => {
  const seen = await asMember(opened.db, ours, async (tx) => ({
    organisations: await tx.select({ id: organisations.id }).from(organisations),
    people: await tx.select({ id: people.id }).from(people),
    streams: await tx.selectDistinct({ of: streams.organisationId }).from(streams),
    asked: await tx.select().from(people).where(eq(people.id, theirs.personId)),
  }))
  expect(seen).toEqual({
    organisations: [{ id: ours.organisationId }],
    people: [{ id: ours.personId }],
    streams: [{ of: ours.organisationId }],
    asked: [],
  })
})

test('the service sees every organisation', async () => {
  const seen = await asService(opened.db, (tx) =>
    tx.select({ id: organisations.id }).from(organisations),
  )
  expect(seen.map(({ id }) => id).sort()).toEqual(
    [ours.organisationId, theirs.organisationId].sort(),
  )
})

test("a member changes none of another organisation's rows", async () => {
  const changed = await asMember(opened.db, ours, (tx) =>
    tx.update(people).set({ name: 'Changed' }).where(eq(people.id, theirs.personId)).returning(),
  )
  expect(changed).toEqual([])
})

test('a member cannot write a row into another organisation', async () => {
  const writing = asMember(opened.db, ours, (tx) =>
    tx.insert(people).values({
      id: randomUUID(),
      organisationId: theirs.organisationId,
      name: 'Planted Person',
      email: 'planted@book.example.org',
      role: 'administrator',
      passwordHash: 'none',
      version: randomUUID(),
      createdAt: new Date('2025-03-09T10:00:00Z'),
    }),
  )
  // insufficient_privilege: new row violates row-level security policy
  await expect(writing).rejects.toMatchObject({ cause: { code: '42501' } })
})

test('a member cannot move a row to another organisation', async () => {
  const moving = asMember(opened.db, ours, (tx) =>
    tx
      .update(people)
      .set({ organisationId: theirs.organisationId })
      .where(eq(people.id, ours.personId)),
  )
  await expect(moving).rejects.toMatchObject({ cause: { code: '42501' } })
})

test('without an organisation a member sees nothing', async () => {
  const seen = await opened.db.transaction(async (tx) => {
    await tx.execute(sql`select set_config('role', 'ebbmark_member', true)`)
    return tx.select().from(people)
  })
  expect(seen).toEqual([])
})

test('what failed in the middle leaves nothing behind', async () => {
  const failing = asMember(opened.db, ours, async (tx) => {
    await tx.update(people).set({ name: 'Half Done' }).where(eq(people.id, ours.personId))
    throw new Error('stopped in the middle')
  })
  await expect(failing).rejects.toThrow('stopped in the middle')
  const [person] = await asMember(opened.db, ours, (tx) => tx.select().from(people))
  expect(person?.name).toBe('Invented Person')
})

test('a refused constraint is known by its name on either engine', async () => {
  const again = anOrganisation('OURS@book.example.org')
  await expect(again).rejects.toThrow()
  expect(await again.catch(constraintProblem)).toBe('email-taken')
})
