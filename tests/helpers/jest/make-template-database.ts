import { existsSync, mkdirSync, renameSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { Client } from 'pg'
import { PGlite } from '@electric-sql/pglite'
import { drizzle } from 'drizzle-orm/pglite'
import { openDatabase } from '../../../db/client'
import { migrateDatabase } from '../../../db/migrate'
import {
  addressOfDatabase,
  migrationsDigest,
  postgresAddress,
  templateVariable,
} from './template-database'

/** Migrates one database, once; every test file clones it. */
export default async function makeTemplateDatabase(): Promise<void> {
  const address = postgresAddress()
  process.env[templateVariable] =
    address === undefined ? await pgliteTemplate() : await postgresTemplate(address)
}

/** A tar of a migrated data folder, kept from run to run until a migration changes. */
async function pgliteTemplate(): Promise<string> {
  const folder = join(process.cwd(), 'node_modules/.cache/ebbmark')
  const path = join(folder, `template-${migrationsDigest(process.cwd())}.tar`)
  if (existsSync(path)) return path
  const client = await PGlite.create()
  await migrateDatabase({ db: drizzle(client), kind: 'pglite', close: () => client.close() })
  const dump = await client.dumpDataDir('none')
  await client.close()
  mkdirSync(folder, { recursive: true })
  const draft = `${path}.${process.pid}`
  writeFileSync(draft, Buffer.from(await dump.arrayBuffer()))
  renameSync(draft, path)
  return path
}

async function postgresTemplate(address: string): Promise<string> {
  const name = `ebbmark_template_${process.pid}`
  const administrator = new Client({ connectionString: address })
  await administrator.connect()
  await administrator.query(`create database ${name}`)
  await administrator.end()
  const opened = await openDatabase({ url: addressOfDatabase(address, name), folder: '' })
  await migrateDatabase(opened)
  await opened.close()
  return name
}
