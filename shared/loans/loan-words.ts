import { daysBetween, type CalendarDay } from '../time/day.ts'
import { dayFrom, dayInWords } from '../time/day-words.ts'
import { countInWords, inDays } from './desk-words.ts'
import type { Loan } from './contract.ts'

type Said = Pick<Loan, 'status' | 'from' | 'to' | 'daysLate' | 'collectBy' | 'extensionTo'>

export type LoanState =
  | 'loan-requested'
  | 'loan-approved'
  | 'loan-collect'
  | 'loan-out'
  | 'loan-bring-back'
  | 'loan-due-today'
  | 'loan-overdue'
  | 'loan-returned'
  | 'loan-declined'
  | 'loan-cancelled'
  | 'loan-lapsed'

/** Days before the return-by day from which a loan counts as one to bring back. */
const SOON_DAYS = 3

/** What a loan is to its borrower on a day. */
export function loanState(loan: Said, today: CalendarDay): LoanState {
  switch (loan.status) {
    case 'approved':
      return loan.from <= today ? 'loan-collect' : 'loan-approved'
    case 'out':
      if (loan.to < today) return 'loan-overdue'
      if (loan.to === today) return 'loan-due-today'
      return daysBetween(today, loan.to) <= SOON_DAYS ? 'loan-bring-back' : 'loan-out'
    case 'requested':
      return 'loan-requested'
    case 'returned':
      return 'loan-returned'
    case 'declined':
      return 'loan-declined'
    case 'cancelled':
      return 'loan-cancelled'
    case 'lapsed':
      return 'loan-lapsed'
  }
}

/** The day that matters next, as one speaks of it: `Today`, `Tomorrow`, `Wed 14 Oct`, `3 days late`. */
export function loanDay(loan: Said, today: CalendarDay): string {
  if (loan.status === 'out' && loan.to < today) return `${inDays(daysBetween(loan.to, today))} late`
  const on =
    loan.status === 'out' ? loan.to : loan.from < today && loan.status === 'approved' ? today : loan.from
  const words = dayFrom(today, on)
  return words.charAt(0).toUpperCase() + words.slice(1)
}

/** Beside it: what else to know of that day. */
export function loanDayMore(loan: Said, today: CalendarDay): string | undefined {
  if (loan.status === 'approved' && loan.collectBy && loan.from <= today)
    return `kept for you until ${dayInWords(loan.collectBy)}`
  if (loan.status === 'out') return dayInWords(loan.to)
  return `back by ${dayInWords(loan.to)}`
}

/** What lies before a member: `One thing to collect today, one to bring back tomorrow.` */
export function todayLead(loans: readonly Said[], today: CalendarDay): string {
  const collect = loans.filter((loan) => loanState(loan, today) === 'loan-collect').length
  const late = loans.filter((loan) => loanState(loan, today) === 'loan-overdue').length
  const back = loans.filter((loan) =>
    ['loan-due-today', 'loan-bring-back'].includes(loanState(loan, today)),
  ).length
  const parts = [
    late > 0 && `${countInWords(late)} late, to bring back now`,
    collect > 0 && `${countInWords(collect)} to collect`,
    back > 0 && `${countInWords(back)} to bring back soon`,
  ].filter((part): part is string => part !== false)
  if (parts.length === 0) return 'Nothing to collect or bring back.'
  const text = parts.join(', ')
  return `${text.charAt(0).toUpperCase()}${text.slice(1)}.`
}
