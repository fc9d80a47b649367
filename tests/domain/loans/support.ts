import fc from 'fast-check'
import { type CalendarDay, dayFromNumber, dayNumber } from '#shared/time/day'
import type { Booking } from '#shared/loans/assignment'
import type { Hold } from '#shared/loans/availability'

/** Days of the worked examples: day 1 is 2031-01-01. */
const DAY_ZERO = 22279

export const nth = (number: number): CalendarDay => dayFromNumber(DAY_ZERO + number)
export const nthOf = (on: CalendarDay) => dayNumber(on) - DAY_ZERO

/** `[1, 4)`: from day 1 up to, not including, day 4. */
export const halfOpen = (from: number, end: number): Hold => ({ from: nth(from), blocksUntil: nth(end - 1) })

/** `named('A[1,4) B[2,6)')`: bookings by letter. */
export const named = (text: string): Booking[] =>
  [...text.matchAll(/(\w+)\[(\d+),(\d+)\)/g)].map(([, id, from, end]) => ({
    id: String(id),
    ...halfOpen(Number(from), Number(end)),
  }))

/** The rule by brute force: look at every day, count who holds it. */
export function naiveHeld(holds: readonly Hold[], on: CalendarDay): number {
  let held = 0
  for (const hold of holds) if (hold.from <= on && on <= hold.blocksUntil) held += 1
  return held
}

export const anyHold = fc
  .tuple(fc.integer({ min: 1, max: 40 }), fc.integer({ min: 1, max: 12 }))
  .map(([from, days]) => halfOpen(from, from + days))

export const anyBookings = fc
  .array(anyHold, { maxLength: 14 })
  .map((holds) => holds.map((hold, index): Booking => ({ id: `b${index}`, ...hold })))
