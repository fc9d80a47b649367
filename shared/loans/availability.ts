import { type CalendarDay, addDays, dayFromNumber, dayNumber, laterDay } from '../time/day.ts'
import { type DayRange, lengthDays } from '../time/day-range.ts'
import type { HoldingLoanStatus } from './vocabulary.ts'

/** A place that is taken, from the collection day to the last day of turnaround, both included. */
export interface Hold {
  from: CalendarDay
  blocksUntil: CalendarDay
}

export interface DayFree {
  date: CalendarDay
  serviceable: number
  /** Items nobody holds that day; 0 when more are wanted than there are. */
  free: number
}

/**
 * The last day a live loan blocks: its return-by day and the turnaround after it. What is out and late may come back
 * today at the earliest, so it blocks until today and the turnaround. Out until the 5th with 2 days of turnaround blocks
 * until the 7th; still out on the 9th, until the 11th. For what came back, `to` is the day it did.
 */
export function blocksUntil(
  loan: { status: HoldingLoanStatus; to: CalendarDay },
  turnaroundDays: number,
  today: CalendarDay,
): CalendarDay {
  const back = loan.status === 'out' ? laterDay(loan.to, today) : loan.to
  return addDays(back, turnaroundDays)
}

/** What a booking would hold, with the turnaround after it. */
export function holdOf(range: DayRange, turnaroundDays: number): Hold {
  return { from: range.from, blocksUntil: addDays(range.to, turnaroundDays) }
}

/** How many holds there are on each day of a range, in order. */
export function heldPerDay(holds: readonly Hold[], range: DayRange): number[] {
  const first = dayNumber(range.from)
  const length = lengthDays(range)
  const change = new Array<number>(length + 1).fill(0)
  for (const hold of holds) {
    if (hold.blocksUntil < range.from || hold.from > range.to || hold.blocksUntil < hold.from) continue
    const starts = Math.max(0, dayNumber(hold.from) - first)
    const ends = Math.min(length, dayNumber(hold.blocksUntil) - first + 1)
    change[starts] = (change[starts] ?? 0) + 1
    change[ends] = (change[ends] ?? 0) - 1
  }
  let held = 0
  return change.slice(0, length).map((step) => (held += step))
}

/**
 * Items free on each day of a range: serviceable items less holds. Below zero when an overdue loan or a fault has taken
 * what was promised. Since items of a kind are interchangeable, the count is exact: handing out by earliest start never
 * needs more items than the busiest day (Gupta, Lee & Leung 1979).
 */
export function spareByDay(serviceable: number, holds: readonly Hold[], range: DayRange): number[] {
  return heldPerDay(holds, range).map((held) => serviceable - held)
}

/** Availability of a kind as it is shown: never below zero. */
export function freePerDay(serviceable: number, holds: readonly Hold[], range: DayRange): DayFree[] {
  const first = dayNumber(range.from)
  return spareByDay(serviceable, holds, range).map((spare, index) => ({
    date: dayFromNumber(first + index),
    serviceable,
    free: Math.max(0, spare),
  }))
}

/** Whether one more hold fits: at least one item is spare on each of its days. */
export function fits(serviceable: number, holds: readonly Hold[], wanted: Hold): boolean {
  const range = { from: wanted.from, to: wanted.blocksUntil }
  return spareByDay(serviceable, holds, range).every((spare) => spare >= 1)
}
