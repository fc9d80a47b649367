import { addMonths, type CalendarDay } from '../time/day.ts'

/** The day by which a hydrometer should be checked in water again; undefined when its kind asks for no checks. */
export function calibrationDueOn(
  item: { calibratedOn: CalendarDay | null; addedOn: CalendarDay },
  months: number | null,
): CalendarDay | undefined {
  if (months === null) return undefined
  return item.calibratedOn === null ? item.addedOn : addMonths(item.calibratedOn, months)
}
