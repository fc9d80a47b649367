import { Router } from 'express'
import { contracts } from '#shared/contracts'
import { openApiDocument } from '#shared/http/openapi'
import { docsPage } from '../http/docs-page.ts'

/** The API described by its own schemas: as OpenAPI for programs, as a page for people. Open to anyone. */
export function docsRoutes(): Router {
  const router = Router()
  let document: string | undefined
  let page: string | undefined
  router.get('/openapi.json', (_req, res) => {
    document ??= JSON.stringify(openApiDocument(contracts))
    res.set('Cache-Control', 'no-cache').type('json').send(document)
  })
  router.get('/docs', (_req, res) => {
    page ??= docsPage(contracts)
    res.set('Cache-Control', 'no-cache').type('html').send(page.replaceAll('__CSP_NONCE__', res.locals.nonce))
  })
  return router
}
