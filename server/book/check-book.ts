import { createHash } from 'node:crypto'
import { asc, count, eq, sql } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { listMovementsAfter } from '@/db/queries/book'
import { accounts, balances, books } from '@/db/schema/book'
import { documents } from '@/db/schema/pickups'
import { sites } from '@/db/schema/sites'
import { contentHash } from '../content-hash'
import { firstHash, hashOfMovement } from './canonical-movement'
import { checkDrains } from './check-drains'

export type BookFinding = { code: string; detail: string }
export type BookCheck = { movements: number; accounts: number; findings: BookFinding[] }

const batch = 2000

/**
 * Re-derives everything the book promises and names what does not hold; no findings when it is sound. Reads what
 * the transaction may see: one organisation's books, or all of them.
 */
export async function checkBook(tx: Transaction): Promise<BookCheck> {
  const heads = await tx
    .select({ head: books, siteCode: sites.code })
    .from(books)
    .innerJoin(sites, eq(sites.id, books.siteId))
    .orderBy(asc(sites.code))
  const findings: BookFinding[] = []
  let movementCount = 0
  for (const { head, siteCode } of heads) {
    const checked = await checkChain(tx, head, siteCode)
    movementCount += checked.lines
    findings.push(...checked.findings)
  }
  for (const [code, query] of Object.entries(derivations)) {
    const { rows } = (await tx.execute(query)) as unknown as { rows: { detail: string }[] }
    findings.push(...rows.map(({ detail }) => ({ code, detail })))
  }
  findings.push(...(await checkDrains(tx)), ...(await checkDocuments(tx)))
  const [counted] = await tx.select({ accounts: count() }).from(accounts)
  return { movements: movementCount, accounts: counted?.accounts ?? 0, findings }
}

/** Line numbers without gaps, each hash as the line says it, each naming the one before, the head at the last. */
async function checkChain(tx: Transaction, head: typeof books.$inferSelect, siteCode: string) {
  const findings: BookFinding[] = []
  let previousHash = firstHash
  let lineNo = 0
  for (;;) {
    const rows = await listMovementsAfter(tx, head.siteId, lineNo, batch)
    for (const row of rows) {
      const at = `${siteCode} line ${row.lineNo}`
      if (row.lineNo !== lineNo + 1)
        findings.push({ code: 'line-missing', detail: `${at} follows line ${lineNo}` })
      if (row.previousHash !== previousHash) findings.push({ code: 'chain-broken', detail: at })
      if (hashOfMovement(row) !== row.hash) findings.push({ code: 'line-changed', detail: at })
      previousHash = row.hash
      lineNo = row.lineNo
    }
    if (rows.length < batch) break
  }
  if (head.lastLineNo !== lineNo || head.lastHash !== previousHash) {
    findings.push({
      code: 'head-differs',
      detail: `${siteCode} ends at line ${lineNo}, its head says ${head.lastLineNo}`,
    })
  }
  return { lines: lineNo, findings }
}

/** Each query returns a row for everything that does not hold. */
const derivations = {
  'balance-differs': sql`
    with derived as (
      select account_id, stream_id, sum(litres) as litres, sum(kilograms) as kilograms, sum(pieces) as pieces
      from (
        select to_account_id as account_id, stream_id, litres, kilograms, pieces from movements
        union all
        select from_account_id, stream_id, -litres, -kilograms, -pieces from movements
      ) as both_sides group by account_id, stream_id
    )
    select coalesce(derived.account_id, ${balances.accountId})::text || ': kept ' || coalesce(${balances.litres}, 0)
      || ' L, lines say ' || coalesce(derived.litres, 0) || ' L' as detail
    from derived full join ${balances}
      on ${balances.accountId} = derived.account_id and ${balances.streamId} = derived.stream_id
    where coalesce(derived.litres, 0) <> coalesce(${balances.litres}, 0)
      or coalesce(derived.kilograms, 0) <> coalesce(${balances.kilograms}, 0)
      or coalesce(derived.pieces, 0) <> coalesce(${balances.pieces}, 0)`,
  'stream-does-not-conserve': sql`
    select stream_id::text || ': all accounts together hold ' || sum(litres) || ' L' as detail from balances
    group by stream_id having sum(litres) <> 0 or sum(kilograms) <> 0 or sum(pieces) <> 0`,
  'reversal-does-not-mirror': sql`
    select 'line ' || mirror.line_no as detail from movements mirror
    left join movements target on target.id = mirror.reverses
    where mirror.reason = 'reversal' and (target.id is null
      or target.from_account_id <> mirror.to_account_id or target.to_account_id <> mirror.from_account_id
      or target.litres <> mirror.litres or target.kilograms <> mirror.kilograms or target.pieces <> mirror.pieces
      or target.stream_id <> mirror.stream_id or target.counts_as <> mirror.counts_as
      or target.occurred_on <> mirror.occurred_on)`,
  'drain-does-not-sum': sql`
    select d.number || ': ' || coalesce(sum(case when m.reverses is null then m.litres else -m.litres end), 0)
      || ' L in lines, ' || (case when d.state = 'struck' then 0 else d.litres end) || ' L in the drain' as detail
    from drains d left join movements m on m.drain_id = d.id
    group by d.id, d.number, d.state, d.litres
    having coalesce(sum(case when m.reverses is null then m.litres else -m.litres end), 0)
      <> (case when d.state = 'struck' then 0 else d.litres end)`,
  'number-missing': sql`
    select s.kind || ' ' || s.year || ': ' || s.last || ' given out, ' || count(n.number) || ' found' as detail
    from number_series s
    left join lateral (
      select number from drains where s.kind = 'drain' and organisation_id = s.scope_id
        and number like 'D-' || lpad((s.year % 100)::text, 2, '0') || '-%'
      union all
      select number from pickups where s.kind = 'pickup' and site_id = s.scope_id
        and number ~ ('-' || lpad((s.year % 100)::text, 2, '0') || '-[0-9]+-.$')
    ) n on true
    group by s.scope_id, s.kind, s.year, s.last having count(n.number) <> s.last`,
  'book-missing': sql`
    select count(*) || ' lines of site ' || m.site_id || ' stand in no book' as detail
    from movements m left join books b on b.site_id = m.site_id
    where b.site_id is null group by m.site_id`,
  'signed-out-does-not-sum': sql`
    select p.number || ': line ' || l.position as detail
    from pickups p join pickup_lines l on l.pickup_id = p.id and not l.removed
    left join movements m on m.pickup_line_id = l.id and m.counts_as = 'shipment'
    group by p.id, p.number, p.stage, l.id, l.position, l.shipped_litres, l.shipped_kilograms
    having coalesce(sum(case when m.reverses is null then m.litres else -m.litres end), 0)
      <> (case when p.stage in ('signed-out', 'differs', 'settled') then l.shipped_litres else 0 end)`,
}

async function checkDocuments(tx: Transaction): Promise<BookFinding[]> {
  const findings: BookFinding[] = []
  const ids = await tx.select({ id: documents.id }).from(documents)
  for (const { id } of ids) {
    const [row] = await tx.select().from(documents).where(eq(documents.id, id))
    if (row === undefined) continue
    const found = createHash('sha256').update(row.bytes).digest('hex')
    if (found !== row.sha256) findings.push({ code: 'document-changed', detail: `document ${id}` })
    if (contentHash(row.facts) !== row.factsSha256)
      findings.push({ code: 'document-facts-changed', detail: `document ${id}` })
  }
  return findings
}
