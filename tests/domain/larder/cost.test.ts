import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  afterAdding,
  afterTaking,
  costOfTakingMinor,
  EMPTY_LOT,
  estimateMinor,
  valueLeftMinor,
} from '#shared/larder/cost'

const lotOf = (milli: number, minor: number) => afterAdding(EMPTY_LOT, milli, minor)

describe('the cost of what is taken from a lot', () => {
  it('splits a pound in three parts that make a pound', () => {
    let lot = lotOf(3000, 100)
    const parts = [1000, 1000, 1000].map((milli) => {
      const cost = costOfTakingMinor(lot, milli)
      lot = afterTaking(lot, milli)
      return cost
    })
    expect(parts).toEqual([33, 34, 33])
    expect(valueLeftMinor(lot)).toBe(0)
  })

  it('charges the first thousand spoonfuls like the last', () => {
    // A jar at 100 pence taken in 1000 parts: rounding each part on what is left would make the first 800 free.
    let lot = lotOf(1_000_000, 100)
    let firstHalf = 0
    for (let part = 0; part < 500; part++) {
      firstHalf += costOfTakingMinor(lot, 1000)
      lot = afterTaking(lot, 1000)
    }
    expect(firstHalf).toBe(50)
  })

  it('mixes what was left with what came', () => {
    const half = afterTaking(lotOf(1_000_000, 1000), 500_000)
    const mixed = afterAdding(half, 500_000, 900)
    expect(valueLeftMinor(mixed)).toBe(1400)
    expect(costOfTakingMinor(mixed, 100_000)).toBe(140)
  })

  it('refuses to take more than there is', () => {
    expect(() => costOfTakingMinor(lotOf(1000, 1), 1001)).toThrow(RangeError)
  })

  it('sums to the cost of the lot whatever the parts, each within a minor unit of its share', () => {
    const parts = fc.array(fc.integer({ min: 1, max: 10_000_000 }), { minLength: 1, maxLength: 40 })
    fc.assert(
      fc.property(parts, fc.integer({ min: 0, max: 100_000_000 }), (taken, costMinor) => {
        const whole = taken.reduce((sum, milli) => sum + milli, 0)
        let lot = lotOf(whole, costMinor)
        let sum = 0
        let gone = 0
        for (const milli of taken) {
          const cost = costOfTakingMinor(lot, milli)
          expect(cost).toBeGreaterThanOrEqual(0)
          expect(Math.abs(cost - (costMinor * milli) / whole)).toBeLessThanOrEqual(1.000001)
          lot = afterTaking(lot, milli)
          sum += cost
          gone += milli
          expect(Math.abs(sum - (costMinor * gone) / whole)).toBeLessThanOrEqual(0.500001)
        }
        expect(sum).toBe(costMinor)
      }),
      { numRuns: 500 },
    )
  })

  it('stays exact where the product passes 2^53', () => {
    const lot = lotOf(10_000_000_000, 100_000_000)
    expect(costOfTakingMinor(lot, 9_999_999_999)).toBe(100_000_000)
    expect(costOfTakingMinor(lot, 50)).toBe(1)
    expect(costOfTakingMinor(lot, 49)).toBe(0)
  })

  it('estimates upwards', () => {
    expect(estimateMinor({ costMinor: 1000, quantityMilli: 3_000_000 }, 1_000_000)).toBe(334)
  })
})
