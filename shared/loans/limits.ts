import { type CalendarDay, daysBetween } from '../time/day.ts'
import { type DayRange, lengthDays } from '../time/day-range.ts'
import { heldPerDay } from './availability.ts'
import type { LoanLimit } from './vocabulary.ts'

/** The limits of a kind, in days and in things held at once. */
export interface LoanLimits {
  maxLoanDays: number
  maxAheadDays: number
  maxPerMember: number
}

export interface LimitBreach {
  limit: LoanLimit
  allowed: number
  asked: number
}

/**
 * The limits a booking goes over, none when it keeps them. Days count both ends: the 1st to the 28th is 28 days. `own` are
 * the member's other live loans of the kind; only those that share a day count as held at once.
 */
export function limitBreaches(
  wanted: DayRange,
  limits: LoanLimits,
  own: readonly DayRange[],
  today: CalendarDay,
): LimitBreach[] {
  const held = own.map((loan) => ({ from: loan.from, blocksUntil: loan.to }))
  const checks: LimitBreach[] = [
    { limit: 'max-loan-days', allowed: limits.maxLoanDays, asked: lengthDays(wanted) },
    { limit: 'max-ahead-days', allowed: limits.maxAheadDays, asked: daysBetween(today, wanted.from) },
    {
      limit: 'max-per-member',
      allowed: limits.maxPerMember,
      asked: 1 + Math.max(0, ...heldPerDay(held, wanted)),
    },
  ]
  return checks.filter(({ allowed, asked }) => asked > allowed)
}

/** One sentence a member can act on. */
export function breachSentence({ limit, allowed }: LimitBreach): string {
  switch (limit) {
    case 'max-loan-days':
      return `The longest loan of this is ${count(allowed, 'day')}. Choose an earlier return-by day.`
    case 'max-ahead-days':
      return `This can be booked up to ${count(allowed, 'day')} ahead. Choose an earlier collection day.`
    case 'max-per-member':
      return `You can hold ${allowed} of this at once. Choose other days, or give one back first.`
  }
}

const count = (number: number, word: string) => `${number} ${word}${number === 1 ? '' : 's'}`
