import { sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core'
import { instant } from './columns.ts'
import { members } from './people.ts'

/** The secret address at which a calendar program reads a member's loans. One per member; only its digest is kept. */
export const calendarFeeds = sqliteTable(
  'calendar_feeds',
  {
    memberId: text('member_id')
      .primaryKey()
      .references(() => members.id, { onDelete: 'cascade' }),
    digest: text('digest').notNull(),
    createdAt: instant('created_at').notNull(),
    /** For letting go of what nobody reads. */
    readAt: instant('read_at').notNull(),
  },
  (t) => [uniqueIndex('calendar_feeds_digest').on(t.digest)],
)
