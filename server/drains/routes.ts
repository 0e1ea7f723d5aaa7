import { Router } from 'express'
import {
  findDrain,
  listDrainRecords,
  listMarkRecords,
  listPouredByDrain,
} from '@/db/queries/drains'
import * as contracts from '@/shared/contracts/drains'
import { demand } from '../act-context'
import type { AppServices } from '../app-services'
import { pageOf, readCursor } from '../http/cursor'
import { serve } from '../http/route'
import { problem } from '../problem'
import { getSite, sitesSeen } from '../sites-seen'
import { amendDrain } from './amend-drain'
import { askQuestions } from './ask-questions'
import { presentDrain, presentDrainRows, presentMark } from './present-drain'
import { recordDrain } from './record-drain'
import { resolveDrain } from './resolve-drain'
import { reviewMark } from './review-mark'
import { strikeDrain } from './strike-drain'

export function drainRoutes(services: AppServices): Router {
  const router = Router()

  serve(router, services, contracts.listDrains, async (tx, context, { query }) => {
    const cursor = readCursor(query.cursor)
    const found = await listDrainRecords(tx, {
      ...query,
      siteIds: sitesSeen(context, query.siteId),
      before: cursor && { at: new Date(cursor.at), id: cursor.id },
      limit: query.limit + 1,
    })
    const { rows, next } = pageOf(found, query.limit, ({ drain }) => ({
      at: drain.occurredAt.toISOString(),
      id: drain.id,
    }))
    return { rows: await presentDrainRows(tx, rows), next }
  })

  serve(router, services, contracts.readDrain, async (tx, context, { params }) => {
    const by = params.id.startsWith('D-') ? { number: params.id } : { id: params.id }
    const found = await findDrain(tx, by)
    if (found === undefined) throw problem('not-found')
    demand(context, 'read-drains', { siteId: found.siteId })
    return presentDrain(tx, found.id)
  })

  serve(router, services, contracts.askAboutDrain, async (tx, context, { body }) => {
    demand(context, 'record-drain', { siteId: body.siteId })
    const site = await getSite(tx, context, body.siteId)
    const facts = contracts.drainFacts.strip().parse(body)
    const resolved = await resolveDrain(tx, context, site, facts)
    // A phone that lost the answer asks about a drain that is saved already.
    const poured = await listPouredByDrain(tx, body.id)
    return { questions: await askQuestions(tx, body.id, resolved, poured) }
  })

  serve(router, services, contracts.recordDrain, async (tx, context, { body, repeated }) => {
    const { id, isRepeated } = await recordDrain(tx, context, body)
    if (isRepeated) repeated()
    return presentDrain(tx, id)
  })

  serve(router, services, contracts.amendDrain, async (tx, context, { params, body }) => {
    await amendDrain(tx, context, params.id, body)
    return presentDrain(tx, params.id)
  })

  serve(router, services, contracts.strikeDrain, async (tx, context, { params, body }) => {
    await strikeDrain(tx, context, params.id, body)
    return presentDrain(tx, params.id)
  })

  serve(router, services, contracts.listMarks, async (tx, context, { query }) => {
    const cursor = readCursor(query.cursor)
    const found = await listMarkRecords(tx, {
      siteIds: sitesSeen(context, query.siteId),
      isOpen: query.state === 'open',
      before: cursor && { at: new Date(cursor.at), id: cursor.id },
      limit: query.limit + 1,
    })
    const { rows, next } = pageOf(found, query.limit, ({ mark }) => ({
      at: mark.raisedAt.toISOString(),
      id: mark.id,
    }))
    return { rows: rows.map(presentMark), next }
  })

  serve(router, services, contracts.reviewMark, async (tx, context, { params, body }) => {
    await reviewMark(tx, context, params.id, body.note)
    const [after] = await listMarkRecords(tx, { id: params.id })
    if (after === undefined) throw problem('not-found')
    return presentMark(after)
  })
  return router
}
