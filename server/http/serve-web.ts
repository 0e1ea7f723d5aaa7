import { join } from 'node:path'
import express, { Router } from 'express'
import expressStaticGzip from 'express-static-gzip'

const aYear = 'public, max-age=31536000, immutable'

/**
 * The built web app: files with a hash in their name for a year, everything else asked for again; fonts from the
 * folder that the PDFs read too; and index.html for every address of the app.
 */
export function serveWeb(folder: string): Router {
  const router = Router()
  router.use(
    '/fonts',
    express.static(join(process.cwd(), 'fonts'), {
      index: false,
      setHeaders: (response) => response.set('Cache-Control', 'public, max-age=604800'),
    }),
  )
  router.use(
    expressStaticGzip(folder, {
      enableBrotli: true,
      orderPreference: ['br', 'gz'],
      index: false,
      serveStatic: {
        index: false,
        setHeaders: (response, path) => {
          const isHashed = /[.-][0-9a-f]{32}\./.test(path)
          response.setHeader('Cache-Control', isHashed ? aYear : 'no-cache')
        },
      },
    }),
  )
  router.get('/{*path}', (request, response, next) => {
    // A missing file is missing; only addresses of the app open it.
    if (/\.\w{1,11}$/.test(request.path) || !request.accepts('html')) next()
    else response.set('Cache-Control', 'no-cache').sendFile(join(folder, 'index.html'))
  })
  return router
}
