import { join } from 'node:path'
import type { OpenedDatabase } from './client'

/** Brings the database to the newest schema; a second call finds nothing to do. */
export async function migrateDatabase(
  { db, kind }: OpenedDatabase,
  folder = migrationsFolder(),
): Promise<void> {
  if (kind === 'pglite') {
    const { migrate } = await import('drizzle-orm/pglite/migrator')
    await migrate(db as unknown as Parameters<typeof migrate>[0], { migrationsFolder: folder })
    return
  }
  const { migrate } = await import('drizzle-orm/node-postgres/migrator')
  await migrate(db as unknown as Parameters<typeof migrate>[0], { migrationsFolder: folder })
}

/** Every command runs in the checkout's root: the launcher and npm see to it. */
function migrationsFolder(): string {
  return join(process.cwd(), 'db/migrations')
}
