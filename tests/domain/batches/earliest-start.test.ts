import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  canStart,
  earliestStart,
  stretchesOf,
  type ShelfDemand,
  type Span,
} from '#shared/batches/earliest-start'

/** The plain way: every start, every day, every shelf, counted one by one. */
function bruteForce(shelves: readonly ShelfDemand[], first: number, last: number): number | undefined {
  for (let start = first; start <= last; start++) {
    const served = shelves.every(({ spare, spans }) =>
      spare.every((free, at) => {
        const taken = spans.filter((span) => start + span.from <= at && at <= start + span.to).length
        return taken === 0 || taken <= free
      }),
    )
    if (served) return start
  }
  return undefined
}

const DAYS = 90
const aSpan = fc
  .tuple(fc.integer({ min: 0, max: 20 }), fc.integer({ min: 0, max: 14 }))
  .map(([from, length]): Span => ({ from, to: from + length }))

/** A shelf as bookings make it: a few things, less what random loans hold. */
const aShelf = fc
  .record({
    items: fc.integer({ min: 1, max: 5 }),
    loans: fc.array(fc.tuple(fc.nat(DAYS), fc.integer({ min: 1, max: 30 })), { maxLength: 18 }),
    spans: fc.array(aSpan, { maxLength: 4 }),
  })
  .map(({ items, loans, spans }): ShelfDemand => ({
    spans,
    spare: Array.from(
      { length: DAYS },
      (_, at) => items - loans.filter(([from, length]) => from <= at && at < from + length).length,
    ),
  }))

describe('the earliest start of a plan', () => {
  it('is what counting every day of every start finds, on 2,000 random shelves', () => {
    let none = 0
    let later = 0
    fc.assert(
      fc.property(fc.array(aShelf, { minLength: 1, maxLength: 6 }), fc.nat(10), (shelves, first) => {
        const last = DAYS - 36
        const found = earliestStart({ shelves, first, last })
        expect(found).toBe(bruteForce(shelves, first, last))
        if (found === undefined) none += 1
        else if (found > first) later += 1
        if (found !== undefined) expect(canStart(shelves, found)).toBe(true)
      }),
      { numRuns: 2000, seed: 20310506 },
    )
    // Neither answer is rare, so both were tried.
    expect(none).toBeGreaterThan(100)
    expect(later).toBeGreaterThan(100)
  })

  it('finds a gap between two loans, and the day after them when the gap is too short', () => {
    const spare = [1, 0, 1, 1, 0, 1, 1, 1, 1, 1]
    const spans = (days: number) => [{ from: 0, to: days - 1 }]
    expect(earliestStart({ shelves: [{ spare, spans: spans(2) }], first: 1, last: 6 })).toBe(2)
    expect(earliestStart({ shelves: [{ spare, spans: spans(3) }], first: 1, last: 6 })).toBe(5)
    expect(earliestStart({ shelves: [{ spare, spans: spans(9) }], first: 0, last: 1 })).toBeUndefined()
  })

  it('takes two of a kind on the day a batch is racked from one vessel into another', () => {
    const spans = [
      { from: 0, to: 4 },
      { from: 4, to: 8 },
    ]
    const one = { spare: new Array<number>(12).fill(1), spans }
    const two = { spare: new Array<number>(12).fill(2), spans }
    expect(earliestStart({ shelves: [one], first: 0, last: 3 })).toBeUndefined()
    expect(earliestStart({ shelves: [two], first: 0, last: 3 })).toBe(0)
  })

  it('starts at once when nothing is needed, and never when no day is left', () => {
    expect(earliestStart({ shelves: [], first: 3, last: 3 })).toBe(3)
    expect(earliestStart({ shelves: [], first: 4, last: 3 })).toBeUndefined()
  })

  it('refuses to guess about days it was not told of', () => {
    const shelf = { spare: [1, 1, 1], spans: [{ from: 0, to: 2 }] }
    expect(() => earliestStart({ shelves: [shelf], first: 0, last: 1 })).toThrow(RangeError)
  })

  it('lays spans over each other', () => {
    expect(
      stretchesOf([
        { from: 0, to: 4 },
        { from: 3, to: 6 },
        { from: 7, to: 7 },
        { from: 9, to: 8 },
      ]),
    ).toEqual([
      { from: 0, to: 2, level: 1 },
      { from: 3, to: 4, level: 2 },
      { from: 5, to: 7, level: 1 },
    ])
  })
})
