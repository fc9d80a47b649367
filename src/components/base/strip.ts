import { type CalendarDay, addDays, daysBetween, weekday } from '#shared/time/day'
import { type DayRange, lengthDays, rangeHolds } from '#shared/time/day-range'
import { dayInWords } from '#shared/time/day-words'

/** A day of a kind: how many of its items are free. */
export interface StripDay {
  on: CalendarDay
  free: number
}

export type StripMark = 'none' | 'last' | 'plain'

/** None free; the last one of three or more; anything else. */
export function markOf(free: number, total: number): StripMark {
  if (free <= 0) return 'none'
  return free === 1 && total >= 3 ? 'last' : 'plain'
}

/** How many blocks stand for the free items: one each up to ten items, else one for several. */
export function blocksOf(free: number, total: number): number {
  if (free <= 0) return 0
  return Math.ceil(free / Math.max(1, Math.ceil(total / 10)))
}

/** A place in a week: one of the days given, or a day beyond them, which has no count. */
export interface StripCell {
  on: CalendarDay
  day?: StripDay
}

/** Whole weeks, Monday first, around the days given. */
export function weeksOf(days: readonly StripDay[]): StripCell[][] {
  const first = days[0]
  if (!first) return []
  const lead = weekNumber(first.on)
  const monday = addDays(first.on, -lead)
  const weeks = Math.ceil((lead + days.length) / 7)
  return Array.from({ length: weeks }, (_, week) =>
    Array.from({ length: 7 }, (_, at) => {
      const index = week * 7 + at
      return { on: addDays(monday, index), day: days[index - lead] }
    }),
  )
}

/** Monday is 0. */
function weekNumber(on: CalendarDay): number {
  return ['monday', 'tuesday', 'wednesday', 'thursday', 'friday', 'saturday', 'sunday'].indexOf(weekday(on))
}

/** Where a key leads in a calendar of weeks; undefined when it is no key of ours. */
export function dayAfterKey(on: CalendarDay, key: string): CalendarDay | undefined {
  switch (key) {
    case 'ArrowLeft':
      return addDays(on, -1)
    case 'ArrowRight':
      return addDays(on, 1)
    case 'ArrowUp':
      return addDays(on, -7)
    case 'ArrowDown':
      return addDays(on, 7)
    case 'Home':
      return addDays(on, -weekNumber(on))
    case 'End':
      return addDays(on, 6 - weekNumber(on))
    case 'PageUp':
      return addDays(on, -28)
    case 'PageDown':
      return addDays(on, 28)
    default:
      return undefined
  }
}

/** Name of a cell: `Saturday 17 October, 2 of 8 free`. */
export function cellName(day: StripDay, total: number, today: CalendarDay): string {
  const free = day.free <= 0 ? 'none' : String(day.free)
  return `${day.on === today ? 'Today, ' : ''}${dayInWords(day.on, 'long')}, ${free} of ${total} free`
}

/** The whole strip in one sentence, like days joined: `1 free Wed 14 Oct; none Thu 15 Oct to Fri 16 Oct`. */
export function runsInWords(days: readonly StripDay[]): string {
  const runs: { from: CalendarDay; to: CalendarDay; free: number }[] = []
  for (const { on, free } of days) {
    const run = runs.at(-1)
    if (run && run.free === free && daysBetween(run.to, on) === 1) run.to = on
    else runs.push({ from: on, to: on, free })
  }
  return runs
    .map(({ from, to, free }) => {
      const when = from === to ? dayInWords(from) : `${dayInWords(from)} to ${dayInWords(to)}`
      return `${free <= 0 ? 'none' : free} free ${when}`
    })
    .join('; ')
}

export type EdgePart = 'only' | 'first' | 'middle' | 'last' | 'cleaning' | undefined

/** What runs along the edge of the shelf under a day. */
export function edgePart(on: CalendarDay, range: DayRange | undefined, turnaroundDays: number): EdgePart {
  if (!range || lengthDays(range) === 0) return undefined
  if (rangeHolds(range, on)) {
    if (range.from === range.to) return 'only'
    if (on === range.from) return 'first'
    return on === range.to ? 'last' : 'middle'
  }
  const after = daysBetween(range.to, on)
  return after > 0 && after <= turnaroundDays ? 'cleaning' : undefined
}
