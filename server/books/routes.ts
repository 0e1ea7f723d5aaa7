import { Router } from 'express'
import { listYearsWithLines } from '@/db/queries/totals'
import * as contracts from '@/shared/contracts/books'
import type { AppServices } from '../app-services'
import { checkBook } from '../book/check-book'
import { serve } from '../http/route'
import { sitesSeen } from '../sites-seen'
import { listBookLinesOf } from './book-lines'
import { readTotalsOf } from './totals'

export function bookRoutes(services: AppServices): Router {
  const router = Router()
  serve(router, services, contracts.readTotals, (tx, context, { query }) =>
    readTotalsOf(tx, context, query),
  )
  serve(router, services, contracts.listYears, async (tx, context, { query }) => ({
    years: await listYearsWithLines(tx, sitesSeen(context, query.siteId)),
  }))
  serve(router, services, contracts.listBookLines, (tx, context, { query }) =>
    listBookLinesOf(tx, context, query),
  )
  serve(router, services, contracts.exportTotals, async (tx, context, { query }) => {
    const { totalsCsv } = await import('./export-books')
    return {
      bytes: await totalsCsv(tx, context, query),
      name: `ebbmark-totals-${query.year}-by-${query.by}.csv`,
      disposition: 'attachment' as const,
    }
  })
  serve(router, services, contracts.exportLines, async (tx, context, { query }) => {
    const { linesCsv } = await import('./export-books')
    return {
      bytes: await linesCsv(tx, context, query),
      name: `ebbmark-lines-${query.year}.csv`,
      disposition: 'attachment' as const,
    }
  })
  serve(router, services, contracts.readBookCheck, async (tx, context) => ({
    ...(await checkBook(tx)),
    checkedAt: context.clock().toISOString(),
  }))
  return router
}
