import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { blocksUntil, fits, freePerDay, heldPerDay, holdOf, spareByDay } from '#shared/loans/availability'
import { firstFree, nearestFree } from '#shared/loans/nearest'
import { dayRange, lengthDays } from '#shared/time/day-range'
import { addDays, daysBetween } from '#shared/time/day'
import { anyHold, halfOpen, naiveHeld, named, nth, nthOf } from './support.ts'

const window = { from: nth(1), to: nth(60) }

describe('what a loan blocks', () => {
  it.each([
    // status, return-by day, turnaround, today -> last blocked day
    ['requested', 5, 2, 1, 7],
    ['approved', 5, 2, 9, 7],
    ['out', 5, 2, 3, 7],
    ['out', 5, 2, 5, 7],
    ['out', 5, 2, 6, 8],
    ['out', 5, 0, 9, 9],
    ['out', 5, 2, 9, 11],
  ] as const)(
    '%s until day %i with turnaround %i, on day %i, blocks until day %i',
    (status, to, turn, today, last) => {
      expect(nthOf(blocksUntil({ status, to: nth(to) }, turn, nth(today)))).toBe(last)
    },
  )

  it('holds its own days and the turnaround after', () => {
    expect(holdOf({ from: nth(3), to: nth(4) }, 2)).toEqual(halfOpen(3, 7))
  })
})

describe('the count of free items', () => {
  it('T9: a kind of three, cap two, and the first free three-day slot', () => {
    const holds = [halfOpen(1, 4), halfOpen(2, 6), halfOpen(5, 8), halfOpen(5, 6)]
    const days = { from: nth(1), to: nth(8) }
    expect(heldPerDay(holds, days)).toEqual([1, 2, 2, 1, 3, 1, 1, 0])
    expect(spareByDay(3, holds, days)).toEqual([2, 1, 1, 2, 0, 2, 2, 3])
    const shelf = { serviceable: 2, holds, turnaroundDays: 0 }
    const slot = firstFree({ from: nth(1), to: nth(3) }, shelf, nth(1), nth(30))
    expect(slot && nthOf(slot.from)).toBe(6)
    expect(slot && lengthDays(slot)).toBe(3)
  })

  it('T11: touching bookings fit on one item, the same twice does not', () => {
    expect(fits(1, [halfOpen(1, 3)], halfOpen(3, 5))).toBe(true)
    expect(fits(1, [halfOpen(3, 5)], halfOpen(1, 3))).toBe(true)
    expect(fits(1, [halfOpen(1, 3)], halfOpen(1, 3))).toBe(false)
    expect(fits(0, [], halfOpen(1, 3))).toBe(false)
  })

  it('shows no day below zero, though more may be wanted than there is', () => {
    const twice = [halfOpen(2, 4), halfOpen(2, 4)]
    expect(spareByDay(1, twice, { from: nth(1), to: nth(4) })).toEqual([1, -1, -1, 1])
    expect(freePerDay(1, twice, { from: nth(1), to: nth(3) })).toEqual([
      { date: nth(1), serviceable: 1, free: 1 },
      { date: nth(2), serviceable: 1, free: 0 },
      { date: nth(3), serviceable: 1, free: 0 },
    ])
  })

  it('agrees with counting day by day', () => {
    fc.assert(
      fc.property(
        fc.array(anyHold),
        fc.integer({ min: 0, max: 5 }),
        anyHold,
        (holds, serviceable, wanted) => {
          const counted = dayRange(window).map((on) => serviceable - naiveHeld(holds, on))
          expect(spareByDay(serviceable, holds, window)).toEqual(counted)
          const naive = dayRange({ from: wanted.from, to: wanted.blocksUntil }).every(
            (on) => serviceable - naiveHeld(holds, on) >= 1,
          )
          expect(fits(serviceable, holds, wanted)).toBe(naive)
        },
      ),
      { numRuns: 500 },
    )
  })
})

describe('the nearest free window', () => {
  const shelf = { serviceable: 1, holds: named('A[10,20)'), turnaroundDays: 1 }
  const wanted = { from: nth(12), to: nth(14) }

  it('keeps the length, and prefers the later of two equally near', () => {
    // Back: days 6 to 8 with turnaround on 9, 6 days away. Forward: day 20, 8 days away.
    expect(nearestFree(wanted, shelf, nth(1), nth(60))).toEqual({ from: nth(6), to: nth(8) })
    const even = { from: nth(13), to: nth(15) }
    expect(nearestFree(even, shelf, nth(1), nth(60))).toEqual({ from: nth(20), to: nth(22) })
  })

  it('never looks before today or beyond how far one may book', () => {
    expect(nearestFree(wanted, shelf, nth(8), nth(60))).toEqual({ from: nth(20), to: nth(22) })
    expect(nearestFree(wanted, shelf, nth(8), nth(19))).toBeUndefined()
    expect(nearestFree(wanted, shelf, nth(60), nth(19))).toBeUndefined()
    expect(nearestFree(wanted, { ...shelf, serviceable: 0 }, nth(1), nth(60))).toBeUndefined()
  })

  it('is the closest of all windows that fit', () => {
    const turnaround = fc.integer({ min: 0, max: 3 })
    const count = fc.integer({ min: 1, max: 3 })
    fc.assert(
      fc.property(
        fc.array(anyHold),
        anyHold,
        count,
        turnaround,
        (holds, hold, serviceable, turnaroundDays) => {
          const range = { from: hold.from, to: hold.blocksUntil }
          const found = nearestFree(range, { serviceable, holds, turnaroundDays }, nth(1), nth(80))
          const distances = dayRange({ from: nth(1), to: nth(80) })
            .filter((from) => {
              const to = addDays(from, lengthDays(range) - 1)
              return fits(serviceable, holds, holdOf({ from, to }, turnaroundDays))
            })
            .map((from) => Math.abs(daysBetween(range.from, from)))
          expect(found && lengthDays(found)).toBe(distances.length > 0 ? lengthDays(range) : undefined)
          if (found) expect(Math.abs(daysBetween(range.from, found.from))).toBe(Math.min(...distances))
        },
      ),
      { numRuns: 300 },
    )
  })
})
