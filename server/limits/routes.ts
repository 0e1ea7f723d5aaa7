import { Router } from 'express'
import type { Transaction } from '@/db/client'
import * as contracts from '@/shared/contracts/limits'
import type { ActContext } from '../act-context'
import type { AppServices } from '../app-services'
import { pageOf, readCursor } from '../http/cursor'
import { serve } from '../http/route'
import { problem } from '../problem'
import { getSite, sitesSeen } from '../sites-seen'
import { changeRule, createRule, retireRule, switchRule } from './change-rules'
import { listFlagRows, presentFlag, presentRules } from './present-limits'
import { reviewFlag } from './review-flag'

export function limitRoutes(services: AppServices): Router {
  const router = Router()
  const one = async (tx: Transaction, context: ActContext, siteId: string, id: string) => {
    const [shown] = await presentRules(tx, siteId, context.clock(), id)
    if (shown === undefined) throw problem('not-found')
    return shown
  }

  serve(router, services, contracts.listRules, async (tx, context, { query }) => {
    await getSite(tx, context, query.siteId)
    return { rows: await presentRules(tx, query.siteId, context.clock()) }
  })
  serve(router, services, contracts.createRule, async (tx, context, { body }) => {
    await createRule(tx, context, body)
    return one(tx, context, body.siteId, body.id)
  })
  serve(router, services, contracts.changeRule, async (tx, context, { params, body }) =>
    one(tx, context, await changeRule(tx, context, params.id, body), params.id),
  )
  serve(router, services, contracts.switchRule, async (tx, context, { params, body }) =>
    one(tx, context, await switchRule(tx, context, params.id, body), params.id),
  )
  serve(router, services, contracts.retireRule, async (tx, context, { params }) =>
    one(tx, context, await retireRule(tx, context, params.id), params.id),
  )

  serve(router, services, contracts.listFlags, async (tx, context, { query }) => {
    const cursor = readCursor(query.cursor)
    const found = await listFlagRows(tx, {
      siteIds: sitesSeen(context, query.siteId),
      state: query.state,
      before: cursor && { at: new Date(cursor.at), id: cursor.id },
      limit: query.limit + 1,
    })
    const { rows, next } = pageOf(found, query.limit, ({ flag }) => ({
      at: flag.raisedAt.toISOString(),
      id: flag.id,
    }))
    return { rows: rows.map(presentFlag), next }
  })
  serve(router, services, contracts.readFlag, async (tx, context, { params }) =>
    getFlag(tx, context, params.id),
  )
  serve(router, services, contracts.reviewFlag, async (tx, context, { params, body }) => {
    await reviewFlag(tx, context, params.id, body.note)
    return getFlag(tx, context, params.id)
  })
  return router
}

async function getFlag(tx: Transaction, context: ActContext, id: string) {
  const [found] = await listFlagRows(tx, { siteIds: sitesSeen(context), id, limit: 1 })
  if (found === undefined) throw problem('not-found')
  return presentFlag(found)
}
