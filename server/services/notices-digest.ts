import { and, count, eq, inArray, isNull, lt, lte, isNotNull, sql, type SQL } from 'drizzle-orm'
import type { SQLiteTable } from 'drizzle-orm/sqlite-core'
import { addDays, type CalendarDay } from '#shared/time/day'
import { instantOn } from '#shared/time/instant'
import { REMINDER_HOUR } from '#shared/notices/vocabulary'
import { faults, items } from '../db/schema/kit.ts'
import { loans } from '../db/schema/loans.ts'
import { letters } from '../db/schema/notices.ts'
import { members } from '../db/schema/people.ts'
import { yeastLots } from '../db/schema/yeast.ts'
import type { Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { queueNotice } from './notices.ts'

/** Queues one digest for each steward on the morning it is for, when there is anything in it. */
export function queueDigests(tx: Tx, deps: Deps, on: CalendarDay): string[] {
  // A digest of yesterday helps nobody.
  if (on !== deps.clock.today()) return []
  const counts = deskCounts(tx, on).filter(([, number]) => number > 0)
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

/** What waits for a steward, in the order the desk shows it. */
function deskCounts(tx: Tx, on: CalendarDay): [what: string, count: number][] {
  return [
    ['To approve', tally(tx, loans, eq(loans.status, 'requested'))],
    ['Asked to keep longer', tally(tx, loans, isNotNull(loans.extensionTo))],
    ['To hand out', tally(tx, loans, and(eq(loans.status, 'approved'), lte(loans.fromOn, on)))],
    ['Due back today', tally(tx, loans, and(eq(loans.status, 'out'), eq(loans.toOn, on)))],
    ['Late', tally(tx, loans, and(eq(loans.status, 'out'), lt(loans.toOn, on)))],
    ['Bookings at risk', tally(tx, loans, eq(loans.atRisk, true))],
    ['To wash', tally(tx, items, and(eq(items.status, 'in-service'), eq(items.hygiene, 'dirty')))],
    ['Open faults', tally(tx, faults, isNull(faults.resolvedAt))],
    ['Yeast lots flagged', tally(tx, yeastLots, eq(yeastLots.state, 'flagged'))],
    ['Members whose address refuses letters', refusingAddresses(tx)],
  ]
}

const tally = (tx: Tx, table: SQLiteTable, where: SQL | undefined) =>
  tx.select({ number: count() }).from(table).where(where).get()?.number ?? 0

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
