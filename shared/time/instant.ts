import { z } from 'zod'
import { type CalendarDay, day, dayNumber } from './day.ts'

/** A moment, ISO 8601 in UTC with milliseconds and `Z`, as the server writes it. Text order is time order. */
export const Instant = z.iso
  .datetime({ precision: 3, error: 'Give a moment as YYYY-MM-DDTHH:MM:SS.sssZ.' })
  .brand<'Instant'>()
export type Instant = z.output<typeof Instant>

/** A moment as a caller may send it: any ISO 8601 precision or offset; read as an {@link Instant}. */
export const InstantInput = z.iso
  .datetime({ offset: true, error: 'Give a moment like 2026-05-01T09:30:00Z.' })
  .transform((text) => toInstant(Date.parse(text)))

const MINUTE_MS = 60_000
const DAY_MS = 86_400_000

/** The instant so many milliseconds after 1970-01-01T00:00Z. */
export function toInstant(ms: number): Instant {
  return new Date(ms).toISOString() as Instant
}

export function instantMs(at: Instant): number {
  return Date.parse(at)
}

export function addMinutes(at: Instant, minutes: number): Instant {
  return toInstant(instantMs(at) + minutes * MINUTE_MS)
}

export function addSeconds(at: Instant, seconds: number): Instant {
  return toInstant(instantMs(at) + seconds * 1000)
}

const clockFaces = new Map<string, Intl.DateTimeFormat>()

/** Whether the runtime knows this IANA zone name. */
export function isTimeZone(zone: string): boolean {
  try {
    clockFace(zone)
    return true
  } catch {
    return false
  }
}

/** The calendar day a moment falls on in a time zone (an IANA name; RangeError if unknown). */
export function dayAt(at: Instant, zone: string): CalendarDay {
  return wallClock(instantMs(at), zone).on
}

/**
 * The moment at which clocks in a zone show a time of a day. Where clocks skip that time, the offset before the
 * gap counts (02:30 shows as 03:30); where they show it twice, the first. So a 09:00 letter is one letter.
 */
export function instantOn(on: CalendarDay, hour: number, minute: number, zone: string): Instant {
  const wanted = dayNumber(on) * DAY_MS + (hour * 60 + minute) * MINUTE_MS
  // No zone has moved its clocks twice within a day and a half of one moment, so these two offsets are the candidates.
  const before = offsetMs(wanted - 36 * 60 * MINUTE_MS, zone)
  const after = offsetMs(wanted + 36 * 60 * MINUTE_MS, zone)
  const candidates = [wanted - before, wanted - after].sort((a, b) => a - b)
  const shown = candidates.find((ms) => ms + offsetMs(ms, zone) === wanted)
  return toInstant(shown ?? wanted - before)
}

/** How far a zone's clocks are ahead of UTC at a moment. */
function offsetMs(ms: number, zone: string): number {
  return wallClock(ms, zone).ms - Math.floor(ms / 1000) * 1000
}

interface WallClock {
  on: CalendarDay
  ms: number
}

let lastRead: { zone: string; second: number; shown: WallClock } | undefined

/** What clocks in a zone show. The last reading is kept: within a second the same is asked many times. */
function wallClock(ms: number, zone: string): WallClock {
  const second = Math.floor(ms / 1000)
  if (lastRead?.zone !== zone || lastRead.second !== second)
    lastRead = { zone, second, shown: readWallClock(second * 1000, zone) }
  return lastRead.shown
}

function readWallClock(ms: number, zone: string): WallClock {
  const parts = new Map(
    clockFace(zone)
      .formatToParts(ms)
      .map((part) => [part.type, part.value]),
  )
  const part = (name: Intl.DateTimeFormatPartTypes) => Number(parts.get(name))
  const on = day(`${parts.get('year')}-${parts.get('month')}-${parts.get('day')}`)
  const seconds = part('hour') * 3600 + part('minute') * 60 + part('second')
  return { on, ms: dayNumber(on) * DAY_MS + seconds * 1000 }
}

function clockFace(zone: string): Intl.DateTimeFormat {
  let face = clockFaces.get(zone)
  if (face === undefined) {
    face = new Intl.DateTimeFormat('en-GB', {
      timeZone: zone,
      hourCycle: 'h23',
      year: 'numeric',
      month: '2-digit',
      day: '2-digit',
      hour: '2-digit',
      minute: '2-digit',
      second: '2-digit',
    })
    clockFaces.set(zone, face)
  }
  return face
}
