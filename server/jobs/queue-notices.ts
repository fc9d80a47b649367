import { reminderDay } from '#shared/notices/due'
import type { CalendarDay } from '#shared/time/day'
import { noticeRounds } from '../db/schema/notices.ts'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { queueOutlastNotices, queueStepNotices } from '../services/notices-batches.ts'
import { queueDigests } from '../services/notices-digest.ts'
import { queueLoanReminders } from '../services/notices-loans.ts'
import { queueYeastNotices } from '../services/yeast/notices.ts'

type Source = (tx: Tx, deps: Deps, on: CalendarDay) => string[]

/** Owed on a day of their own: asked about by the minute. */
const BY_DATE: Source[] = [queueLoanReminders, queueStepNotices, queueYeastNotices]
/** How things stand in the morning: asked about once, so that what turns up at noon waits for the next. */
const EACH_MORNING: Source[] = [queueOutlastNotices, queueDigests]

/** Queues what has come due by the clock and gives back the ids of the letters. Running it again adds nothing. */
export function queueNotices(deps: Deps): string[] {
  const on = reminderDay(deps.clock.now(), deps.clock.timeZone)
  return write(deps.db, (tx) => {
    const sources = beginMorning(tx, deps, on) ? [...BY_DATE, ...EACH_MORNING] : BY_DATE
    return sources.flatMap((source) => source(tx, deps, on))
  })
}

/** True once a day, from nine by the clock. A morning that was slept through is not made up for on the next day. */
function beginMorning(tx: Tx, deps: Deps, on: CalendarDay): boolean {
  if (on !== deps.clock.today()) return false
  const round = { roundOn: on, doneAt: deps.clock.now() }
  return tx.insert(noticeRounds).values(round).onConflictDoNothing().run().changes === 1
}
