import { and, eq, lte, or, sql } from 'drizzle-orm'
import { loanReminder, reminderDay } from '#shared/notices/due'
import { collectBy } from '#shared/loans/lateness'
import { addDays, type CalendarDay } from '#shared/time/day'
import { instantOn, type Instant } from '#shared/time/instant'
import { items, kinds } from '../db/schema/kit.ts'
import { loans } from '../db/schema/loans.ts'
import type { Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { queueNotice } from './notices.ts'

/** Queues the reminder each loan is owed on a reminder day, if it was not written before. Gives back the letters' ids. */
export function queueLoanReminders(tx: Tx, deps: Deps, on: CalendarDay): string[] {
  const zone = deps.clock.timeZone
  return loansToAskAbout(tx, on).flatMap((loan) => {
    const since = loan.status === 'out' ? (loan.extendedAt ?? loan.outAt) : loan.decidedAt
    const knownOn = reminderDay(since ?? loan.requestedAt, zone)
    const reminder = loanReminder({ status: loan.status, from: loan.from, to: loan.to, knownOn }, on)
    if (!reminder) return []
    const about = { type: 'loan', id: loan.id, on: loan.to } as const
    const dedupeKey = `${reminder.kind}:${loan.id}:${loan.to}:${reminder.on}`
    const facts = { loanId: loan.id, kindName: loan.kindName, from: loan.from, to: loan.to }
    const { kind } = reminder
    if (kind !== 'loan-collect-tomorrow') {
      const tag = loan.tag ?? undefined
      const notice = {
        kind,
        memberId: loan.memberId,
        about,
        dedupeKey,
        facts: { ...facts, ...(tag && { tag }) },
      }
      return queueNotice(tx, deps, notice) ?? []
    }
    const last = collectBy({ from: loan.from, approvedOn: loan.approvedOn ?? loan.from })
    const usefulUntil = instantOn(addDays(last, 1), 0, 0, zone)
    const notice = {
      kind,
      memberId: loan.memberId,
      about,
      dedupeKey,
      usefulUntil,
      facts: { ...facts, collectBy: last },
    }
    return usefulUntil > deps.clock.now() ? (queueNotice(tx, deps, notice) ?? []) : []
  })
}

/** Loans near enough to a date of theirs that a reminder may be owed. */
function loansToAskAbout(tx: Tx, on: CalendarDay) {
  const extendedAt = sql<Instant | null>`(SELECT max(at) FROM loan_events
    WHERE loan_id = ${loans.id} AND event = 'extended')`
  return tx
    .select({
      id: loans.id,
      memberId: loans.memberId,
      status: loans.status,
      from: loans.fromOn,
      to: loans.toOn,
      requestedAt: loans.requestedAt,
      decidedAt: loans.decidedAt,
      approvedOn: loans.approvedOn,
      outAt: loans.outAt,
      extendedAt,
      kindName: kinds.name,
      tag: items.tag,
    })
    .from(loans)
    .innerJoin(kinds, eq(kinds.id, loans.kindId))
    .leftJoin(items, eq(items.id, loans.itemId))
    .where(
      or(
        and(eq(loans.status, 'approved'), lte(loans.fromOn, addDays(on, 1))),
        and(eq(loans.status, 'out'), lte(loans.toOn, addDays(on, 3))),
      ),
    )
    .all()
}
