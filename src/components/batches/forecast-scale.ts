import { addDays, dayNumber, daysBetween, type CalendarDay } from '#shared/time/day'
import { dayInWords } from '#shared/time/day-words'

export interface Tick {
  at: number
  label: string
}

/** Day numbers as fractions: 0 is the midnight that begins `from`, noon of that day is 0.5. */
export function dayPlace(from: CalendarDay, instant: string): number {
  return Date.parse(instant) / 86_400_000 - dayNumber(from)
}

/** Gridlines of gravity, in steps that leave four to six of them: 1.000, 1.020 … */
export function gravityTicks(low: number, high: number): Tick[] {
  const span = Math.max(0.004, high - low)
  const step = [0.001, 0.002, 0.005, 0.01, 0.02, 0.05].find((size) => span / size <= 5.5) ?? 0.05
  const first = Math.ceil(low / step - 1e-9)
  const count = Math.floor(high / step + 1e-9) - first
  return Array.from({ length: count + 1 }, (_, index) => {
    const at = (first + index) * step
    return { at, label: at.toFixed(3) }
  })
}

/** Days to name on the axis, no closer than there is room for; the month is said at the first and where it changes. */
export function dayTicks(from: CalendarDay, to: CalendarDay, room: number): Tick[] {
  const days = daysBetween(from, to)
  const step = [1, 2, 7, 14, 28].find((size) => days / size <= room) ?? 56
  const ticks: Tick[] = []
  let month = ''
  for (let at = 0; at <= days; at += step) {
    const on = addDays(from, at)
    const named = on.slice(0, 7) !== month
    month = on.slice(0, 7)
    ticks.push({ at: at + 0.5, label: named ? dayInWords(on, 'date') : String(Number(on.slice(8))) })
  }
  return ticks
}
