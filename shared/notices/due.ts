import { type CalendarDay, addDays, daysBetween } from '../time/day.ts'
import { dayAt, instantOn, type Instant } from '../time/instant.ts'
import type { LoanStatus } from '../loans/vocabulary.ts'
import { REMINDER_HOUR, type LoanReminder } from './vocabulary.ts'

/**
 * The last day whose 09:00, by the clock of the space, has come. At 08:59 on the 5th it is still the 4th.
 * Reminders belong to such days, so that no clock change can move one or send it twice.
 */
export function reminderDay(at: Instant, zone: string): CalendarDay {
  const today = dayAt(at, zone)
  return at >= instantOn(today, REMINDER_HOUR, 0, zone) ? today : addDays(today, -1)
}

/** A reminder and the day it belongs to. */
export interface Reminder<K extends string = string> {
  kind: K
  on: CalendarDay
}

export interface LoanDates {
  status: LoanStatus
  from: CalendarDay
  to: CalendarDay
  /** Reminder day at the moment the loan got this status and these dates: what was due before is not owed. */
  knownOn: CalendarDay
}

/** Days after the return-by day on which a late loan is written about; from then on weekly. */
const LATE_ON = [1, 3, 7] as const
const EVERY = 7

/**
 * The one reminder a loan is owed on a reminder day: the newest that has come due, or undefined. Whoever missed a few days asks
 * once and gets that one, not the pile. Out and due on the 9th: owed on the 6th, the 9th, the 10th, 12th, 16th, 23rd …
 */
export function loanReminder(loan: LoanDates, today: CalendarDay): Reminder<LoanReminder> | undefined {
  return newest(loanReminders(loan, today), loan.knownOn, today)
}

/** Newest among reminders that have come due after `knownOn` and no later than `today`. */
function newest<K extends string>(
  reminders: readonly Reminder<K>[],
  knownOn: CalendarDay,
  today: CalendarDay,
): Reminder<K> | undefined {
  return reminders
    .filter(({ on }) => on > knownOn && on <= today)
    .reduce<Reminder<K> | undefined>((best, next) => (best && best.on >= next.on ? best : next), undefined)
}

function loanReminders(loan: LoanDates, today: CalendarDay): Reminder<LoanReminder>[] {
  switch (loan.status) {
    case 'approved':
      return [{ kind: 'loan-collect-tomorrow', on: addDays(loan.from, -1) }]
    case 'out':
      return [
        { kind: 'loan-due-soon', on: addDays(loan.to, -3) },
        { kind: 'loan-due-today', on: loan.to },
        ...lateDays(daysBetween(loan.to, today)).map((late) => ({
          kind: 'loan-overdue' as const,
          on: addDays(loan.to, late),
        })),
      ]
    case 'requested':
    case 'returned':
    case 'declined':
    case 'cancelled':
    case 'lapsed':
      return []
  }
}

/** The days late, up to `late`, on which a letter goes out: `lateDays(15)` is 1, 3, 7, 14. */
export function lateDays(late: number): number[] {
  const weeks = Math.max(0, Math.floor((late - LATE_ON[2]) / EVERY))
  const weekly = Array.from({ length: weeks }, (_, index) => LATE_ON[2] + (index + 1) * EVERY)
  return [...LATE_ON, ...weekly].filter((days) => days <= late)
}

/**
 * The day of a batch's plan to write about on a reminder day: the newest that has come due and holds a step not done. Days it missed
 * before that are not written about. `steps`: those not done.
 */
export const stepDay = (
  steps: readonly { on: CalendarDay }[],
  knownOn: CalendarDay,
  today: CalendarDay,
): CalendarDay | undefined =>
  newest(
    steps.map(({ on }) => ({ kind: 'step', on })),
    knownOn,
    today,
  )?.on
