import type { PGlite } from '@electric-sql/pglite'
import type { Logger } from 'drizzle-orm'

export type Statement = { sql: string; params: unknown[] }

/** A drizzle logger that keeps what was asked while it listens. */
export function recorder(): Logger & { take: () => Statement[] } {
  let heard: Statement[] = []
  return {
    logQuery: (sql, params) => {
      heard.push({ sql, params })
    },
    take: () => {
      const taken = heard
      heard = []
      return taken
    },
  }
}

/** Runs statements as they were recorded in one transaction, and rolls it back so that they can be run again. */
export async function replay(client: PGlite, statements: readonly Statement[]): Promise<void> {
  await client.exec('begin')
  for (const { sql, params } of statements) await client.query(sql, params)
  await client.exec('rollback')
}

/** Milliseconds that each of `rounds` calls took, after a tenth of them to warm up. */
export async function timed(rounds: number, work: () => Promise<unknown>): Promise<number[]> {
  const times: number[] = []
  for (let round = -Math.ceil(rounds / 10); round < rounds; round += 1) {
    const start = performance.now()
    await work()
    if (round >= 0) times.push(performance.now() - start)
  }
  return times
}
