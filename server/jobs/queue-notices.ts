import { reminderDay } from '#shared/notices/due'
import type { CalendarDay } from '#shared/time/day'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { queueDigests } from '../services/notices-digest.ts'
import { queueLoanReminders } from '../services/notices-loans.ts'
import { queueYeastNotices } from '../services/yeast/notices.ts'

type Source = (tx: Tx, deps: Deps, on: CalendarDay) => string[]
const SOURCES: Source[] = [queueLoanReminders, queueYeastNotices, queueDigests]

/** Queues what has come due by the clock and gives back the ids of the letters. Running it again adds nothing. */
export function queueNotices(deps: Deps): string[] {
  const on = reminderDay(deps.clock.now(), deps.clock.timeZone)
  return write(deps.db, (tx) => SOURCES.flatMap((source) => source(tx, deps, on)))
}
