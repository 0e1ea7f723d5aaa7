import { and, asc, eq, sql } from 'drizzle-orm'
import type { AnyPgColumn, PgTable } from 'drizzle-orm/pg-core'
import type { Transaction } from '@/db/client'
import { audit } from '@/db/schema/trail'
import type { Act } from '@/shared/policies'
import type { ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { contentHash } from '../content-hash'
import { problem } from '../problem'

/** A table of set-up records: versioned, retired instead of deleted. */
export type SetUpTable = PgTable & {
  id: AnyPgColumn
  organisationId: AnyPgColumn
  version: AnyPgColumn
  retiredAt: AnyPgColumn
  $inferSelect: { id: string; version: string; retiredAt: Date | null }
}

type Row<T extends SetUpTable> = T['$inferSelect']
type Values = Record<string, unknown>

/**
 * One kind of set-up record: how its body becomes columns, what must hold before it is changed or retired, and what
 * follows. The four acts below are the same for every kind.
 */
export type SetUpKind<T extends SetUpTable, Body> = {
  table: T
  order: AnyPgColumn
  subjectKind: string
  act: Act
  /** Columns of a body; checks what the schema cannot (a named site exists, a unit fits). */
  columns: (
    tx: Transaction,
    context: ActContext,
    body: Body,
    before: Row<T> | undefined,
  ) => Promise<Values>
  beforeRetire?: (tx: Transaction, context: ActContext, row: Row<T>) => Promise<void>
  /** Runs in the same transaction after a change. */
  after?: (
    tx: Transaction,
    context: ActContext,
    row: Row<T>,
    what: 'create' | 'change' | 'retire' | 'restore',
    body?: Body,
  ) => Promise<void>
  /** Of what the trail does not keep: is this what the record was made with? */
  isMadeWith?: (row: Row<T>, body: Body) => Promise<boolean>
}

export async function listRecords<T extends SetUpTable>(
  tx: Transaction,
  kind: SetUpKind<T, never>,
): Promise<Row<T>[]> {
  const rows = await tx
    .select()
    .from(kind.table as PgTable)
    .orderBy(asc(kind.order))
  return rows as Row<T>[]
}

/** @throws Problem not-found */
export async function getRecord<T extends SetUpTable>(
  tx: Transaction,
  kind: SetUpKind<T, never>,
  id: string,
): Promise<Row<T>> {
  const [row] = await tx
    .select()
    .from(kind.table as PgTable)
    .where(eq(kind.table.id, id))
    .limit(1)
  if (row === undefined) throw problem('not-found')
  return row as Row<T>
}

/** Was this record made with this very content? Then the answer was lost on its way, and is given again. */
export async function isCreatedSo<T extends SetUpTable, Body extends { id: string }>(
  tx: Transaction,
  kind: SetUpKind<T, Body>,
  body: Body,
): Promise<boolean> {
  const [made] = await tx
    .select({ row: kind.table as PgTable, details: audit.details })
    .from(kind.table as PgTable)
    .innerJoin(audit, eq(audit.subjectId, kind.table.id))
    .where(
      and(
        eq(kind.table.id, body.id),
        eq(audit.subjectKind, kind.subjectKind),
        sql`${audit.details} ->> 'what' = 'create'`,
      ),
    )
    .limit(1)
  if (made === undefined) return false
  const given = (made.details as { given?: unknown }).given
  if (contentHash(given) !== contentHash(withoutPassword(body))) return false
  return (await kind.isMadeWith?.(made.row as Row<T>, body)) ?? true
}

/** Makes a record. @throws Problem id-reused, code-taken */
export async function createRecord<T extends SetUpTable, Body extends { id: string }>(
  tx: Transaction,
  context: ActContext,
  kind: SetUpKind<T, Body>,
  body: Body,
): Promise<Row<T>> {
  const values = {
    ...(await kind.columns(tx, context, body, undefined)),
    id: body.id,
    organisationId: context.person.organisationId,
    version: context.newId(),
    createdAt: context.clock(),
  }
  const [row] = await tx
    .insert(kind.table)
    .values(values as never)
    .returning()
  await follow(tx, context, kind, row as Row<T>, 'create', body)
  return row as Row<T>
}

/** Changes the version that was read, and no other. @throws Problem not-found, changed-under-you */
export async function changeRecord<T extends SetUpTable, Body>(
  tx: Transaction,
  context: ActContext,
  kind: SetUpKind<T, Body>,
  id: string,
  version: string,
  body: Body,
): Promise<Row<T>> {
  const before = await getRecord(tx, kind as SetUpKind<T, never>, id)
  const values = { ...(await kind.columns(tx, context, body, before)), version: context.newId() }
  const [row] = (await tx
    .update(kind.table)
    .set(values as never)
    .where(and(eq(kind.table.id, id), eq(kind.table.version, version)))
    .returning()) as Row<T>[]
  if (row === undefined) throw problem('changed-under-you')
  await follow(tx, context, kind, row, 'change', body, before)
  return row
}

/** Takes a record out of use, or brings it back; both may be asked twice. @throws Problem not-found, still-in-use */
export async function setRetired<T extends SetUpTable>(
  tx: Transaction,
  context: ActContext,
  kind: SetUpKind<T, never>,
  id: string,
  isRetired: boolean,
): Promise<Row<T>> {
  const before = await getRecord(tx, kind, id)
  if ((before.retiredAt !== null) === isRetired) return before
  if (isRetired) await kind.beforeRetire?.(tx, context, before)
  const [row] = (await tx
    .update(kind.table)
    .set({ retiredAt: isRetired ? context.clock() : null, version: context.newId() } as never)
    .where(eq(kind.table.id, id))
    .returning()) as Row<T>[]
  if (row === undefined) throw problem('not-found')
  await follow(tx, context, kind as SetUpKind<T, unknown>, row, isRetired ? 'retire' : 'restore')
  return row
}

async function follow<T extends SetUpTable, Body>(
  tx: Transaction,
  context: ActContext,
  kind: SetUpKind<T, Body>,
  row: Row<T>,
  what: 'create' | 'change' | 'retire' | 'restore',
  body?: Body,
  before?: Row<T>,
): Promise<void> {
  await kind.after?.(tx, context, row, what, body)
  await writeAudit(tx, context, {
    act: kind.act,
    subjectKind: kind.subjectKind,
    subjectId: row.id,
    siteId: 'siteId' in row && typeof row.siteId === 'string' ? row.siteId : null,
    details: {
      what,
      ...(body === undefined ? {} : { given: withoutPassword(body as Values) }),
      ...(before === undefined ? {} : { before: publicPart(before) }),
    },
  })
}

function withoutPassword(body: Values): Values {
  const kept = { ...body }
  delete kept['password']
  return kept
}

function publicPart(row: Values): Values {
  const shown = { ...row }
  delete shown['passwordHash']
  return shown
}
