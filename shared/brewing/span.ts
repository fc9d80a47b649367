import { OutOfRange } from './range.ts'

const DAY_MS = 86_400_000
const DAY = /^\d{4}-\d{2}-\d{2}$/

/** Midnight UTC of a calendar day, in days since 1970. Throws `RangeError` on what is no day. */
export function dayNumber(argument: string, day: string): number {
  const ms = DAY.test(day) ? Date.parse(`${day}T00:00:00Z`) : Number.NaN
  if (!Number.isFinite(ms) || dayOfNumber(ms / DAY_MS) !== day) {
    throw new OutOfRange(argument, day, undefined, undefined, 'a day as YYYY-MM-DD is needed')
  }
  return ms / DAY_MS
}

/** The calendar day a number of days since 1970 falls in. */
export function dayOfNumber(days: number): string {
  return new Date(Math.floor(days) * DAY_MS).toISOString().slice(0, 10)
}

/** An instant (ISO text) in days since 1970. Throws `RangeError` on what is no instant. */
export function instantDays(argument: string, instant: string): number {
  const ms = Date.parse(instant)
  if (!Number.isFinite(ms))
    throw new OutOfRange(argument, instant, undefined, undefined, 'an instant as ISO text is needed')
  return ms / DAY_MS
}
