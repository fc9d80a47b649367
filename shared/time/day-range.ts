import { type CalendarDay, addDays, dayFromNumber, dayNumber, daysBetween } from './day.ts'

/** Days from `from` to `to`, both included. A range whose `to` is before its `from` holds no day. */
export interface DayRange {
  from: CalendarDay
  to: CalendarDay
}

/** How many days a range holds: the 1st to the 3rd is 3, a single day is 1. */
export function lengthDays(range: DayRange): number {
  return Math.max(0, daysBetween(range.from, range.to) + 1)
}

/** Every day of a range, in order. */
export function dayRange(range: DayRange): CalendarDay[] {
  const first = dayNumber(range.from)
  return Array.from({ length: lengthDays(range) }, (_, index) => dayFromNumber(first + index))
}

/** Whether two ranges share a day. The 1st to the 3rd and the 4th to the 6th share none. */
export function rangesOverlap(a: DayRange, b: DayRange): boolean {
  return a.from <= b.to && b.from <= a.to && a.from <= a.to && b.from <= b.to
}

export function rangeHolds(range: DayRange, on: CalendarDay): boolean {
  return range.from <= on && on <= range.to
}

/** The same number of days, starting on another day. */
export function rangeFrom(range: DayRange, from: CalendarDay): DayRange {
  return { from, to: addDays(from, daysBetween(range.from, range.to)) }
}
