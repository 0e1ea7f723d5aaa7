import { Router } from 'express'
import { eq } from 'drizzle-orm'
import jwt from 'jsonwebtoken'
import { asService } from '@/db/tenancy'
import { findDocumentByHash } from '@/db/queries/pickups'
import { documents, pickups } from '@/db/schema/pickups'
import { localDay } from '@/shared/calendar'
import * as contracts from '@/shared/contracts/pickups'
import { shownStage } from '@/shared/pickup-stages'
import { demand } from '../act-context'
import type { AppServices } from '../app-services'
import { serve, servePublic } from '../http/route'
import { problem } from '../problem'

const ticketSeconds = 120

/** Documents by a short-lived link, and the check of a paper by anyone who has it. */
export function documentRoutes(services: AppServices): Router {
  const router = Router()

  serve(router, services, contracts.ticketDocument, async (tx, context, { params }) => {
    const [document] = await tx
      .select({ siteId: documents.siteId })
      .from(documents)
      .where(eq(documents.id, params.id))
    if (document === undefined) throw problem('not-found')
    demand(context, 'read-pickups', { siteId: document.siteId })
    const now = Math.floor(context.clock().getTime() / 1000)
    const ticket = jwt.sign({ iat: now, exp: now + ticketSeconds }, services.secret, {
      subject: params.id,
      audience: 'ebbmark-document',
      algorithm: 'HS256',
    })
    return { url: `/api/documents/${params.id}/file?ticket=${ticket}` }
  })

  servePublic(router, services, contracts.readDocument, async (_, { params, query, response }) => {
    try {
      jwt.verify(query.ticket, services.secret, {
        subject: params.id,
        audience: 'ebbmark-document',
        algorithms: ['HS256'],
        clockTimestamp: Math.floor(services.clock().getTime() / 1000),
      })
    } catch {
      throw problem('ticket-expired')
    }
    const found = await asService(services.db, async (tx) => {
      const [document] = await tx
        .select({ bytes: documents.bytes, number: pickups.number })
        .from(documents)
        .innerJoin(pickups, eq(pickups.id, documents.pickupId))
        .where(eq(documents.id, params.id))
      return document
    })
    if (found === undefined) throw problem('not-found')
    // The browser's own viewer draws the PDF in its frame and styles it: nothing else may run here.
    response.set(
      'Content-Security-Policy',
      "default-src 'none'; style-src 'unsafe-inline'; object-src 'self'; frame-ancestors 'self'; base-uri 'none'; form-action 'none'",
    )
    return {
      bytes: found.bytes,
      name: `${found.number ?? 'manifest'}.pdf`,
      disposition: 'inline' as const,
    }
  })

  servePublic(router, services, contracts.verifyDocument, async (_, { params }) => {
    const found = await asService(services.db, (tx) => findDocumentByHash(tx, params.hash))
    if (found === undefined) {
      return {
        matches: false,
        number: null,
        kind: null,
        revision: null,
        madeAt: null,
        isNewest: null,
        stage: null,
        organisation: null,
      }
    }
    const { document, pickup } = found
    return {
      matches: true,
      number: pickup.number,
      kind: document.kind,
      revision: document.revision,
      madeAt: document.madeAt.toISOString(),
      isNewest: document.revision === found.newest,
      stage: shownStage({
        stage: pickup.stage,
        returnDueOn: pickup.returnDueOn,
        hasReceived: pickup.receivedAt !== null,
        today: localDay(services.clock(), found.timeZone),
      }),
      organisation: found.organisation,
    }
  })
  return router
}
