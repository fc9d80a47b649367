import { sessionEndpoints } from '#shared/session/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { startSession, endSession } from '../http/sessions.ts'
import { checkCredentials, spaceBrief } from '../services/session.ts'

export const sessionRoutes = (deps: Deps) =>
  serve(deps, sessionEndpoints, {
    signIn: async ({ body }, { req }) => {
      const member = await checkCredentials(deps, body.email, body.password)
      await startSession(deps, req, member)
      return { member, space: spaceBrief(deps) }
    },
    current: (_input, { user }) => ({ member: user, space: spaceBrief(deps) }),
    signOut: async (_input, { req, res }) => {
      await endSession(req)
      res.setHeader('Clear-Site-Data', '"cache", "storage"')
    },
    space: () => spaceBrief(deps),
  })
