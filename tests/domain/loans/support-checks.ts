import type { Booking } from '#shared/loans/assignment'
import type { Hold } from '#shared/loans/availability'
import { type DayRange, dayRange, rangesOverlap } from '#shared/time/day-range'
import { naiveHeld } from './support.ts'

/** By brute force, so that the rule is not checked with itself. */
export const heldPerDay = (holds: readonly Hold[], range: DayRange): number[] =>
  dayRange(range).map((on) => naiveHeld(holds, on))

export function rangesShareNoDay(bookings: readonly Booking[], given: Map<string, number>): boolean {
  return bookings.every((one) =>
    bookings.every((two) => {
      const place = given.get(one.id)
      if (one.id === two.id || place === undefined || place !== given.get(two.id)) return true
      return !rangesOverlap({ from: one.from, to: one.blocksUntil }, { from: two.from, to: two.blocksUntil })
    }),
  )
}
