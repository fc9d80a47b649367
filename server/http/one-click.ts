import { Router } from 'express'
import type { Deps } from '../deps.ts'
import { stopByLink } from '../services/notice-preferences.ts'

/**
 * What a mail program posts when someone presses its own "unsubscribe" (RFC 8058): a form, from its own servers, without a cookie, to
 * the very address that shows a page when opened. It stops the letters and answers; it never redirects.
 */
export function oneClick(deps: Deps): Router {
  const router = Router()
  router.post(['/unsubscribe/:token', '/api/unsubscribe/:token'], (req, res, next) => {
    const isForm = req.is('application/x-www-form-urlencoded') || req.is('multipart/form-data')
    if (req.path.startsWith('/api/') && !isForm) return next()
    const { name } = stopByLink(deps, String(req.params.token))
    res.set('Cache-Control', 'no-store').type('text').send(`Stopped: ${name}`)
  })
  return router
}
