import { type CalendarDay, addDays, dayFromNumber, dayNumber, daysBetween } from '../time/day.ts'
import { type DayRange, rangeFrom } from '../time/day-range.ts'
import { type Hold, spareByDay } from './availability.ts'

interface Shelf {
  serviceable: number
  holds: readonly Hold[]
  turnaroundDays: number
}

/**
 * The free window of the same length that starts closest to the wanted day; of two equally close, the later. Looks back
 * as far as `earliest` (today) and forward as far as `latest` (how far ahead the kind may be booked).
 */
export function nearestFree(
  wanted: DayRange,
  shelf: Shelf,
  earliest: CalendarDay,
  latest: CalendarDay,
): DayRange | undefined {
  const starts = freeStarts(wanted, shelf, earliest, latest)
  const asked = dayNumber(wanted.from)
  let best: number | undefined
  for (const start of starts) {
    if (best === undefined || Math.abs(start - asked) <= Math.abs(best - asked)) best = start
  }
  return best === undefined ? undefined : rangeFrom(wanted, dayFromNumber(best))
}

/** The first free window of the same length from a day on. */
export function firstFree(
  wanted: DayRange,
  shelf: Shelf,
  earliest: CalendarDay,
  latest: CalendarDay,
): DayRange | undefined {
  const start = freeStarts(wanted, shelf, earliest, latest)[0]
  return start === undefined ? undefined : rangeFrom(wanted, dayFromNumber(start))
}

/** Day numbers, in order, on which a window of the wanted length and its turnaround could start. */
function freeStarts(wanted: DayRange, shelf: Shelf, earliest: CalendarDay, latest: CalendarDay): number[] {
  if (latest < earliest) return []
  const needed = daysBetween(wanted.from, wanted.to) + 1 + shelf.turnaroundDays
  const spare = spareByDay(shelf.serviceable, shelf.holds, {
    from: earliest,
    to: addDays(latest, needed - 1),
  })
  const first = dayNumber(earliest)
  const starts: number[] = []
  let run = 0
  spare.forEach((items, index) => {
    run = items >= 1 ? run + 1 : 0
    if (run >= needed) starts.push(first + index - needed + 1)
  })
  return starts
}
