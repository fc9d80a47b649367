import { addMonths, type CalendarDay } from '../time/day.ts'

/** The last day an induction counts; undefined when it does not run out. Given 2026-01-31 for 1 month: 2026-02-28. */
export function inductionExpiry(givenOn: CalendarDay, months: number | null): CalendarDay | undefined {
  return months === null ? undefined : addMonths(givenOn, months)
}

/** Whether somebody may use a kind on a day as far as inductions go. The last day still counts. */
export function isInducted(
  induction: { expiresOn: CalendarDay | null } | undefined,
  on: CalendarDay,
): boolean {
  return induction !== undefined && (induction.expiresOn === null || induction.expiresOn >= on)
}
