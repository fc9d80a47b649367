import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  addDays,
  CalendarDay,
  day,
  dayFromNumber,
  dayNumber,
  daysBetween,
  earlierDay,
  laterDay,
  monthEnd,
  monthStart,
  parseDay,
  weekday,
} from '#shared/time/day'
import { dayRange, lengthDays, rangeFrom, rangeHolds, rangesOverlap } from '#shared/time/day-range'

const FIRST = dayNumber(day('1900-01-01'))
const LAST = dayNumber(day('2999-12-31'))
const anyDayNumber = fc.integer({ min: FIRST, max: LAST })

describe('calendar days', () => {
  it.each([
    ['1970-01-01', 0],
    ['1969-12-31', -1],
    ['2000-02-29', 11016],
    ['2000-03-01', 11017],
    ['2100-03-01', 47541],
    ['1900-01-01', -25567],
    ['2999-12-31', 376199],
  ])('%s is day number %i', (text, number) => {
    expect(dayNumber(day(text))).toBe(number)
    expect(dayFromNumber(number)).toBe(text)
  })

  it('agrees with UTC midnights of the runtime on every day it can name', () => {
    for (let number = FIRST; number <= LAST; number += 1) {
      const text = new Date(number * 86_400_000).toISOString().slice(0, 10)
      if (dayFromNumber(number) !== text || dayNumber(text as CalendarDay) !== number) {
        expect.fail(`day ${number} should be ${text}, is ${dayFromNumber(number)}`)
      }
    }
  })

  it.each([
    '2026-02-29',
    '2026-13-01',
    '2026-00-10',
    '2026-1-1',
    '2026-01-01T00:00Z',
    '',
    ' 2026-01-01',
    '1899-12-31',
    '3000-01-01',
    '0000-01-01',
    '２０２６-01-01',
  ])('refuses %j', (text) => {
    expect(parseDay(text)).toBeUndefined()
    expect(() => day(text)).toThrow(RangeError)
  })

  it.each([0.5, NaN, Infinity, -25568, 376200])('has no day number %d', (number) => {
    expect(() => dayFromNumber(number)).toThrow(RangeError)
  })

  it.each([
    ['2026-05-01', 'friday'],
    ['1970-01-01', 'thursday'],
    ['1969-12-28', 'sunday'],
    ['2000-02-29', 'tuesday'],
  ])('%s is a %s', (text, name) => {
    expect(weekday(day(text))).toBe(name)
  })

  it('sorts as text in the order of time, and adds what it subtracts', () => {
    fc.assert(
      fc.property(anyDayNumber, anyDayNumber, (a, b) => {
        const from = dayFromNumber(a)
        const to = dayFromNumber(b)
        expect(from < to).toBe(a < b)
        expect(addDays(from, daysBetween(from, to))).toBe(to)
        expect(earlierDay(from, to)).toBe(dayFromNumber(Math.min(a, b)))
        expect(laterDay(from, to)).toBe(dayFromNumber(Math.max(a, b)))
      }),
    )
  })

  it('finds the ends of months', () => {
    expect(monthEnd(day('2028-02-10'))).toBe('2028-02-29')
    expect(monthEnd(day('2026-02-01'))).toBe('2026-02-28')
    expect(monthStart(day('2026-12-31'))).toBe('2026-12-01')
    expect(monthStart(day('2026-12-31'), 1)).toBe('2027-01-01')
    expect(monthStart(day('2026-01-31'), -1)).toBe('2025-12-01')
  })
})

describe('ranges of days', () => {
  const range = (from: string, to: string) => ({ from: day(from), to: day(to) })

  it('counts both ends', () => {
    expect(lengthDays(range('2026-05-01', '2026-05-03'))).toBe(3)
    expect(lengthDays(range('2026-05-01', '2026-05-01'))).toBe(1)
    expect(lengthDays(range('2026-05-02', '2026-05-01'))).toBe(0)
    expect(dayRange(range('2026-02-27', '2026-03-01'))).toEqual(['2026-02-27', '2026-02-28', '2026-03-01'])
    expect(dayRange(range('2026-05-02', '2026-05-01'))).toEqual([])
  })

  it('keeps its length when it moves', () => {
    expect(rangeFrom(range('2026-05-01', '2026-05-03'), day('2026-12-30'))).toEqual(
      range('2026-12-30', '2027-01-01'),
    )
  })

  it('overlaps exactly when a day is in both', () => {
    const some = fc.tuple(fc.integer({ min: 0, max: 20 }), fc.integer({ min: -1, max: 8 }))
    fc.assert(
      fc.property(some, some, ([a, aLength], [b, bLength]) => {
        const one = { from: dayFromNumber(a), to: dayFromNumber(a + aLength) }
        const two = { from: dayFromNumber(b), to: dayFromNumber(b + bLength) }
        const shared = dayRange(one).some((on) => rangeHolds(two, on))
        expect(rangesOverlap(one, two)).toBe(shared)
      }),
    )
  })
})
