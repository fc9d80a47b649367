import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, Version } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { LETTER_STATUSES, OPTIONAL_NOTICES } from './vocabulary.ts'

const Token = z.string().regex(/^[A-Za-z0-9_-]{20,100}$/)

/** One kind of letter that a member may switch off. */
const Choice = z.object({ kind: z.enum(OPTIONAL_NOTICES), name: z.string(), on: z.boolean() })

export const NoticePreferences = z.object({
  choices: z.array(Choice),
  /** Names of the letters that are always sent. */
  always: z.array(z.string()),
  version: Version,
})
export type NoticePreferences = z.output<typeof NoticePreferences>

/** `{ "batch-step-due": false }` switches one off and leaves the rest. */
const PreferencesChange = z.strictObject(
  Object.fromEntries(OPTIONAL_NOTICES.map((kind) => [kind, z.boolean().optional()])) as Record<
    (typeof OPTIONAL_NOTICES)[number],
    z.ZodOptional<z.ZodBoolean>
  >,
)
export type PreferencesChange = z.output<typeof PreferencesChange>

const LetterRow = z.object({
  id: Id,
  kind: z.string(),
  name: z.string(),
  memberId: z.string().nullable(),
  memberName: z.string().nullable(),
  /** Where it went or, while it waits, would go. */
  to: z.string(),
  subject: z.string(),
  status: z.enum(LETTER_STATUSES),
  queuedAt: z.string(),
  /** When it is tried next; null once it is over. */
  nextTryAt: z.string().nullable(),
  sentAt: z.string().nullable(),
  tries: z.int(),
  lastError: z.string().nullable(),
})
export type LetterRow = z.output<typeof LetterRow>

export const LetterInFull = LetterRow.extend({
  text: z.string(),
  html: z.string(),
  messageId: z.string(),
  usefulUntil: z.string(),
})
export type LetterInFull = z.output<typeof LetterInFull>

const CaughtRow = z.object({ id: Id, receivedAt: z.string(), to: z.string(), subject: z.string() })
export type CaughtRow = z.output<typeof CaughtRow>

export const CaughtLetter = CaughtRow.extend({
  from: z.string(),
  messageId: z.string().nullable(),
  headers: z.array(z.tuple([z.string(), z.string()])),
  text: z.string(),
  html: z.string(),
})
export type CaughtLetter = z.output<typeof CaughtLetter>

const Stopped = z.object({ kind: z.enum(OPTIONAL_NOTICES), name: z.string(), on: z.boolean() })

export const noticeEndpoints = {
  preferences: endpoint({
    method: 'GET',
    path: '/me/notices',
    access: 'member',
    summary: 'Which letters you get.',
    reply: NoticePreferences,
  }),
  choose: endpoint({
    method: 'PATCH',
    path: '/me/notices',
    access: 'member',
    whileSuspended: true,
    summary: 'Switch optional letters on or off. Decisions and return reminders are always sent.',
    versioned: true,
    body: PreferencesChange,
    reply: NoticePreferences,
  }),
  letters: endpoint({
    method: 'GET',
    path: '/letters',
    access: 'admin',
    summary: 'The mail record, newest first.',
    query: z.object({
      status: z.enum(LETTER_STATUSES).optional(),
      q: z.string().trim().max(100).optional(),
      ...pageQuery,
    }),
    reply: pageOf(LetterRow),
  }),
  letter: endpoint({
    method: 'GET',
    path: '/letters/:id',
    access: 'admin',
    summary: 'One letter as it was sent. Private links are not shown.',
    params: z.object({ id: Id }),
    reply: LetterInFull,
  }),
  retry: endpoint({
    method: 'POST',
    path: '/letters/:id/retry',
    access: 'admin',
    summary: 'Try a letter again that failed, was set aside or is waiting.',
    params: z.object({ id: Id }),
    reply: LetterInFull,
  }),
  stopInfo: endpoint({
    method: 'GET',
    path: '/unsubscribe/:token',
    access: 'anyone',
    summary: 'Which letters a link would stop. Changes nothing.',
    params: z.object({ token: Token }),
    reply: Stopped,
  }),
  stop: endpoint({
    method: 'POST',
    path: '/unsubscribe/:token',
    access: 'anyone',
    summary: 'Stop one kind of letter by its link, signed in or not (RFC 8058).',
    params: z.object({ token: Token }),
    reply: Stopped,
  }),
  caught: endpoint({
    method: 'GET',
    path: '/dev/mail',
    access: 'admin',
    summary: 'Letters the local catcher took, newest first. Not there when a relay is named.',
    query: z.object({ ...pageQuery }),
    reply: pageOf(CaughtRow),
  }),
  caughtLetter: endpoint({
    method: 'GET',
    path: '/dev/mail/:id',
    access: 'admin',
    summary: 'One caught letter, with its headers.',
    params: z.object({ id: Id }),
    reply: CaughtLetter,
  }),
}
