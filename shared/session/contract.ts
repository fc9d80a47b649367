import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id } from '../http/fields.ts'
import { PASSWORD_MAX } from '../people/passwords.ts'
import { MEMBER_STATUSES, ROLES } from '../people/vocabulary.ts'

export const SignedInMember = z.object({
  id: Id,
  name: z.string(),
  email: z.string(),
  role: z.enum(ROLES),
  status: z.enum(MEMBER_STATUSES),
})
export type SignedInMember = z.output<typeof SignedInMember>

/** What the app needs to know before it draws anything. */
export const SpaceBrief = z.object({
  name: z.string(),
  timeZone: z.string(),
  currency: z.string(),
  demo: z.boolean(),
  today: z.string(),
})
export type SpaceBrief = z.output<typeof SpaceBrief>

export const Session = z.object({ member: SignedInMember, space: SpaceBrief })
export type Session = z.output<typeof Session>

export const Credentials = z.strictObject({
  email: z.string().trim().min(1, 'Write your e-mail address.').max(254),
  password: z.string().min(1, 'Write your password.').max(PASSWORD_MAX),
})

export const sessionEndpoints = {
  signIn: endpoint({
    method: 'POST',
    path: '/session',
    access: 'anyone',
    summary: 'Sign in: starts a cookie session.',
    audited: true,
    body: Credentials,
    reply: Session,
  }),
  current: endpoint({
    method: 'GET',
    path: '/session',
    access: 'member',
    summary: 'Who is signed in, and which space this is.',
    reply: Session,
  }),
  signOut: endpoint({
    method: 'DELETE',
    path: '/session',
    access: 'anyone',
    summary: 'Sign out: ends this session on the server.',
    status: 204,
    reply: null,
  }),
  space: endpoint({
    method: 'GET',
    path: '/space/brief',
    access: 'anyone',
    summary: 'The name of the space and whether it is a demo.',
    reply: SpaceBrief,
  }),
}
