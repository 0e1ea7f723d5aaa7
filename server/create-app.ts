import { existsSync } from 'node:fs'
import { join } from 'node:path'
import cookieParser from 'cookie-parser'
import express, { Router, type Express, type RequestHandler } from 'express'
import helmet from 'helmet'
import { pinoHttp } from 'pino-http'
import type { AppServices } from './app-services'
import { bookRoutes } from './books/routes'
import { containerRoutes } from './containers/routes'
import { documentRoutes } from './documents/routes'
import { drainRoutes } from './drains/routes'
import { errorForLog } from './error-for-log'
import { readBearer } from './http/authenticate'
import { healthRoutes } from './http/health-routes'
import { refuseOtherContent, refuseOtherMethods } from './http/refusals'
import { openApiRoute } from './http/openapi-route'
import { sendProblem } from './http/problems'
import { rateLimits, type RateSettings } from './http/rate-limits'
import { serveWeb } from './http/serve-web'
import { limitRoutes } from './limits/routes'
import { mailRoutes } from './mail/routes'
import { sessionRoutes } from './people/session-routes'
import { pickupRoutes } from './pickups/routes'
import { problem } from './problem'
import { setUpRoutes } from './set-up/routes'

export type AppSettings = {
  /** Folder of the built web app; null serves the API alone (tests). */
  webFolder: string | null
  proxies: number
  rates: RateSettings
}

/** The whole product as one Express application; everything it needs is handed in. */
export function createApp(services: AppServices, settings: AppSettings): Express {
  const app = express()
  app.disable('x-powered-by')
  app.set('trust proxy', settings.proxies)
  app.set('query parser', 'simple')
  app.use(requestLog(services))
  app.use(securityHeaders())
  app.use('/api', api(services, settings))
  if (settings.webFolder !== null) {
    if (!existsSync(join(settings.webFolder, 'index.html')))
      throw new Error(`${settings.webFolder} holds no built web app`)
    app.use(serveWeb(settings.webFolder))
  }
  app.use((_request, _response, next) => next(problem('not-found')))
  app.use(sendProblem)
  return app
}

function api(services: AppServices, settings: AppSettings): Router {
  const router = Router()
  router.use(rateLimits(settings.rates))
  router.use(refuseOtherContent)
  // 1 MB: a drawn signature is the largest thing sent as JSON.
  router.use(express.json({ limit: '1mb', strict: true }))
  router.use(cookieParser())
  router.use(readBearer(services.secret, services.clock))
  router.use(healthRoutes(services))
  router.use(openApiRoute())
  router.use(sessionRoutes(services))
  router.use(setUpRoutes(services))
  router.use(drainRoutes(services))
  router.use(containerRoutes(services))
  router.use(pickupRoutes(services))
  router.use(documentRoutes(services))
  router.use(bookRoutes(services))
  router.use(limitRoutes(services))
  router.use(mailRoutes(services))
  router.use(refuseOtherMethods)
  return router
}

/** What is asked and how it ended: never a token, a cookie, a password or a document's ticket. */
function requestLog(services: AppServices): RequestHandler {
  return pinoHttp({
    logger: services.log,
    genReqId: () => services.newId(),
    serializers: {
      req: (request: { id: string; method: string; url: string }) => ({
        id: request.id,
        method: request.method,
        url: request.url.replace(/([?&]ticket=)[^&]*/, '$1…'),
      }),
      res: (response: { statusCode: number }) => ({ status: response.statusCode }),
      err: (error: { raw?: unknown }) => errorForLog(error.raw ?? error),
    },
    customLogLevel: (_request, response, error) =>
      error !== undefined || response.statusCode >= 500
        ? 'error'
        : response.statusCode >= 400
          ? 'info'
          : 'debug',
  })
}

function securityHeaders(): RequestHandler {
  const headers = helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        // React Native Web writes its sheet into a style element and positions with style attributes.
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        workerSrc: ["'self'"],
        manifestSrc: ["'self'"],
        objectSrc: ["'none'"],
        frameAncestors: ["'none'"],
        baseUri: ["'self'"],
        formAction: ["'self'"],
      },
    },
    referrerPolicy: { policy: 'no-referrer' },
    // Behind plain http in a yard this header would lock people out; whoever ends TLS in front sets it there.
    strictTransportSecurity: false,
  })
  return (request, response, next) => {
    response.set('Permissions-Policy', 'camera=(self), geolocation=(), microphone=(), payment=()')
    headers(request, response, next)
  }
}
