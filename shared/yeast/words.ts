import { type CalendarDay, daysBetween } from '../time/day.ts'

const SMALL = [
  'no',
  'one',
  'two',
  'three',
  'four',
  'five',
  'six',
  'seven',
  'eight',
  'nine',
  'ten',
  'eleven',
  'twelve',
]

/** `7` is `seven`; from thirteen on, figures. */
export const numberWord = (count: number) => SMALL[count] ?? String(count)

export const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

const counted = (count: number, word: string) => `${numberWord(count)} ${word}${count === 1 ? '' : 's'}`

/** A stretch of days as one speaks of it: `nine days`, `17 days`, `six weeks`, `five months`, `two years`. */
export function spanWords(days: number): string {
  if (days < 32) return counted(days, 'day')
  if (days < 60) return counted(Math.round(days / 7), 'week')
  if (days < 700) return counted(Math.round(days / 30.44), 'month')
  return counted(Math.round(days / 365.25), 'year')
}

/** `today`, `yesterday`, `five months ago`. */
export function agoWords(then: CalendarDay, on: CalendarDay): string {
  const days = daysBetween(then, on)
  if (days <= 0) return 'today'
  return days === 1 ? 'yesterday' : `${spanWords(days)} ago`
}
