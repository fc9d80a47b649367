import { text, integer } from 'drizzle-orm/sqlite-core'
import type { CalendarDay } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'

/** Column builders shared by every table, so that a day is a day everywhere. */
export const id = () => text('id').primaryKey()
export const day = (name: string) => text(name).$type<CalendarDay>()
export const instant = (name: string) => text(name).$type<Instant>()
export const flag = (name: string) => integer(name, { mode: 'boolean' })
export const version = () => integer('version').notNull().default(1)
export const createdAt = () => instant('created_at').notNull()
export const updatedAt = () => instant('updated_at').notNull()
