import { z } from 'zod'

/**
 * A calendar day of the space, `YYYY-MM-DD`, from 1900 to 2999. Text order is time order.
 * All arithmetic goes through whole day numbers, so no clock change can lengthen or shorten a day.
 */
export const CalendarDay = z.iso
  .date({ error: 'Give a day as YYYY-MM-DD.' })
  .refine((text) => text >= '1900-01-01' && text < '3000-01-01', {
    error: 'Give a day between 1900 and 2999.',
  })
  .brand<'CalendarDay'>()
export type CalendarDay = z.output<typeof CalendarDay>

export const WEEKDAYS = [
  'monday',
  'tuesday',
  'wednesday',
  'thursday',
  'friday',
  'saturday',
  'sunday',
] as const
export type Weekday = (typeof WEEKDAYS)[number]

/** The day a text names, or undefined when it names none (`2026-02-30`). */
export function parseDay(text: string): CalendarDay | undefined {
  const parsed = CalendarDay.safeParse(text)
  return parsed.success ? parsed.data : undefined
}

/** For days written in code: `day('2026-05-01')`. Throws RangeError on anything that is no day. */
export function day(text: string): CalendarDay {
  const parsed = parseDay(text)
  if (parsed === undefined) throw new RangeError(`not a calendar day: ${text}`)
  return parsed
}

/**
 * Days since 1970-01-01 in the Gregorian calendar; 1970-01-01 is 0, earlier days are negative.
 * Years are counted from March, so that the leap day is the last of its year; 400 years are 146,097 days.
 */
export function dayNumber(on: CalendarDay): number {
  const month = Number(on.slice(5, 7))
  const year = Number(on.slice(0, 4)) - (month <= 2 ? 1 : 0)
  const monthFromMarch = (month + 9) % 12
  const dayOfYear = Math.floor((153 * monthFromMarch + 2) / 5) + Number(on.slice(8, 10)) - 1
  const leapDays = Math.floor(year / 4) - Math.floor(year / 100) + Math.floor(year / 400)
  return year * 365 + leapDays + dayOfYear - 719468
}

/** The day with this number; the inverse of {@link dayNumber}. Throws RangeError outside 1900 to 2999. */
export function dayFromNumber(number: number): CalendarDay {
  if (!Number.isInteger(number) || number < -25567 || number > 376199) {
    throw new RangeError(`no calendar day has the number ${number}`)
  }
  const sinceMarch0 = number + 719468
  const era = Math.floor(sinceMarch0 / 146097)
  const inEra = sinceMarch0 - era * 146097
  const yearOfEra = Math.floor(
    (inEra - Math.floor(inEra / 1460) + Math.floor(inEra / 36524) - Math.floor(inEra / 146096)) / 365,
  )
  const dayOfYear = inEra - (365 * yearOfEra + Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100))
  const monthFromMarch = Math.floor((5 * dayOfYear + 2) / 153)
  const dayOfMonth = dayOfYear - Math.floor((153 * monthFromMarch + 2) / 5) + 1
  const month = monthFromMarch < 10 ? monthFromMarch + 3 : monthFromMarch - 9
  const year = era * 400 + yearOfEra + (month <= 2 ? 1 : 0)
  return `${year}-${two(month)}-${two(dayOfMonth)}` as CalendarDay
}

/** `addDays('2026-02-27', 3)` is `2026-03-02`; a negative count goes back. */
export function addDays(on: CalendarDay, days: number): CalendarDay {
  return dayFromNumber(dayNumber(on) + days)
}

/** Nights from one day to another: `daysBetween('2026-05-01', '2026-05-04')` is 3; negative when backwards. */
export function daysBetween(from: CalendarDay, to: CalendarDay): number {
  return dayNumber(to) - dayNumber(from)
}

/** `weekday('2026-05-01')` is `friday`. */
export function weekday(on: CalendarDay): Weekday {
  // 1970-01-01 was a Thursday.
  return WEEKDAYS[(((dayNumber(on) + 3) % 7) + 7) % 7] as Weekday
}

/** The first day of the month that is `months` after the month of `on`. */
export function monthStart(on: CalendarDay, months = 0): CalendarDay {
  const index = Number(on.slice(0, 4)) * 12 + Number(on.slice(5, 7)) - 1 + months
  return day(`${Math.floor(index / 12)}-${two((index % 12) + 1)}-01`)
}

/** The last day of the month of `on`: `monthEnd('2028-02-10')` is `2028-02-29`. */
export function monthEnd(on: CalendarDay): CalendarDay {
  return addDays(monthStart(on, 1), -1)
}

/** The same day of a later month, or that month's last: `addMonths('2026-01-31', 1)` is `2026-02-28`. */
export function addMonths(on: CalendarDay, months: number): CalendarDay {
  const sameDay = addDays(monthStart(on, months), Number(on.slice(8, 10)) - 1)
  return earlierDay(sameDay, monthEnd(monthStart(on, months)))
}

export function earlierDay(a: CalendarDay, b: CalendarDay): CalendarDay {
  return a < b ? a : b
}

export function laterDay(a: CalendarDay, b: CalendarDay): CalendarDay {
  return a > b ? a : b
}

function two(number: number): string {
  return String(number).padStart(2, '0')
}
