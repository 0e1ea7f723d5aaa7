import { mkdtempSync, rmSync } from 'node:fs'
import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { PGlite } from '@electric-sql/pglite'
import { drizzle } from 'drizzle-orm/pglite'
import type { Database, OpenedDatabase } from '@/db/client'
import { migrateDatabase } from '@/db/migrate'
import { testApp, type TestApp } from '../helpers/test-app'
import { recorder } from './statements'

export type BenchedApp = {
  test: TestApp
  client: PGlite
  statements: ReturnType<typeof recorder>
  url: string
  close: () => Promise<void>
}

/** The product over HTTP on an embedded database in a folder, with every statement it asks written down. */
export async function benchedApp(): Promise<BenchedApp> {
  const folder = mkdtempSync(join(tmpdir(), 'ebbmark-bench-'))
  const client = await PGlite.create({ dataDir: join(folder, 'database') })
  const statements = recorder()
  const opened: OpenedDatabase = {
    // One type over two engines, as in db/client.ts.
    db: drizzle(client, { logger: statements }) as unknown as Database,
    kind: 'pglite',
    close: () => client.close(),
  }
  await migrateDatabase(opened)
  const test = await testApp({ opened })
  const server: Server = createServer(test.app)
  await new Promise<void>((done) => server.listen(0, '127.0.0.1', done))
  const { port } = server.address() as AddressInfo
  return {
    test,
    client,
    statements,
    url: `http://127.0.0.1:${port}/api`,
    close: async () => {
      server.closeAllConnections()
      await new Promise((done) => server.close(done))
      await client.close()
      rmSync(folder, { recursive: true, force: true })
    },
  }
}
