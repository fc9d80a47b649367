import { index, sqliteTable, text, uniqueIndex, integer } from 'drizzle-orm/sqlite-core'
import { MEMBER_STATUSES, ROLES } from '#shared/people/vocabulary'
import { createdAt, day, id, instant, updatedAt, version } from './columns.ts'

export const members = sqliteTable(
  'members',
  {
    id: id(),
    name: text('name').notNull(),
    email: text('email').notNull(),
    phone: text('phone'),
    role: text('role', { enum: ROLES }).notNull(),
    status: text('status', { enum: MEMBER_STATUSES }).notNull(),
    /** PHC string; null until an invitation is accepted. */
    passwordHash: text('password_hash'),
    /** The day the account is erased, once its owner asked to leave; until then that can be undone. */
    eraseOn: day('erase_on'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [uniqueIndex('members_email').on(t.email)],
)

/** One row per signed-in browser. The key is a digest: the file alone opens no session. */
export const sessions = sqliteTable(
  'sessions',
  {
    sidDigest: text('sid_digest').primaryKey(),
    memberId: text('member_id').references(() => members.id, { onDelete: 'cascade' }),
    data: text('data').notNull(),
    /** Browser and system in a few words, for the owner's own list. */
    device: text('device').notNull().default(''),
    createdAt: createdAt(),
    seenAt: instant('seen_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
  },
  (t) => [index('sessions_member').on(t.memberId), index('sessions_expiry').on(t.expiresAt)],
)

/** Failed tries per key (an account, an address), kept across restarts. */
export const throttles = sqliteTable('throttles', {
  key: text('key').primaryKey(),
  failures: integer('failures').notNull(),
  windowStartedAt: instant('window_started_at').notNull(),
  blockedUntil: instant('blocked_until'),
})

/** First answers to creating requests, by the caller's key; kept 48 hours. */
export const idempotencyKeys = sqliteTable(
  'idempotency_keys',
  {
    /** Digest of member, route and key. */
    id: id(),
    requestDigest: text('request_digest').notNull(),
    /** Null while the first request still runs. */
    status: integer('status'),
    body: text('body'),
    createdAt: createdAt(),
  },
  (t) => [index('idempotency_keys_age').on(t.createdAt)],
)
