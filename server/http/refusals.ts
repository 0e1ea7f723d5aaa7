import type { RequestHandler } from 'express'
import { allContracts } from '@/shared/contracts/all-contracts'
import { problem } from '../problem'

/** A body that is not JSON is refused before anybody tries to read it. */
export const refuseOtherContent: RequestHandler = (request, _response, next) => {
  const hasBody =
    request.headers['transfer-encoding'] !== undefined ||
    Number(request.get('Content-Length') ?? 0) > 0
  const isJson = request.is('application/json')
  next(hasBody && isJson === false ? problem('unsupported-media-type') : undefined)
}

/** An address that exists answers another method with 405 and the methods it takes; any other with 404. */
export const refuseOtherMethods: RequestHandler = (request, response, next) => {
  const methods = allContracts
    .filter(({ path }) =>
      new RegExp(`^${path.replace(/:\w+/g, '[^/]+').replace('.', '\\.')}$`).test(request.path),
    )
    .map(({ method }) => method.toUpperCase())
  if (methods.length === 0) {
    next(problem('not-found'))
    return
  }
  response.set('Allow', [...new Set(methods)].join(', '))
  next(problem('method-not-allowed'))
}
