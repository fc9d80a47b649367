import { type CalendarDay, daysBetween, weekday } from './day.ts'

const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
]

/**
 * How much of a day is said. `2026-10-14` is, in order: `Wed 14 Oct`, `Wed 14 Oct 2026`, `14 Oct`, `14 October`,
 * `Wednesday`, `Wednesday 14 October`, `Wednesday 14 October 2026`.
 */
export type DayStyle = 'short' | 'short-year' | 'date' | 'date-long' | 'weekday' | 'long' | 'full'

/** A calendar day in British English, the same on every machine. */
export function dayInWords(on: CalendarDay, style: DayStyle = 'short'): string {
  const year = on.slice(0, 4)
  const date = String(Number(on.slice(8, 10)))
  const month = monthName(on)
  const name = weekdayName(on)
  switch (style) {
    case 'short':
      return `${name.slice(0, 3)} ${date} ${month.slice(0, 3)}`
    case 'short-year':
      return `${name.slice(0, 3)} ${date} ${month.slice(0, 3)} ${year}`
    case 'date':
      return `${date} ${month.slice(0, 3)}`
    case 'date-long':
      return `${date} ${month}`
    case 'weekday':
      return name
    case 'long':
      return `${name} ${date} ${month}`
    case 'full':
      return `${name} ${date} ${month} ${year}`
  }
}

/** `October`. */
export function monthName(on: CalendarDay): string {
  return MONTHS[Number(on.slice(5, 7)) - 1] as string
}

/** `Wednesday`. */
export function weekdayName(on: CalendarDay): string {
  const name = weekday(on)
  return name.charAt(0).toUpperCase() + name.slice(1)
}

/** A day as one speaks of it from another: `today`, `tomorrow`, `yesterday`, else `Wed 14 Oct`, with the year when it differs. */
export function dayFrom(today: CalendarDay, on: CalendarDay): string {
  const away = daysBetween(today, on)
  if (away === 0) return 'today'
  if (away === 1) return 'tomorrow'
  if (away === -1) return 'yesterday'
  return dayInWords(on, on.slice(0, 4) === today.slice(0, 4) ? 'short' : 'short-year')
}
