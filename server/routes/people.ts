import { peopleEndpoints } from '#shared/people/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { insistOnFresh, sidDigestOf, startSession } from '../http/sessions.ts'
import * as accounts from '../services/accounts.ts'
import { askToJoin, listJoinRequests, turnDown, welcome } from '../services/join-requests.ts'
import { askToLeave } from '../services/erasure.ts'
import { exportOf } from '../services/own-data.ts'
import { endOwnSession, endSessionsOf, ownSessions } from '../services/own-sessions.ts'
import { editMe, editMember, getMember, listMembers, meOf } from '../services/people.ts'
import { spaceBrief } from '../services/space.ts'

export const peopleRoutes = (deps: Deps) =>
  serve(deps, peopleEndpoints, {
    askToJoin: ({ body }) => askToJoin(deps, body),
    joinRequests: ({ query }) => listJoinRequests(deps, query),
    welcome: ({ params }, { user }) => welcome(deps, user, params.id),
    turnDown: ({ params, body }, { user }) => turnDown(deps, user, params.id, body.reason),
    invite: ({ body }, { user }) => accounts.invite(deps, user, body),
    invitation: ({ params }) => ({
      ...accounts.invitationOf(deps, params.token),
      space: spaceBrief(deps).name,
    }),
    accept: async ({ params, body }, { req }) => {
      const member = await accounts.acceptInvitation(deps, params.token, body)
      await startSession(deps, req, member)
      return { member, space: spaceBrief(deps) }
    },
    askReset: ({ body }) => accounts.askReset(deps, body.email),
    reset: ({ params, body }) => accounts.resetPassword(deps, params.token, body.password),
    me: (_input, { user }) => meOf(deps, user.id),
    editMe: ({ body }, { user, version }) => editMe(deps, user.id, version, body),
    changePassword: ({ body }, { user, req }) => accounts.changePassword(deps, user, sidDigestOf(req), body),
    changeEmail: async ({ body }, { user, req }) => {
      await insistOnFresh(deps, req, user, body.password)
      accounts.changeEmail(deps, user, body.email)
    },
    confirmEmail: ({ params }) => accounts.confirmEmail(deps, params.token),
    mySessions: (_input, { user, req }) => ownSessions(deps, user.id, sidDigestOf(req)),
    endSession: ({ params }, { user }) => endOwnSession(deps, user.id, params.id),
    exportMe: (_input, { user }) => exportOf(deps, user.id),
    eraseMe: async ({ body }, { user, req }) => {
      await insistOnFresh(deps, req, user, body.password)
      return askToLeave(deps, user)
    },
    members: ({ query }) => listMembers(deps, query),
    member: ({ params }) => getMember(deps, params.id),
    editMember: ({ params, body }, { user, version }) => editMember(deps, user, params.id, version, body),
    endMemberSessions: ({ params }) => {
      getMember(deps, params.id)
      endSessionsOf(deps, params.id)
    },
  })
