import { reminderDay } from '#shared/notices/due'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'

/** Queues what has come due by the clock and gives back the ids of the letters. Running it again adds nothing. */
export function queueNotices(deps: Deps): string[] {
  return write(deps.db, (tx) => {
    const on = reminderDay(deps.clock.now(), deps.clock.timeZone)
    return SOURCES.flatMap((source) => source(tx, deps, on))
  })
}

const SOURCES: ((tx: Tx, deps: Deps, on: ReturnType<typeof reminderDay>) => string[])[] = []
