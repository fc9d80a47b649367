import { and, eq, inArray, isNotNull, sql } from 'drizzle-orm'
import { addDays, type CalendarDay } from '#shared/time/day'
import { instantOn } from '#shared/time/instant'
import { REMINDER_HOUR } from '#shared/notices/vocabulary'
import { letters } from '../db/schema/notices.ts'
import { members } from '../db/schema/people.ts'
import type { Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { readDesk } from './desk.ts'
import { lowStock } from './larder/low-stock.ts'
import { queueNotice } from './notices.ts'

/** Queues one digest for each steward, when there is anything in it. Called once a morning. */
export function queueDigests(tx: Tx, deps: Deps, on: CalendarDay): string[] {
  const counts = deskCounts(tx, deps).filter(([, number]) => number > 0)
  if (counts.length === 0) return []
  const stewards = tx
    .select({ id: members.id })
    .from(members)
    .where(and(inArray(members.role, ['steward', 'admin']), eq(members.status, 'active')))
    .all()
  return stewards.flatMap(
    ({ id }) =>
      queueNotice(tx, deps, {
        kind: 'steward-digest',
        memberId: id,
        dedupeKey: `steward-digest:${id}:${on}`,
        usefulUntil: instantOn(addDays(on, 1), REMINDER_HOUR, 0, deps.clock.timeZone),
        facts: { on, counts },
      }) ?? [],
  )
}

/** What waits for a steward, as the desk counts it and in its order. */
function deskCounts(tx: Tx, deps: Deps): [what: string, count: number][] {
  const desk = readDesk(deps)
  return [
    ['To approve', desk.approvals.length],
    ['To hand out', desk.collections.length],
    ['Due back today', desk.returns.length],
    ['Late', desk.overdue.length],
    ['Bookings at risk', desk.atRisk.length],
    ['To wash', desk.washing.length],
    ['Open faults', desk.faults.length],
    ['Running low in the larder', lowStock(deps).length],
    ['Members whose address refuses letters', refusingAddresses(tx)],
  ]
}

/** Refused for good twice since a letter last got through. */
function refusingAddresses(tx: Tx): number {
  const failed = tx
    .select({ memberId: letters.memberId })
    .from(letters)
    .where(
      and(
        eq(letters.status, 'failed'),
        isNotNull(letters.memberId),
        sql`${letters.queuedAt} > coalesce((SELECT max(ok.sent_at) FROM letters ok
          WHERE ok.member_id = ${letters.memberId} AND ok.status = 'sent'), '')`,
      ),
    )
    .groupBy(letters.memberId)
    .having(sql`count(*) >= 2`)
    .all()
  return failed.length
}
