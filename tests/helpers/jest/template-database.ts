import { createHash } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'

/** Where the migrated template is found by the test files: told through the environment, which workers inherit. */
export const templateVariable = 'EBBMARK_TEST_TEMPLATE'

/** PostgreSQL to test on, as an administrator's address; without it the tests run on PGlite. */
export function postgresAddress(): string | undefined {
  return process.env.EBBMARK_TEST_POSTGRES
}

/** The same server's other database. */
export function addressOfDatabase(address: string, name: string): string {
  const url = new URL(address)
  url.pathname = `/${name}`
  return url.toString()
}

/** Changes when a migration does. */
export function migrationsDigest(root: string): string {
  const folder = join(root, 'db/migrations')
  const hash = createHash('sha256')
  for (const name of readdirSync(folder).sort()) {
    if (name.endsWith('.sql')) hash.update(name).update(readFileSync(join(folder, name)))
  }
  return hash.digest('hex').slice(0, 16)
}
