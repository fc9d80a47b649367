import { index, integer, real, sqliteTable, text } from 'drizzle-orm/sqlite-core'
import type { Weekday } from '#shared/time/day'
import { flag, instant, updatedAt, version } from './columns.ts'

/** One row: this space. */
export const space = sqliteTable('space', {
  id: integer('id').primaryKey(),
  name: text('name').notNull(),
  /** Null until an admin sets one: the environment's counts. */
  timeZone: text('time_zone'),
  currency: text('currency').notNull(),
  demo: flag('demo').notNull(),
  openDays: text('open_days', { mode: 'json' }).$type<Weekday[]>().notNull(),
  mailHour: integer('mail_hour').notNull(),
  roomM3: real('room_m3'),
  airChangesPerHour: real('air_changes_per_hour'),
  allergenNote: text('allergen_note').notNull(),
  houseRules: text('house_rules').notNull(),
  requireSecondFactor: flag('require_second_factor').notNull(),
  updatedAt: updatedAt(),
  version: version(),
})

/** Append-only (triggers see to it); each row's hash covers the one before. Holds ids, never names or addresses. */
export const auditTrail = sqliteTable(
  'audit_trail',
  {
    seq: integer('seq').primaryKey(),
    at: instant('at').notNull(),
    actorId: text('actor_id'),
    action: text('action').notNull(),
    subject: text('subject'),
    outcome: text('outcome').notNull(),
    hash: text('hash').notNull(),
  },
  (t) => [index('audit_trail_actor').on(t.actorId, t.seq)],
)
