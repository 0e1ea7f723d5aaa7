import { Router } from 'express'
import { listContainersWithContents } from '@/db/queries/containers'
import { listContainersOfLegs } from '@/db/queries/drains'
import * as contracts from '@/shared/contracts/containers'
import { toLitres } from '@/shared/quantities/convert'
import type { AppServices } from '../app-services'
import { serve } from '../http/route'
import { sitesSeen } from '../sites-seen'
import { holdContainer, releaseContainer } from './hold-container'
import { presentContainerDetail, presentContainers } from './present-container'
import { readYardOf } from './read-yard'
import { recordTransfer } from './record-transfer'

export function containerRoutes(services: AppServices): Router {
  const router = Router()

  serve(router, services, contracts.readYard, (tx, context, { query }) =>
    readYardOf(tx, context, query.siteId),
  )

  serve(router, services, contracts.listContainers, async (tx, context, { query }) => {
    const found = await listContainersWithContents(tx, {
      siteIds: sitesSeen(context, query.siteId),
      streamId: query.streamId,
      isRetired: query.retired === 'yes',
    })
    return { rows: await presentContainers(tx, found, context.clock()) }
  })

  serve(router, services, contracts.readContainer, async (tx, context, { params, query }) => {
    const by = params.id.length === 36 ? { id: params.id } : { code: params.id }
    return presentContainerDetail(tx, by, sitesSeen(context), context.clock(), query.lines)
  })

  serve(router, services, contracts.holdContainer, async (tx, context, { params, body }) => {
    await holdContainer(tx, context, params.id, body)
    return presentContainerDetail(tx, params, sitesSeen(context), context.clock())
  })

  serve(router, services, contracts.releaseContainer, async (tx, context, { params, body }) => {
    await releaseContainer(tx, context, params.id, body.note)
    return presentContainerDetail(tx, params, sitesSeen(context), context.clock())
  })

  serve(router, services, contracts.recordTransfer, async (tx, context, { body, repeated }) => {
    const { isRepeated, recordedAt } = await recordTransfer(tx, context, body)
    if (isRepeated) repeated()
    const found = await listContainersOfLegs(tx, [body.fromContainerId, body.toContainerId])
    const coded = (id: string) => ({
      id,
      code: found.find(({ container }) => container.id === id)?.container.code ?? '',
    })
    return {
      id: body.id,
      siteId: body.siteId,
      from: coded(body.fromContainerId),
      to: coded(body.toContainerId),
      volume: body.volume,
      litres: toLitres(body.volume.value, body.volume.unit),
      recordedAt: recordedAt.toISOString(),
    }
  })
  return router
}
