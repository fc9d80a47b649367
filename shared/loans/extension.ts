import { type CalendarDay, addDays } from '../time/day.ts'
import { blocksUntil, fits } from './availability.ts'
import { type LimitBreach, type LoanLimits, limitBreaches } from './limits.ts'
import { type LiveLoan, delayedBy } from './risk.ts'

export interface ExtensionShelf {
  /** Every live loan of the pool, the one to extend among them, in the order they were asked for. */
  loans: readonly LiveLoan[]
  serviceable: number
  limits: LoanLimits
  today: CalendarDay
}

export type ExtensionAnswer =
  | { granted: true }
  | {
      granted: false
      /** No item is spare on one of the added days. */
      full: boolean
      /** The loans it would leave without an item. */
      delays: string[]
      breaches: LimitBreach[]
    }

/**
 * Whether a loan may be kept until a later day at once: when every added day, turnaround included, has an item spare, so
 * that nobody is delayed, and the longest loan of the kind is not passed. Otherwise it is a question for the desk.
 */
export function answerExtension(loan: LiveLoan, to: CalendarDay, shelf: ExtensionShelf): ExtensionAnswer {
  const { loans, serviceable, limits, today } = shelf
  const others = loans
    .filter(({ id }) => id !== loan.id)
    .map((other) => ({ from: other.from, blocksUntil: blocksUntil(other, other.turnaroundDays, today) }))
  const added = {
    from: addDays(blocksUntil(loan, loan.turnaroundDays, today), 1),
    blocksUntil: addDays(to, loan.turnaroundDays),
  }
  const full = !fits(serviceable, others, added)
  const breaches = limitBreaches({ from: loan.from, to }, limits, [], today).filter(
    ({ limit }) => limit === 'max-loan-days',
  )
  if (!full && breaches.length === 0) return { granted: true }
  return { granted: false, full, delays: delayedBy(loan.id, to, loans, serviceable, today), breaches }
}
