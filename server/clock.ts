import type { CalendarDay } from '#shared/time/day'
import { dayAt, instantMs, toInstant, type Instant } from '#shared/time/instant'

/** The only source of "now" and "today". Rules take days and instants as arguments; tests pass a clock they move by hand. */
export interface Clock {
  readonly timeZone: string
  now(): Instant
  /** Today's calendar date in the space's time zone. */
  today(): CalendarDay
}

/** A clock over any source of milliseconds: the system's, or a test's own. */
export const clockFrom = (milliseconds: () => number, timeZone: () => string): Clock => ({
  get timeZone() {
    return timeZone()
  },
  now: () => toInstant(milliseconds()),
  today: () => dayAt(toInstant(milliseconds()), timeZone()),
})

/** A clock that stands at one instant: for telling what was done then. */
export const clockAt = (instant: Instant, timeZone: string) =>
  clockFrom(
    () => instantMs(instant),
    () => timeZone,
  )

export const systemClock = (timeZone: () => string) => clockFrom(Date.now, timeZone)
