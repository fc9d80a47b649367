import type { RefusalReason } from '#shared/loans/vocabulary'
import type { DayRange } from '#shared/time/day-range'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'

interface Refused extends DayRange {
  kindId: string
  reason: RefusalReason
}

const COUNT = `
INSERT INTO refusals (kind_id, member_id, from_on, to_on, reason, refused_on, created_at)
SELECT value ->> 'kindId', @memberId, value ->> 'from', value ->> 'to', value ->> 'reason', @today, @now
FROM json_each(@refused)`

/** Counts what could not be booked: demand the committee should know of. Runs in the caller's transaction. */
export function countRefusals(deps: Deps, memberId: string, refused: readonly Refused[]) {
  prepared(deps.db, COUNT).run({
    memberId,
    refused: JSON.stringify(refused),
    today: deps.clock.today(),
    now: deps.clock.now(),
  })
}
