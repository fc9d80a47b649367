import type { CalendarDay } from '../time/day.ts'
import { type Booking, leftWithout } from './assignment.ts'
import { blocksUntil } from './availability.ts'
import type { HoldingLoanStatus, RiskReason } from './vocabulary.ts'

/** A loan that takes a place on the shelf. */
export interface LiveLoan {
  id: string
  status: HoldingLoanStatus
  from: CalendarDay
  /** The return-by day; for what came back and is not clean yet, the day it came back. */
  to: CalendarDay
  turnaroundDays: number
}

/**
 * The bookings that will find nothing on the shelf as things stand, each with its reason: `overdue` when they would be
 * served if what is late had come back on its day, `out-of-service` when too few items are in service even so.
 * `loans` in the order they were asked for.
 */
export function bookingsAtRisk(
  loans: readonly LiveLoan[],
  serviceable: number,
  today: CalendarDay,
): Map<string, RiskReason> {
  const without = leftWithout(toBookings(loans, today), serviceable)
  if (without.length === 0) return new Map()
  const onTime = new Set(leftWithout(toBookings(loans, undefined), serviceable))
  return new Map(without.map((id) => [id, onTime.has(id) ? 'out-of-service' : 'overdue']))
}

/** The other bookings that are left without an item when one loan is kept until a later day. */
export function delayedBy(
  loanId: string,
  to: CalendarDay,
  loans: readonly LiveLoan[],
  serviceable: number,
  today: CalendarDay,
): string[] {
  const already = new Set(leftWithout(toBookings(loans, today), serviceable))
  const longer = loans.map((loan) => (loan.id === loanId ? { ...loan, to } : loan))
  return leftWithout(toBookings(longer, today), serviceable).filter((id) => id !== loanId && !already.has(id))
}

function toBookings(loans: readonly LiveLoan[], today: CalendarDay | undefined): Booking[] {
  return loans.map((loan) => ({
    id: loan.id,
    from: loan.from,
    blocksUntil: blocksUntil(loan, loan.turnaroundDays, today ?? loan.to),
    pinned: loan.status === 'out' || loan.status === 'returned',
  }))
}
