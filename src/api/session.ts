import type { sessionEndpoints } from '#shared/session/contract'
import { type Route, createLightClient } from './client.ts'

/** The routes of the session contract without its schemas: the shell needs only these on a first visit. */
export const SESSION_ROUTES = {
  signIn: { method: 'POST', path: '/session', access: 'anyone', reply: true },
  current: { method: 'GET', path: '/session', access: 'member', reply: true },
  signOut: { method: 'DELETE', path: '/session', access: 'anyone', reply: null },
  space: { method: 'GET', path: '/space/brief', access: 'anyone', reply: true },
} as const satisfies Record<keyof typeof sessionEndpoints, Route>

export const sessionApi = createLightClient<typeof sessionEndpoints>(SESSION_ROUTES)
