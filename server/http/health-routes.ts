import { Router } from 'express'
import { sql } from 'drizzle-orm'
import { asService } from '@/db/tenancy'
import { readHealth } from '@/shared/contracts/session'
import type { AppServices } from '../app-services'
import { servePublic } from './route'

export function healthRoutes(services: AppServices): Router {
  const router = Router()
  servePublic(router, services, readHealth, async (_, { response }) => {
    const serverVersion = await databaseVersion(services)
    // A probe reads the status code; the body says which part is down.
    if (serverVersion === undefined) response.status(503)
    return {
      status: serverVersion === undefined ? ('down' as const) : ('up' as const),
      version: services.version,
      database: {
        kind: services.databaseKind,
        serverVersion: serverVersion ?? '',
        answers: serverVersion !== undefined,
      },
    }
  })
  return router
}

async function databaseVersion(services: AppServices): Promise<string | undefined> {
  try {
    return await asService(services.db, async (tx) => {
      const { rows } = (await tx.execute(
        sql`select current_setting('server_version') as version`,
      )) as unknown as {
        rows: { version: string }[]
      }
      return rows[0]?.version
    })
  } catch (error) {
    services.log.error({ err: error }, 'the database does not answer')
    return undefined
  }
}
