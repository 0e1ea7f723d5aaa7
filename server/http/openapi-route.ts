import { Router } from 'express'

/** The OpenAPI document, made from the contracts when it is first asked for. */
export function openApiRoute(): Router {
  const router = Router()
  let document: string | undefined
  router.get('/openapi.json', async (_request, response) => {
    if (document === undefined) {
      const { openApiDocument } = await import('./openapi-document')
      document = JSON.stringify(openApiDocument())
    }
    response.type('application/json').set('Cache-Control', 'no-cache').send(document)
  })
  return router
}
