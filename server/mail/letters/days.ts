import type { CalendarDay } from '#shared/time/day'
import { instantMs, type Instant } from '#shared/time/instant'

const DAY = new Intl.DateTimeFormat('en-GB', {
  timeZone: 'UTC',
  weekday: 'long',
  day: 'numeric',
  month: 'long',
  year: 'numeric',
})

/** `longDay('2031-05-09')` is `Friday 9 May 2031`. */
export const longDay = (on: CalendarDay) => DAY.format(Date.parse(`${on}T12:00:00Z`)).replace(',', '')

/** A moment by the clock of the space: `Friday 9 May 2031, 14:30`. */
export function longMoment(at: Instant, zone: string): string {
  const parts = new Intl.DateTimeFormat('en-GB', {
    timeZone: zone,
    weekday: 'long',
    day: 'numeric',
    month: 'long',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
  }).formatToParts(instantMs(at))
  const part = (type: Intl.DateTimeFormatPartTypes) => parts.find((p) => p.type === type)?.value ?? ''
  return `${part('weekday')} ${part('day')} ${part('month')} ${part('year')}, ${part('hour')}:${part('minute')}`
}
