import { Client } from 'pg'
import { postgresAddress, templateVariable } from './template-database'

export default async function dropTemplateDatabase(): Promise<void> {
  const address = postgresAddress()
  const name = process.env[templateVariable]
  if (address === undefined || name === undefined) return
  const administrator = new Client({ connectionString: address })
  await administrator.connect()
  await administrator.query(`drop database if exists ${name} with (force)`)
  await administrator.end()
}
