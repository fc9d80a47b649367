import { index, integer, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core'
import {
  LETTER_FAILURES,
  LETTER_STATUSES,
  LETTER_SUBJECTS,
  type OptionalNotice,
} from '#shared/notices/vocabulary'
import { createdAt, day, id, instant, updatedAt, version } from './columns.ts'
import { members } from './people.ts'

/** The outbox: one row a letter, written in the transaction of what it reports, sent later by the worker. */
export const letters = sqliteTable(
  'letters',
  {
    id: id(),
    /** Says which letter this is, so that it is written once: `loan-overdue:<loan>:<return-by day>:3`. */
    dedupeKey: text('dedupe_key').notNull(),
    kind: text('kind').notNull(),
    /** Null only for people who are not members yet; then `to_address` is given. */
    memberId: text('member_id').references(() => members.id, { onDelete: 'cascade' }),
    /** For a member: null until sent, then where it really went. */
    toAddress: text('to_address'),
    aboutType: text('about_type', { enum: LETTER_SUBJECTS }),
    aboutId: text('about_id'),
    /** The day the letter speaks of; a reminder whose loan has another return-by day by now is not sent. */
    aboutOn: day('about_on'),
    subject: text('subject').notNull(),
    text: text('text').notNull(),
    html: text('html').notNull(),
    /** Fixed, so that a letter sent twice by a crash is still the same letter. */
    messageId: text('message_id').notNull(),
    inReplyTo: text('in_reply_to'),
    queuedAt: instant('queued_at').notNull(),
    sendAfter: instant('send_after').notNull(),
    usefulUntil: instant('useful_until').notNull(),
    leasedUntil: instant('leased_until'),
    tries: integer('tries').notNull().default(0),
    failure: text('failure', { enum: LETTER_FAILURES }),
    lastError: text('last_error'),
    status: text('status', { enum: LETTER_STATUSES }).notNull(),
    sentAt: instant('sent_at'),
  },
  (t) => [
    uniqueIndex('letters_dedupe').on(t.dedupeKey),
    index('letters_due').on(t.status, t.sendAfter),
    index('letters_member').on(t.memberId),
    index('letters_about').on(t.aboutType, t.aboutId, t.queuedAt),
    index('letters_newest').on(t.queuedAt, t.id),
  ],
)

/** What a member has switched off; no row means nothing. */
export const noticePreferences = sqliteTable('notice_preferences', {
  memberId: text('member_id')
    .primaryKey()
    .references(() => members.id, { onDelete: 'cascade' }),
  off: text('off', { mode: 'json' }).$type<OptionalNotice[]>().notNull(),
  updatedAt: updatedAt(),
  version: version(),
})

/** A link that stops one kind of letter for one member, and can do nothing else. */
export const unsubscribeTokens = sqliteTable(
  'unsubscribe_tokens',
  {
    tokenDigest: text('token_digest').primaryKey(),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id, { onDelete: 'cascade' }),
    kind: text('kind').$type<OptionalNotice>().notNull(),
    createdAt: createdAt(),
  },
  (t) => [index('unsubscribe_tokens_member').on(t.memberId), index('unsubscribe_tokens_age').on(t.createdAt)],
)

/** What the local catcher took in place of a real relay. Only the newest are kept. */
export const caughtLetters = sqliteTable(
  'caught_letters',
  {
    id: id(),
    receivedAt: instant('received_at').notNull(),
    envelopeFrom: text('envelope_from').notNull(),
    envelopeTo: text('envelope_to').notNull(),
    messageId: text('message_id'),
    subject: text('subject').notNull(),
    headers: text('headers', { mode: 'json' }).$type<[name: string, value: string][]>().notNull(),
    text: text('text').notNull(),
    html: text('html').notNull(),
  },
  (t) => [index('caught_letters_age').on(t.receivedAt, t.id)],
)

/** Mornings on which the digests were written, or there was nothing to write. */
export const noticeRounds = sqliteTable('notice_rounds', {
  roundOn: day('round_on').primaryKey(),
  doneAt: instant('done_at').notNull(),
})
