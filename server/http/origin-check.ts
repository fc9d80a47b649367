import type { RequestHandler } from 'express'
import { AppError } from '../errors.ts'

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS'])

/**
 * Refuses state changes that another site's page sends. Browsers say where a request comes from in `Sec-Fetch-Site`;
 * over plain http they may leave it out, then `Origin` must be ours. Scripts send neither and carry no cookie of a victim.
 */
export const originCheck =
  (appUrl: string): RequestHandler =>
  (req, _res, next) => {
    if (SAFE.has(req.method)) return next()
    const site = req.get('sec-fetch-site')
    const origin = req.get('origin')
    const trusted =
      site !== undefined
        ? site === 'same-origin' || site === 'none'
        : origin === undefined ||
          origin === new URL(appUrl).origin ||
          origin === `${req.protocol}://${req.get('host')}`
    if (!trusted)
      throw new AppError('forbidden', 'That request came from another site, so it was not carried out.')
    next()
  }
