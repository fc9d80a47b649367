import { type CalendarDay, addDays, daysBetween, laterDay } from '../time/day.ts'
import { GRACE_DAYS, type LoanStatus } from './vocabulary.ts'

interface Dates {
  status: LoanStatus
  from: CalendarDay
  to: CalendarDay
}

/** Days past the return-by day of a loan that is out; 0 when it is not late. Due on the 5th, it is 1 day late on the 6th. */
export function daysLate(loan: Pick<Dates, 'status' | 'to'>, today: CalendarDay): number {
  return loan.status === 'out' ? Math.max(0, daysBetween(loan.to, today)) : 0
}

export function isOverdue(loan: Pick<Dates, 'status' | 'to'>, today: CalendarDay): boolean {
  return daysLate(loan, today) > 0
}

/**
 * The last day an approved loan may be collected: the grace day after the collection day, or after the day it was
 * approved where that came later.
 */
export function collectBy(loan: { from: CalendarDay; approvedOn: CalendarDay }): CalendarDay {
  return addDays(laterDay(loan.from, loan.approvedOn), GRACE_DAYS)
}

/** Whether a loan nobody came for has run out: approved and past its grace day, or never decided and past its last day. */
export function hasLapsed(
  loan: Dates & { approvedOn: CalendarDay | undefined },
  today: CalendarDay,
): boolean {
  if (loan.status === 'requested') return today > loan.to
  if (loan.status !== 'approved') return false
  return today > collectBy({ from: loan.from, approvedOn: loan.approvedOn ?? loan.from })
}
