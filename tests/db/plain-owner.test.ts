import { randomBytes, randomUUID } from 'node:crypto'
import { PGlite } from '@electric-sql/pglite'
import { sql } from 'drizzle-orm'
import { drizzle } from 'drizzle-orm/pglite'
import { Client } from 'pg'
import { openDatabase, type OpenedDatabase } from '@/db/client'
import { migrateDatabase } from '@/db/migrate'
import { organisations } from '@/db/schema/organisations'
import { asMember, asService } from '@/db/tenancy'
import { addressOfDatabase, postgresAddress } from '../helpers/jest/template-database'

/**
 * A hosted PostgreSQL hands out an owner that is no superuser: it must be able to migrate, and the members it acts as must
 * be kept apart. (Itself it sees what the service sees, because it belongs to that role.)
 */
const owner = `plain_owner_${randomBytes(4).toString('hex')}`
let opened: OpenedDatabase
let remove: () => Promise<void>

beforeAll(async () => {
  const address = postgresAddress()
  const made = address === undefined ? await onPglite() : await onPostgres(address)
  opened = made.opened
  remove = made.remove
  await migrateDatabase(opened)
})
afterAll(() => remove())

async function onPglite() {
  const client = await PGlite.create()
  await client.exec(`create role ${owner} createrole; alter schema public owner to ${owner};
    grant create on database postgres to ${owner}; set session authorization ${owner}`)
  const db: OpenedDatabase = { db: drizzle(client), kind: 'pglite', close: () => client.close() }
  return { opened: db, remove: db.close }
}

async function onPostgres(address: string) {
  const password = randomBytes(12).toString('hex')
  const administrator = new Client({ connectionString: address })
  await administrator.connect()
  await administrator.query(`create role ${owner} login createrole password '${password}'`)
  await administrator.query(`create database ${owner} owner ${owner}`)
  const url = new URL(addressOfDatabase(address, owner))
  url.username = owner
  url.password = password
  const db = await openDatabase({ url: url.toString(), folder: '' })
  const removeAll = async () => {
    await db.close()
    await administrator.query(`drop database ${owner} with (force)`)
    await administrator.query(`drop role ${owner}`)
    await administrator.end()
  }
  return { opened: db, remove: removeAll }
}

const organisation = {
  id: randomUUID(),
  name: 'Invented Workshop',
  email: 'register@book.example.org',
  createdAt: new Date('2025-03-09T10:00:00Z'),
}

test('an owner without privileges migrates, and the service works through it', async () => {
  await asService(opened.db, (tx) => tx.insert(organisations).values(organisation))
  const seen = await asService(opened.db, (tx) => tx.select().from(organisations))
  expect(seen.map(({ id }) => id)).toEqual([organisation.id])
})

test("a member sees its own organisation and no other's", async () => {
  const seenBy = (organisationId: string) =>
    asMember(opened.db, { organisationId, personId: randomUUID() }, (tx) =>
      tx.select({ id: organisations.id }).from(organisations),
    )
  expect(await seenBy(organisation.id)).toEqual([{ id: organisation.id }])
  expect(await seenBy(randomUUID())).toEqual([])
})

test('the owner is no superuser here', async () => {
  const result = (await opened.db.execute(
    sql`select rolsuper, rolbypassrls from pg_roles where rolname = current_user`,
  )) as unknown as { rows: unknown[] }
  expect(result.rows).toEqual([{ rolsuper: false, rolbypassrls: false }])
})
