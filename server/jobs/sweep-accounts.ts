import { and, lt, ne } from 'drizzle-orm'
import { addMinutes } from '#shared/time/instant'
import { joinRequests, tokens } from '../db/schema/accounts.ts'
import { throttles } from '../db/schema/people.ts'
import type { Deps } from '../deps.ts'
import { eraseDue } from '../services/erasure.ts'

const DAY = 24 * 60

/** Erases who asked to leave, and lets go of what is kept no longer: links after a week, answered requests after 30 days. */
export function sweepAccounts(deps: Deps) {
  const before = (days: number) => addMinutes(deps.clock.now(), -days * DAY)
  eraseDue(deps)
  deps.db
    .delete(tokens)
    .where(lt(tokens.expiresAt, before(7)))
    .run()
  deps.db
    .delete(joinRequests)
    .where(and(ne(joinRequests.status, 'waiting'), lt(joinRequests.answeredAt, before(30))))
    .run()
  deps.db
    .delete(throttles)
    .where(lt(throttles.windowStartedAt, before(1)))
    .run()
}
