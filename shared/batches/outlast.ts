import { addDays, daysBetween, laterDay, type CalendarDay } from '../time/day.ts'

/** Two readings a week apart must agree before it may be bottled. */
const SETTLING_DAYS = 7
/** To find a free afternoon in. */
const MARGIN_DAYS = 4

/** By how many days a ferment is likely to outlast a loan; undefined while it is likely to be over in time. */
export function outlastsBy(likely: CalendarDay, returnBy: CalendarDay): number | undefined {
  const days = daysBetween(returnBy, likely)
  return days > 0 ? days : undefined
}

/**
 * Until when to keep a vessel: late enough for the slowest likely end and for a week of steady readings after the likely
 * one, with a few days to bottle in. Likely 27 Oct, late 4 Nov gives 8 Nov. `bottleOn`: the day planned for bottling.
 */
export function keepUntil(
  finish: { likely: CalendarDay; late: CalendarDay },
  bottleOn: CalendarDay | undefined,
): CalendarDay {
  const settled = addDays(laterDay(finish.late, addDays(finish.likely, SETTLING_DAYS)), MARGIN_DAYS)
  return bottleOn === undefined ? settled : laterDay(settled, bottleOn)
}
