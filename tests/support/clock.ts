import { clockFrom, type Clock } from '#server/clock'

export interface TestClock extends Clock {
  /** Moves to an instant. */
  set(instant: string): void
  advance(amount: { days?: number; hours?: number; minutes?: number; seconds?: number }): void
}

/** A clock that stands still until it is moved. */
export function testClock(start = '2031-05-06T10:00:00.000Z', timeZone = 'Europe/London'): TestClock {
  let ms = Date.parse(start)
  return {
    ...clockFrom(
      () => ms,
      () => timeZone,
    ),
    timeZone,
    set: (instant) => void (ms = Date.parse(instant)),
    advance: ({ days = 0, hours = 0, minutes = 0, seconds = 0 }) =>
      void (ms += (((days * 24 + hours) * 60 + minutes) * 60 + seconds) * 1000),
  }
}
