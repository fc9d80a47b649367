import { index, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core'
import { JOIN_REQUEST_STATUSES, ROLES, TOKEN_PURPOSES } from '#shared/people/vocabulary'
import { createdAt, id, instant } from './columns.ts'
import { members } from './people.ts'

/** Links sent by mail that do one thing once. Only a digest is kept; used ones stay until swept. */
export const tokens = sqliteTable(
  'tokens',
  {
    id: id(),
    purpose: text('purpose', { enum: TOKEN_PURPOSES }).notNull(),
    digest: text('digest').notNull(),
    /** Whose account it acts on; null for an invitation, which makes one. */
    memberId: text('member_id').references(() => members.id, { onDelete: 'cascade' }),
    email: text('email').notNull(),
    name: text('name'),
    role: text('role', { enum: ROLES }),
    expiresAt: instant('expires_at').notNull(),
    usedAt: instant('used_at'),
    createdBy: text('created_by').references(() => members.id),
    createdAt: createdAt(),
  },
  (t) => [
    uniqueIndex('tokens_digest').on(t.digest),
    index('tokens_member').on(t.memberId, t.purpose),
    index('tokens_email').on(t.email, t.purpose),
    index('tokens_created_by').on(t.createdBy),
  ],
)

export const joinRequests = sqliteTable(
  'join_requests',
  {
    id: id(),
    name: text('name').notNull(),
    email: text('email').notNull(),
    note: text('note'),
    status: text('status', { enum: JOIN_REQUEST_STATUSES }).notNull(),
    askedAt: instant('asked_at').notNull(),
    answeredAt: instant('answered_at'),
    answeredBy: text('answered_by').references(() => members.id),
  },
  (t) => [
    index('join_requests_status').on(t.status, t.askedAt),
    index('join_requests_answered_by').on(t.answeredBy),
  ],
)
