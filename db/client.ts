import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import type { PgDatabase, PgQueryResultHKT } from 'drizzle-orm/pg-core'
import { lockFolder } from './folder-lock'

/** Either engine behind one type: queries do not know which one answers. */
export type Database = PgDatabase<PgQueryResultHKT>

/** An open transaction. Inside one, never use the outer database: on PGlite that waits for ever. */
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0]

export type OpenedDatabase = {
  db: Database
  kind: 'pglite' | 'postgres'
  close: () => Promise<void>
}

/**
 * Opens PostgreSQL at `url`, or else PGlite in `folder` (made when missing), which only one process may open.
 * @throws FolderInUse when another living process has the folder
 */
export async function openDatabase(from: {
  url?: string | undefined
  folder: string
}): Promise<OpenedDatabase> {
  return from.url === undefined ? openFolder(from.folder) : openPostgres(from.url)
}

async function openFolder(folder: string): Promise<OpenedDatabase> {
  mkdirSync(folder, { recursive: true, mode: 0o700 })
  const lock = lockFolder(folder)
  try {
    const [{ PGlite }, { drizzle }] = await Promise.all([
      import('@electric-sql/pglite'),
      import('drizzle-orm/pglite'),
    ])
    const client = await PGlite.create({ dataDir: join(folder, 'database') })
    return {
      db: drizzle(client),
      kind: 'pglite',
      close: async () => {
        await client.close()
        lock.release()
      },
    }
  } catch (error) {
    lock.release()
    throw error
  }
}

async function openPostgres(url: string): Promise<OpenedDatabase> {
  const [{ default: pg }, { drizzle }] = await Promise.all([
    import('pg'),
    import('drizzle-orm/node-postgres'),
  ])
  const pool = new pg.Pool({
    connectionString: url,
    max: 10,
    connectionTimeoutMillis: 10_000,
    idleTimeoutMillis: 30_000,
    // A statement that runs this long is a fault, not a slow report.
    statement_timeout: 60_000,
    application_name: 'ebbmark',
  })
  // A connection that breaks while idle is replaced by the pool; without a listener it would end the process.
  pool.on('error', () => undefined)
  return { db: drizzle(pool), kind: 'postgres', close: () => pool.end() }
}
