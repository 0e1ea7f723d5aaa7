import { Router } from 'express'
import { findPickup, listPickupRecords } from '@/db/queries/pickups'
import * as contracts from '@/shared/contracts/pickups'
import { demand } from '../act-context'
import type { AppServices } from '../app-services'
import { pageOf, readCursor } from '../http/cursor'
import { serve } from '../http/route'
import { problem } from '../problem'
import { sitesSeen } from '../sites-seen'
import { issuePickup } from './issue-pickup'
import { changePickup, planPickup } from './plan-pickup'
import { presentPickup, presentPickupRows } from './present-pickup'
import { receivePickup } from './receive-pickup'
import { settlePickup } from './settle-pickup'
import { signPickup } from './sign-pickup'
import { voidPickup } from './void-pickup'

export function pickupRoutes(services: AppServices): Router {
  const router = Router()

  serve(router, services, contracts.listPickups, async (tx, context, { query }) => {
    const cursor = readCursor(query.cursor)
    const found = await listPickupRecords(tx, {
      siteIds: sitesSeen(context, query.siteId),
      shown: query.stage && { stage: query.stage, at: context.clock() },
      before: cursor && { at: new Date(cursor.at), id: cursor.id },
      limit: query.limit + 1,
    })
    const { rows, next } = pageOf(found, query.limit, ({ pickup }) => ({
      at: pickup.createdAt.toISOString(),
      id: pickup.id,
    }))
    return { rows: await presentPickupRows(tx, rows, context.clock()), next }
  })

  serve(router, services, contracts.readPickup, async (tx, context, { params }) => {
    const found = await findPickup(
      tx,
      params.id.length === 36 ? { id: params.id } : { number: params.id },
    )
    if (found === undefined) throw problem('not-found')
    demand(context, 'read-pickups', { siteId: found.pickup.siteId })
    return presentPickup(tx, found.pickup.id, context.clock())
  })

  serve(router, services, contracts.planPickup, async (tx, context, { body, repeated }) => {
    const { isRepeated } = await planPickup(tx, context, body)
    if (isRepeated) repeated()
    return presentPickup(tx, body.id, context.clock())
  })

  serve(router, services, contracts.changePickup, async (tx, context, { params, body }) => {
    await changePickup(tx, context, params.id, body)
    return presentPickup(tx, params.id, context.clock())
  })

  serve(router, services, contracts.issuePickup, async (tx, context, { params, body }) => {
    await issuePickup(tx, context, params.id, body.version)
    return presentPickup(tx, params.id, context.clock())
  })

  serve(router, services, contracts.signPickup, async (tx, context, { params, body, repeated }) => {
    const { isRepeated } = await signPickup(tx, context, params.id, body)
    if (isRepeated) repeated()
    return presentPickup(tx, params.id, context.clock())
  })

  serve(router, services, contracts.receivePickup, async (tx, context, { params, body }) => {
    await receivePickup(tx, context, params.id, body)
    return presentPickup(tx, params.id, context.clock())
  })

  serve(router, services, contracts.settlePickup, async (tx, context, { params, body }) => {
    await settlePickup(tx, context, params.id, body)
    return presentPickup(tx, params.id, context.clock())
  })

  serve(router, services, contracts.voidPickup, async (tx, context, { params, body }) => {
    await voidPickup(tx, context, params.id, body)
    return presentPickup(tx, params.id, context.clock())
  })
  return router
}
