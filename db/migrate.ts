import { existsSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import type { OpenedDatabase } from './client'

/** Brings the database to the newest schema; a second call finds nothing to do. */
export async function migrateDatabase({ db, kind }: OpenedDatabase, folder = migrationsFolder()): Promise<void> {
  if (kind === 'pglite') {
    const { migrate } = await import('drizzle-orm/pglite/migrator')
    await migrate(db as unknown as Parameters<typeof migrate>[0], { migrationsFolder: folder })
    return
  }
  const { migrate } = await import('drizzle-orm/node-postgres/migrator')
  await migrate(db as unknown as Parameters<typeof migrate>[0], { migrationsFolder: folder })
}

/** db/migrations of the checkout, found from the source file or from the bundle in dist/server. */
function migrationsFolder(): string {
  const here = dirname(fileURLToPath(import.meta.url))
  const candidates = [join(here, 'migrations'), join(here, '../../db/migrations')]
  const found = candidates.find((candidate) => existsSync(join(candidate, 'meta/_journal.json')))
  if (found === undefined) throw new Error('db/migrations was not found')
  return found
}
