import { randomUUID } from 'node:crypto'
import { sql, type SQL } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { asMember, asService } from '@/db/tenancy'
import { anOrganisation, type Member } from '../helpers/factories'
import { aFilledDrum, aPickupYard, received, signedOut } from '../helpers/pickups'
import { testApp, type TestApp } from '../helpers/test-app'

/**
 * Every table with an organisation, asked with raw SQL by a member of another organisation and by one of none: what an
 * act forgets to ask for, the database does not give.
 */
let product: TestApp
let victim: Member
let stranger: Member
let tables: string[]

beforeAll(async () => {
  product = await testApp()
  const yard = await aPickupYard(product)
  victim = yard.site.organisation.administrator
  stranger = (await anOrganisation(product)).administrator
  const drum = await aFilledDrum(yard, { value: '50', unit: 'L' })
  await received(yard, await signedOut(yard, [drum]), { value: '49', unit: 'L' })
  await yard.officer.post(`/containers/${drum.id}/hold`, { id: randomUUID(), reason: 'solvent' })
  tables = await tablesWithAnOrganisation()
})
afterAll(() => product.close())

async function rowsOf<Row>(tx: Pick<Transaction, 'execute'>, query: SQL): Promise<Row[]> {
  return ((await tx.execute(query)) as unknown as { rows: Row[] }).rows
}

async function tablesWithAnOrganisation(): Promise<string[]> {
  const found = await rowsOf<{ name: string }>(
    product.opened.db,
    sql`select table_name as name from information_schema.columns
      where table_schema = 'public' and column_name = 'organisation_id' order by 1`,
  )
  return found.map(({ name }) => name)
}

const named = (table: string) => sql.identifier(table)

/** Runs in a savepoint of its own, so that a refusal does not end the whole. @returns rows touched, or the SQLSTATE */
async function tried(tx: Transaction, query: SQL): Promise<number | string> {
  try {
    return await tx.transaction(async (inner) => (await rowsOf(inner, query)).length)
  } catch (error) {
    return (error as { cause?: { code?: string } }).cause?.code ?? String(error)
  }
}

test('the world holds a row of the victim in nearly every table', async () => {
  const empty = await asService(product.opened.db, async (tx) => {
    const found: string[] = []
    for (const table of tables) {
      const rows = await rowsOf(
        tx,
        sql`select 1 from ${named(table)} where organisation_id = ${victim.organisationId} limit 1`,
      )
      if (rows.length === 0) found.push(table)
    }
    return found
  })
  expect(tables.length).toBeGreaterThan(20)
  expect(empty.filter((table) => !['flags', 'marks', 'transfers'].includes(table))).toEqual([])
})

test('every table has an organisation, or is the organisations, and is under row-level security', async () => {
  const all = await rowsOf<{ name: string; on: boolean; forced: boolean }>(
    product.opened.db,
    sql`select relname as name, relrowsecurity as on, relforcerowsecurity as forced
      from pg_class where relnamespace = 'public'::regnamespace and relkind in ('r', 'p') order by 1`,
  )
  expect(all.map(({ name }) => name)).toEqual([...tables, 'organisations'].sort())
  expect(all.filter(({ on, forced }) => !on || !forced)).toEqual([])
})

test('no view and no function lets a member act as somebody else', async () => {
  const found = await rowsOf(
    product.opened.db,
    sql`select relname as name from pg_class
        where relnamespace = 'public'::regnamespace and relkind in ('v', 'm')
      union all select proname from pg_proc
        where pronamespace = 'public'::regnamespace and prosecdef`,
  )
  expect(found).toEqual([])
})

test("another organisation's rows are not read, changed, moved away or removed", async () => {
  const findings = await asMember(product.opened.db, who(stranger), async (tx) => {
    const found: string[] = []
    const { organisationId: theirs } = victim
    for (const table of tables) {
      const attacks: [string, SQL][] = [
        ['read', sql`select 1 from ${named(table)} where organisation_id = ${theirs}`],
        [
          'counted',
          sql`select 1 from ${named(table)} where organisation_id <> ${stranger.organisationId}`,
        ],
        [
          'changed',
          sql`update ${named(table)} set organisation_id = organisation_id
            where organisation_id = ${theirs} returning 1`,
        ],
        [
          'taken over',
          sql`update ${named(table)} set organisation_id = ${stranger.organisationId}
            where organisation_id = ${theirs} returning 1`,
        ],
        ['removed', sql`delete from ${named(table)} where organisation_id = ${theirs} returning 1`],
      ]
      for (const [what, attack] of attacks) {
        const outcome = await tried(tx, attack)
        // Nothing found, or no right to ask (insufficient_privilege).
        if (outcome !== 0 && outcome !== '42501') found.push(`${table} ${what}: ${outcome}`)
      }
    }
    return found
  })
  expect(findings).toEqual([])
})

test('a row is not planted in another organisation, nor moved there', async () => {
  const findings = await asMember(product.opened.db, who(victim), async (tx) => {
    const found: string[] = []
    for (const table of tables) {
      const copy = sql`insert into ${named(table)}
        select (jsonb_populate_record(null::${named(table)}, to_jsonb(mine) ||
          jsonb_build_object('organisation_id', ${stranger.organisationId}::text))).*
        from ${named(table)} mine limit 1 returning 1`
      const move = sql`update ${named(table)} set organisation_id = ${stranger.organisationId}
        returning 1`
      for (const [what, attack] of [
        ['planted', copy],
        ['moved', move],
      ] as const) {
        const outcome = await tried(tx, attack)
        // P0001: a fact's own trigger refuses before the policy is asked.
        if (outcome !== 0 && outcome !== '42501' && outcome !== 'P0001')
          found.push(`${table} ${what}: ${outcome}`)
      }
    }
    return found
  })
  expect(findings).toEqual([])
})

test('what is not removed is not removable: of the own rows only who works where', async () => {
  const removable = await asMember(product.opened.db, who(victim), async (tx) => {
    const found: string[] = []
    for (const table of [...tables, 'organisations']) {
      if ((await tried(tx, sql`delete from ${named(table)} where false`)) !== '42501')
        found.push(table)
    }
    return found
  })
  expect(removable).toEqual(['person_sites'])
})

test('a member neither makes an organisation, nor sees another, nor empties or reshapes a table', async () => {
  const outcomes = await asMember(product.opened.db, who(stranger), async (tx) => [
    await tried(
      tx,
      sql`insert into organisations (id, name, email, created_at)
        values (${randomUUID()}, 'Planted', 'x@works.example.org', now())`,
    ),
    await tried(tx, sql`select 1 from organisations where id = ${victim.organisationId}`),
    await tried(tx, sql`truncate people cascade`),
    await tried(tx, sql`alter table movements disable trigger all`),
    await tried(tx, sql`alter table people disable row level security`),
    await tried(tx, sql`drop trigger movements_append_only on movements`),
    await tried(tx, sql`create table planted (id int)`),
  ])
  expect(outcomes).toEqual(['42501', 0, '42501', '42501', '42501', '42501', '42501'])
})

test('who names no organisation, or none that is one, sees nothing', async () => {
  const seen = await product.opened.db.transaction(async (tx) => {
    await tx.execute(sql`select set_config('role', 'ebbmark_member', true)`)
    const found: (number | string)[] = []
    for (const table of [...tables, 'organisations']) {
      found.push(await tried(tx, sql`select 1 from ${named(table)}`))
    }
    return [...new Set(found)]
  })
  expect(seen).toEqual([0])
})

test('what a transaction was is over with it: the next one starts as nobody', async () => {
  await asMember(product.opened.db, who(victim), (tx) => tx.execute(sql`select 1`))
  const after = await rowsOf<{ organisation: string | null; role: string }>(
    product.opened.db,
    sql`select current_setting('ebbmark.organisation', true) as organisation, current_user as role`,
  )
  expect(after[0]?.organisation ?? '').toBe('')
  expect(after[0]?.role).not.toMatch(/^ebbmark_/)
})

test('keys between records hold the organisation as well', async () => {
  const keys = await rowsOf<{ name: string; columns: string[] }>(
    product.opened.db,
    sql`select conname as name, array(select attname::text from pg_attribute
        where attrelid = conrelid and attnum = any(conkey) order by 1) as columns
      from pg_constraint where contype = 'f' and connamespace = 'public'::regnamespace
        and confrelid <> 'organisations'::regclass order by 1`,
  )
  expect(keys.length).toBeGreaterThan(30)
  const without = keys.filter(({ columns }) => !columns.includes('organisation_id'))
  // A line is of one site, which is of one organisation: its accounts are held to the site by these keys, its target by
  // the trigger movements_mirror_their_target.
  expect(without.map(({ name }) => name)).toEqual([
    'movements_from',
    'movements_reverses',
    'movements_to',
  ])
})

test("a record does not point at another organisation's record", async () => {
  const outcome = await asService(product.opened.db, (tx) =>
    tried(
      tx,
      sql`insert into person_sites (organisation_id, person_id, site_id)
        select ${stranger.organisationId}::uuid, ${stranger.id}::uuid, id from sites
        where organisation_id = ${victim.organisationId} limit 1`,
    ),
  )
  // foreign_key_violation
  expect(outcome).toBe('23503')
})

function who({ organisationId, id }: Member) {
  return { organisationId, personId: id }
}
