import { randomBytes } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { PGlite } from '@electric-sql/pglite'
import { drizzle } from 'drizzle-orm/pglite'
import { Client } from 'pg'
import { openDatabase, type OpenedDatabase } from '@/db/client'
import { addressOfDatabase, postgresAddress, templateVariable } from './jest/template-database'

/**
 * A migrated, empty database of this test file's own, on the engine this run tests (PGlite, or PostgreSQL when
 * EBBMARK_TEST_POSTGRES is set). Open one in beforeAll, close it in afterAll; append-only tables cannot be emptied, so
 * factories build a fresh site instead. As the database's owner it sees every row: use asMember or asService.
 */
export async function testDatabase(): Promise<OpenedDatabase> {
  const template = process.env[templateVariable]
  if (template === undefined)
    throw new Error('testDatabase works in the jest project "server" only')
  const address = postgresAddress()
  return address === undefined ? clonePglite(template) : clonePostgres(address, template)
}

async function clonePglite(template: string): Promise<OpenedDatabase> {
  const client = await PGlite.create({ loadDataDir: new Blob([readFileSync(template)]) })
  return { db: drizzle(client), kind: 'pglite', close: () => client.close() }
}

async function clonePostgres(address: string, template: string): Promise<OpenedDatabase> {
  const name = `ebbmark_test_${randomBytes(6).toString('hex')}`
  await administer(address, `create database ${name} template ${template}`)
  const opened = await openDatabase({ url: addressOfDatabase(address, name), folder: '' })
  return {
    ...opened,
    close: async () => {
      await opened.close()
      await administer(address, `drop database if exists ${name} with (force)`)
    },
  }
}

async function administer(address: string, statement: string): Promise<void> {
  const administrator = new Client({ connectionString: address })
  await administrator.connect()
  await administrator.query(statement)
  await administrator.end()
}
