import type { CalendarDay } from '#shared/time/day'

/** A day of a batch's plan, or the span in which it is likely done. */
export interface MonthStep {
  id: string
  on: CalendarDay
  until?: CalendarDay
  title: string
  path: string
  forecast?: true
}
