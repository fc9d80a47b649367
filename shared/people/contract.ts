import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Email, Id, line, prose, Version } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { Session } from '../session/contract.ts'
import { CalendarDay } from '../time/day.ts'
import { PASSWORD_MAX } from './passwords.ts'
import { JOIN_REQUEST_STATUSES, MEMBER_STATUSES, ROLES } from './vocabulary.ts'

const Name = line(80)
const Phone = z
  .string()
  .trim()
  .max(40, 'Keep it to 40 characters.')
  .regex(/^[+\d][\d\s()+-]*$/, 'Use digits and spaces.')
const Password = z.string().min(1, 'Write a password.').max(PASSWORD_MAX)
const Token = z.string().regex(/^[A-Za-z0-9_-]{20,100}$/)

/** What one member sees of themselves. */
export const Me = z.object({
  id: Id,
  name: z.string(),
  email: z.string(),
  phone: z.string().nullable(),
  role: z.enum(ROLES),
  status: z.enum(MEMBER_STATUSES),
  memberSince: z.string(),
  /** An address waiting to be confirmed by a link sent to it. */
  pendingEmail: z.string().nullable(),
  secondFactor: z.boolean(),
  calendarFeed: z.boolean(),
  /** The day the account goes, while that can still be undone. */
  erasedOn: CalendarDay.nullable(),
  version: Version,
})
export type Me = z.output<typeof Me>

/** What stewards see of members. */
export const Member = z.object({
  id: Id,
  name: z.string(),
  email: z.string(),
  phone: z.string().nullable(),
  role: z.enum(ROLES),
  status: z.enum(MEMBER_STATUSES),
  memberSince: z.string(),
  loansOut: z.int(),
  overdue: z.int(),
  version: Version,
})
export type Member = z.output<typeof Member>

export const JoinRequest = z.object({
  id: Id,
  name: z.string(),
  email: z.string(),
  note: z.string().nullable(),
  status: z.enum(JOIN_REQUEST_STATUSES),
  askedAt: z.string(),
})
export type JoinRequest = z.output<typeof JoinRequest>

export const Invitation = z.object({
  id: Id,
  email: z.string(),
  name: z.string().nullable(),
  role: z.enum(ROLES),
  expiresAt: z.string(),
})
export type Invitation = z.output<typeof Invitation>

const OwnSession = z.object({
  id: z.string(),
  startedAt: z.string(),
  seenAt: z.string(),
  /** Browser and system in a few words, as the browser says it. */
  device: z.string(),
  current: z.boolean(),
})
export type OwnSession = z.output<typeof OwnSession>

export const JoinRequestBody = z.strictObject({ name: Name, email: Email, note: prose(500).optional() })
export const AcceptBody = z.strictObject({ name: Name, password: Password })

export const peopleEndpoints = {
  askToJoin: endpoint({
    method: 'POST',
    path: '/join-requests',
    access: 'anyone',
    summary: 'Ask to join the space; a steward answers by e-mail.',
    status: 202,
    body: JoinRequestBody,
    reply: null,
  }),
  joinRequests: endpoint({
    method: 'GET',
    path: '/join-requests',
    access: 'steward',
    summary: 'Who asked to join and waits for an answer.',
    query: z.object({ ...pageQuery, status: z.enum(JOIN_REQUEST_STATUSES).optional() }),
    reply: pageOf(JoinRequest),
  }),
  welcome: endpoint({
    method: 'POST',
    path: '/join-requests/:id/welcome',
    access: 'steward',
    summary: 'Say yes: sends an invitation for a member.',
    params: z.object({ id: Id }),
    reply: JoinRequest,
  }),
  turnDown: endpoint({
    method: 'POST',
    path: '/join-requests/:id/decline',
    access: 'steward',
    summary: 'Say no; the reason goes to the person by e-mail.',
    params: z.object({ id: Id }),
    body: z.strictObject({ reason: line(300) }),
    reply: JoinRequest,
  }),
  invite: endpoint({
    method: 'POST',
    path: '/invitations',
    access: 'admin',
    summary: 'Invite somebody by e-mail; the link holds for 72 hours.',
    status: 201,
    creates: 'sync',
    body: z.strictObject({ email: Email, name: Name.optional(), role: z.enum(ROLES).default('member') }),
    reply: Invitation,
  }),
  invitation: endpoint({
    method: 'GET',
    path: '/invitations/:token',
    access: 'anyone',
    summary: 'Whom an invitation is for, while it holds.',
    params: z.object({ token: Token }),
    reply: z.object({ email: z.string(), name: z.string().nullable(), space: z.string() }),
  }),
  accept: endpoint({
    method: 'POST',
    path: '/invitations/:token/accept',
    access: 'anyone',
    summary: 'Accept an invitation with a name and a password; signs in.',
    status: 201,
    params: z.object({ token: Token }),
    body: AcceptBody,
    reply: Session,
  }),
  askReset: endpoint({
    method: 'POST',
    path: '/password-resets',
    access: 'anyone',
    summary: 'Ask for a reset link. The answer is the same for every address.',
    status: 202,
    body: z.strictObject({ email: Email }),
    reply: null,
  }),
  reset: endpoint({
    method: 'POST',
    path: '/password-resets/:token',
    access: 'anyone',
    summary: 'Set a new password by a reset link; ends every session.',
    status: 204,
    params: z.object({ token: Token }),
    body: z.strictObject({ password: Password }),
    reply: null,
  }),
  me: endpoint({
    method: 'GET',
    path: '/me',
    access: 'member',
    summary: 'Your own account.',
    reply: Me,
  }),
  editMe: endpoint({
    method: 'PATCH',
    path: '/me',
    access: 'member',
    summary: 'Change your name or telephone number.',
    versioned: true,
    whileSuspended: true,
    body: z.strictObject({ name: Name.optional(), phone: Phone.nullable().optional() }),
    reply: Me,
  }),
  changePassword: endpoint({
    method: 'POST',
    path: '/me/password',
    access: 'member',
    summary: 'Change your password by giving the old one; ends your other sessions.',
    whileSuspended: true,
    status: 204,
    body: z.strictObject({ current: Password, password: Password }),
    reply: null,
  }),
  changeEmail: endpoint({
    method: 'POST',
    path: '/me/email',
    access: 'member',
    summary: 'Ask for another e-mail address; it counts once confirmed by a link sent there.',
    whileSuspended: true,
    status: 202,
    body: z.strictObject({ email: Email, password: Password.optional() }),
    reply: null,
  }),
  confirmEmail: endpoint({
    method: 'POST',
    path: '/email-changes/:token',
    access: 'anyone',
    summary: 'Confirm a new e-mail address by the link sent to it.',
    status: 204,
    params: z.object({ token: Token }),
    reply: null,
  }),
  mySessions: endpoint({
    method: 'GET',
    path: '/me/sessions',
    access: 'member',
    summary: 'Where you are signed in.',
    reply: z.object({ items: z.array(OwnSession) }),
  }),
  endSession: endpoint({
    method: 'DELETE',
    path: '/me/sessions/:id',
    access: 'member',
    summary: 'Sign out one of your browsers.',
    whileSuspended: true,
    status: 204,
    params: z.object({ id: Id }),
    reply: null,
  }),
  exportMe: endpoint({
    method: 'GET',
    path: '/me/export',
    access: 'member',
    summary: 'Everything the space holds about you, as JSON.',
    reply: z.looseObject({ exportedAt: z.string(), member: z.looseObject({ id: Id }) }),
  }),
  eraseMe: endpoint({
    method: 'DELETE',
    path: '/me',
    access: 'member',
    summary: 'Leave: the account stops at once and is erased after 14 days. Open loans must be back first.',
    whileSuspended: true,
    body: z.strictObject({ password: Password.optional() }),
    reply: z.object({ erasedOn: CalendarDay }),
  }),
  members: endpoint({
    method: 'GET',
    path: '/members',
    access: 'steward',
    summary: 'Members with how to reach them.',
    query: z.object({
      ...pageQuery,
      q: z.string().trim().max(80).optional(),
      role: z.enum(ROLES).optional(),
      status: z.enum(MEMBER_STATUSES).optional(),
    }),
    reply: pageOf(Member),
  }),
  member: endpoint({
    method: 'GET',
    path: '/members/:id',
    access: 'steward',
    summary: 'One member.',
    params: z.object({ id: Id }),
    reply: Member,
  }),
  editMember: endpoint({
    method: 'PATCH',
    path: '/members/:id',
    access: 'admin',
    summary: 'Change a member’s role, or suspend them.',
    versioned: true,
    params: z.object({ id: Id }),
    body: z.strictObject({
      role: z.enum(ROLES).optional(),
      status: z.enum(['active', 'suspended']).optional(),
    }),
    reply: Member,
  }),
  endMemberSessions: endpoint({
    method: 'DELETE',
    path: '/members/:id/sessions',
    access: 'admin',
    summary: 'Sign a member out everywhere.',
    status: 204,
    params: z.object({ id: Id }),
    reply: null,
  }),
}
