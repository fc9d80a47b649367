import { feedEndpoints, feedFileEndpoints } from '#shared/loans/feed-contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { digest } from '../ids.ts'
import { makeFeed, readFeed, revokeFeed } from '../services/feed.ts'

export const feedRoutes = (deps: Deps) =>
  serve(deps, feedEndpoints, {
    makeFeed: (_input, { user }) => makeFeed(deps, user.id),
    revokeFeed: (_input, { user }) => revokeFeed(deps, user.id),
  })

/** Mounted at the root: calendar programs bring no cookie. */
export const feedFileRoutes = (deps: Deps) =>
  serve(deps, feedFileEndpoints, {
    feed: ({ params }, { res }) => {
      res.setHeader('X-Robots-Tag', 'noindex')
      const body = readFeed(deps, params.file.slice(0, -'.ics'.length))
      return {
        body,
        type: 'text/calendar; charset=utf-8',
        etag: `"${digest(body).slice(0, 27)}"`,
        cacheControl: 'private, no-cache',
      }
    },
  })
