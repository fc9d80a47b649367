import compression from 'compression'
import express, { type Express, type Router } from 'express'
import { speakPlainly } from '#shared/http/messages'
import type { Deps } from './deps.ts'
import { notFound } from './errors.ts'
import { linkLimit, signInLimit } from './http/address-limits.ts'
import { caughtMailPage } from './http/caught-mail-page.ts'
import { errorHandler } from './http/error-handler.ts'
import { securityHeaders } from './http/headers.ts'
import { health } from './http/health.ts'
import { jsonBodies } from './http/json.ts'
import { oneClick } from './http/one-click.ts'
import { originCheck } from './http/origin-check.ts'
import { knowMember, sessionCookie } from './http/sessions.ts'
import { staticClient } from './http/static.ts'
import { batchRoutes } from './routes/batches.ts'
import { docsRoutes } from './routes/docs.ts'
import { larderRoutes, tabRoutes } from './routes/larder.ts'
import { kitRoutes } from './routes/kit.ts'
import { noticeRoutes } from './routes/notices.ts'
import { loanRoutes } from './routes/loans.ts'
import { feedFileRoutes, feedRoutes } from './routes/feed.ts'
import { peopleRoutes } from './routes/people.ts'
import { spaceRoutes } from './routes/space.ts'
import { sessionRoutes } from './routes/session.ts'
import { yeastRoutes } from './routes/yeast.ts'

export interface AppOptions {
  sessionSecret: string
  trustProxy?: number
  /** Serves the client in place of the built files (Vite in development). */
  client?: Router | express.RequestHandler
  dev?: boolean
}

/** The whole application: order of middleware, routes, the error handler. Never listens. */
export function createApp(deps: Deps, options: AppOptions): Express {
  speakPlainly()
  const app = express()
  app.disable('x-powered-by')
  app.set('trust proxy', options.trustProxy ?? 0)
  app.set('query parser', 'simple')
  app.use(securityHeaders({ https: deps.appUrl.startsWith('https:'), dev: options.dev ?? false }))
  app.use(health(deps))
  app.use(compression({ threshold: 1024 }))
  app.use(oneClick(deps))
  app.use(
    '/api',
    originCheck(deps.appUrl),
    jsonBodies,
    sessionCookie(deps, options.sessionSecret),
    knowMember(deps),
  )
  app.use('/api/session', signInLimit())
  app.post(LINKS, linkLimit())
  app.use('/api', docsRoutes(), ...apiRoutes(deps))
  app.use('/api', () => {
    throw notFound('That address')
  })
  app.use(feedFileRoutes(deps))
  app.use('/dev/mail', sessionCookie(deps, options.sessionSecret), knowMember(deps), caughtMailPage(deps))
  app.use(options.client ?? staticClient())
  app.use(errorHandler(deps))
  return app
}

/** Where links are asked for and used. */
const LINKS = [
  '/api/join-requests',
  '/api/invitations/:token/accept',
  '/api/password-resets{/:token}',
  '/api/email-changes/:token',
]

/** Every domain's routes, in no particular order: paths do not overlap. */
const apiRoutes = (deps: Deps): Router[] => [
  sessionRoutes(deps),
  peopleRoutes(deps),
  kitRoutes(deps),
  loanRoutes(deps),
  feedRoutes(deps),
  batchRoutes(deps),
  yeastRoutes(deps),
  spaceRoutes(deps),
  larderRoutes(deps),
  tabRoutes(deps),
  noticeRoutes(deps),
]
