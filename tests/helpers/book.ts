import { asc, eq, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import { accounts, movements } from '@/db/schema/book'
import { containers, machines, parties, streams } from '@/db/schema/sites'
import { asService } from '@/db/tenancy'
import { checkBook } from '@/server/book/check-book'
import { normalise } from '@/shared/quantities/decimals'
import type { TestApp } from './test-app'

/**
 * The lines of a site's book after one, in words: `M-1 > C-2 37.85411784 L drain`, `floor` and the like by their place;
 * a reversal is `... undoes drain`.
 */
export async function bookLines(test: TestApp, siteId: string, after = 0): Promise<string[]> {
  const from = alias(accounts, 'from_account')
  const to = alias(accounts, 'to_account')
  const nameOf = (account: typeof from | typeof to) =>
    sql<string>`coalesce(
      (select ${containers.code} from ${containers} where ${containers.id} = ${account.containerId}),
      (select ${machines.code} from ${machines} where ${machines.id} = ${account.machineId}),
      (select ${parties.name} from ${parties} where ${parties.id} = ${account.partyId}),
      ${account.place}, ${account.kind})`
  const rows = await asService(test.opened.db, (tx) =>
    tx
      .select({ line: movements, from: nameOf(from), to: nameOf(to), stream: streams.code })
      .from(movements)
      .innerJoin(from, eq(from.id, movements.fromAccountId))
      .innerJoin(to, eq(to.id, movements.toAccountId))
      .innerJoin(streams, eq(streams.id, movements.streamId))
      .where(eq(movements.siteId, siteId))
      .orderBy(asc(movements.lineNo)),
  )
  return rows.slice(after).map(({ line, ...row }) => {
    const figures = [
      [normalise(line.litres), 'L'],
      [normalise(line.kilograms), 'kg'],
      [String(line.pieces), 'pieces'],
    ].filter(([figure]) => figure !== '0')
    const moved = figures.map((one) => one.join(' ')).join(', ')
    const why = line.reason === 'reversal' ? `undoes ${line.countsAs}` : line.reason
    return `${row.from} > ${row.to} ${moved} ${row.stream} ${why}`
  })
}

/** What checkBook finds in the whole database; [] when every book is sound. */
export async function bookFindings(test: TestApp): Promise<string[]> {
  const { findings } = await asService(test.opened.db, checkBook, {
    isolationLevel: 'repeatable read',
  })
  return findings.map(({ code, detail }) => `${code}: ${detail}`)
}
