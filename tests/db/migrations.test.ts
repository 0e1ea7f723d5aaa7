import { sql } from 'drizzle-orm'
import type { OpenedDatabase } from '@/db/client'
import { migrateDatabase } from '@/db/migrate'
import { asMember } from '@/db/tenancy'
import { testDatabase } from '../helpers/database'

let opened: OpenedDatabase
beforeAll(async () => {
  opened = await testDatabase()
})
afterAll(() => opened.close())

async function rows(statement: ReturnType<typeof sql>): Promise<Record<string, unknown>[]> {
  const result = (await opened.db.execute(statement)) as unknown as {
    rows: Record<string, unknown>[]
  }
  return result.rows
}

test('migrating a migrated database changes nothing', async () => {
  const before = await rows(sql`select count(*)::int as n from drizzle.__drizzle_migrations`)
  await migrateDatabase(opened)
  expect(await rows(sql`select count(*)::int as n from drizzle.__drizzle_migrations`)).toEqual(
    before,
  )
  expect(before[0]?.n).toBeGreaterThan(0)
})

test('every table is closed to other organisations: row-level security is on and forced', async () => {
  const open = await rows(sql`
    select relname from pg_class join pg_namespace on pg_namespace.oid = relnamespace
    where nspname = 'public' and relkind = 'r' and not (relrowsecurity and relforcerowsecurity)`)
  expect(open).toEqual([])
})

test('a member has no right to delete or truncate, except the sites of a person', async () => {
  const rights = await rows(sql`
    select table_name, privilege_type from information_schema.role_table_grants
    where grantee = 'ebbmark_member' and table_schema = 'public' and privilege_type in ('DELETE', 'TRUNCATE')
      and table_name <> 'person_sites'`)
  expect(rights).toEqual([])
})

test('what a transaction says about its member is forgotten with it', async () => {
  const member = {
    organisationId: '11111111-1111-4111-8111-111111111111',
    personId: '22222222-2222-4222-8222-222222222222',
  }
  const asked = sql`select current_user as who, current_setting('ebbmark.organisation', true) as organisation`
  const inside = await asMember(opened.db, member, async (tx) => {
    const result = (await tx.execute(asked)) as unknown as {
      rows: { who: string; organisation: string }[]
    }
    return result.rows[0]
  })
  expect(inside).toEqual({ who: 'ebbmark_member', organisation: member.organisationId })
  const [outside] = await rows(asked)
  expect(outside?.who).not.toBe('ebbmark_member')
  expect(outside?.organisation ?? '').toBe('')
})
