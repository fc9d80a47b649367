import { sessionEndpoints } from '#shared/session/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { startSession, endSession } from '../http/sessions.ts'
import { checkCredentials } from '../services/session.ts'
import { spaceBrief } from '../services/space.ts'

export const sessionRoutes = (deps: Deps) =>
  serve(deps, sessionEndpoints, {
    signIn: async ({ body }, { req, res }) => {
      const member = await checkCredentials(deps, body.email, body.password)
      await startSession(deps, req, member)
      res.locals.user = member
      return { member, space: spaceBrief(deps) }
    },
    current: (_input, { user }) => ({ member: user, space: spaceBrief(deps) }),
    signOut: async (_input, { req, res }) => {
      await endSession(req)
      res.setHeader('Clear-Site-Data', '"cache", "storage"')
    },
    space: () => spaceBrief(deps),
  })
