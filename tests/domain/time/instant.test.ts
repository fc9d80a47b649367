import { describe, expect, it } from 'vitest'
import { addDays, day, daysBetween } from '#shared/time/day'
import {
  addMinutes,
  addSeconds,
  dayAt,
  Instant,
  InstantInput,
  instantMs,
  instantOn,
  isTimeZone,
  toInstant,
} from '#shared/time/instant'

const at = (text: string) => InstantInput.parse(text)
const hours = (ms: number) => ms / 3_600_000

describe('instants', () => {
  it('reads what a caller may send and writes one form', () => {
    expect(at('2026-05-01T09:30:00Z')).toBe('2026-05-01T09:30:00.000Z')
    expect(at('2026-05-01T09:30:00.1+01:00')).toBe('2026-05-01T08:30:00.100Z')
    expect(Instant.safeParse('2026-05-01T09:30:00Z').success).toBe(false)
    expect(InstantInput.safeParse('2026-02-30T09:30:00Z').success).toBe(false)
    expect(InstantInput.safeParse('2026-05-01').success).toBe(false)
    expect(addSeconds(at('2026-12-31T23:30:00Z'), 2700)).toBe('2027-01-01T00:15:00.000Z')
    expect(addMinutes(at('2026-12-31T23:30:00Z'), -1)).toBe('2026-12-31T23:29:00.000Z')
    expect(instantMs(toInstant(1234))).toBe(1234)
  })

  it('knows a zone from a word', () => {
    expect(isTimeZone('Europe/London')).toBe(true)
    expect(isTimeZone('Brewery/Cellar')).toBe(false)
  })

  it.each([
    ['2026-03-28T23:59:59Z', 'Europe/London', '2026-03-28'],
    ['2026-06-30T23:00:00Z', 'Europe/London', '2026-07-01'],
    ['2026-06-30T23:00:00Z', 'America/New_York', '2026-06-30'],
    ['2026-06-30T14:00:00Z', 'Australia/Lord_Howe', '2026-07-01'],
    ['2026-06-30T23:00:00Z', 'UTC', '2026-06-30'],
  ])('%s in %s is on %s', (text, zone, on) => {
    expect(dayAt(at(text), zone)).toBe(on)
  })
})

describe('the clock of the space', () => {
  // Offsets: IANA time zone data, as the runtime carries it. The lengths are worked example T12.
  it.each([
    ['Europe/London', '2026-03-29', 23],
    ['Europe/London', '2026-10-25', 25],
    ['Australia/Lord_Howe', '2026-04-05', 24.5],
    ['America/Santiago', '2026-09-06', 23],
    ['America/Santiago', '2026-09-07', 24],
    ['UTC', '2026-03-29', 24],
  ])('in %s the day %s lasts %d hours, and a one-day loan stays one day', (zone, text, length) => {
    const on = day(text)
    const start = instantOn(on, 0, 0, zone)
    const end = instantOn(addDays(on, 1), 0, 0, zone)
    expect(hours(instantMs(end) - instantMs(start))).toBe(length)
    expect(dayAt(start, zone)).toBe(on)
    expect(dayAt(toInstant(instantMs(end) - 1), zone)).toBe(on)
    expect(daysBetween(dayAt(start, zone), dayAt(end, zone))).toBe(1)
  })

  it.each([
    // A skipped time takes the offset before the gap; a repeated one is its first showing.
    ['2026-03-29', 1, 30, 'Europe/London', '2026-03-29T01:30:00.000Z'],
    ['2026-10-25', 1, 30, 'Europe/London', '2026-10-25T00:30:00.000Z'],
    ['2007-03-11', 2, 30, 'America/New_York', '2007-03-11T07:30:00.000Z'],
    ['2007-11-04', 1, 30, 'America/New_York', '2007-11-04T05:30:00.000Z'],
    ['2026-09-06', 0, 0, 'America/Santiago', '2026-09-06T04:00:00.000Z'],
    ['2026-03-28', 9, 0, 'Europe/London', '2026-03-28T09:00:00.000Z'],
    ['2026-03-29', 9, 0, 'Europe/London', '2026-03-29T08:00:00.000Z'],
    ['2026-10-24', 9, 0, 'Europe/London', '2026-10-24T08:00:00.000Z'],
    ['2026-10-25', 9, 0, 'Europe/London', '2026-10-25T09:00:00.000Z'],
    ['2026-07-01', 9, 0, 'Asia/Kolkata', '2026-07-01T03:30:00.000Z'],
    ['2026-07-01', 9, 0, 'Pacific/Apia', '2026-06-30T20:00:00.000Z'],
  ])('%s %i:%i in %s is %s', (on, hour, minute, zone, instant) => {
    expect(instantOn(day(on), hour, minute, zone)).toBe(instant)
  })

  it('shows nine in the morning on each day of ten years in seven zones', () => {
    const zones = [
      'Europe/London',
      'America/New_York',
      'Australia/Lord_Howe',
      'America/Santiago',
      'Asia/Kolkata',
      'UTC',
      'Pacific/Auckland',
    ]
    for (const zone of zones) {
      const face = new Intl.DateTimeFormat('en-GB', { timeZone: zone, timeStyle: 'short' })
      for (let on = day('2020-01-01'); on < day('2030-01-01'); on = addDays(on, 1)) {
        const nine = instantOn(on, 9, 0, zone)
        if (dayAt(nine, zone) !== on || face.format(instantMs(nine)) !== '09:00') {
          expect.fail(`${zone} ${on}: ${nine}`)
        }
      }
    }
  })
})
