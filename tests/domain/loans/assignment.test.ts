import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { assignByStart, leftWithout, mostServed } from '#shared/loans/assignment'
import { heldPerDay, rangesShareNoDay } from './support-checks.ts'
import { anyBookings, named, nth } from './support.ts'

const window = { from: nth(1), to: nth(60) }

describe('handing out items by earliest start', () => {
  it('T1: needs as many items as the busiest day, and gives the lowest free one', () => {
    const bookings = named('A[1,4) B[2,6) C[3,5) D[4,8) E[5,9) F[6,7) G[8,10)')
    expect(Math.max(...heldPerDay(bookings, window))).toBe(3)
    const places = Object.fromEntries([...assignByStart(bookings, 3)].map(([id, place]) => [id, place + 1]))
    expect(places).toEqual({ A: 1, B: 2, C: 3, D: 1, E: 3, F: 2, G: 1 })
    expect(leftWithout(bookings, 3)).toEqual([])
    expect(leftWithout(bookings, 2)).not.toEqual([])
  })

  it('T2: naming items late serves what naming them on request would refuse', () => {
    const asked = named('a[1,3) d[6,8) b[2,5) c[4,7)')
    const places = Object.fromEntries([...assignByStart(asked, 2)].map(([id, place]) => [id, place + 1]))
    expect(places).toEqual({ a: 1, b: 2, c: 1, d: 2 })
  })

  it('serves everyone exactly when no day is over-full, and no item twice on a day', () => {
    fc.assert(
      fc.property(anyBookings, fc.integer({ min: 1, max: 6 }), (bookings, places) => {
        const given = assignByStart(bookings, places)
        const busiest = Math.max(0, ...heldPerDay(bookings, window))
        expect(given.size === bookings.length).toBe(busiest <= places)
        expect(new Set(leftWithout(bookings, places))).toEqual(
          new Set(bookings.map(({ id }) => id).filter((id) => !given.has(id))),
        )
        expect(rangesShareNoDay(bookings, given)).toBe(true)
      }),
      { numRuns: 500 },
    )
  })

  it('takes nothing from who is out', () => {
    const out = named('X[1,9)').map((booking) => ({ ...booking, pinned: true }))
    const waiting = named('A[1,4) B[10,12)')
    expect(leftWithout([...waiting, ...out], 1)).toEqual(['A'])
    // The only item in service is not the one that is out: still one in all, and it is promised to X.
    expect(leftWithout([...waiting, ...out], 0)).toEqual(['A', 'B'])
    const both = [...out, ...named('Y[2,12)').map((booking) => ({ ...booking, pinned: true }))]
    expect(leftWithout([...waiting, ...both], 1)).toEqual(['A', 'B'])
    expect(leftWithout([...named('C[12,13)'), ...both], 1)).toEqual([])
  })
})

describe('serving the most bookings', () => {
  it('T3: one item, ten bookings, four served', () => {
    const bookings = named(
      'P[1,4) Q[3,5) R[0,6) S[5,7) T[3,9) U[5,9) V[6,10) W[8,11) X[8,12) Y[2,14) Z[12,16)',
    )
    expect(mostServed(bookings, 1)).toEqual(['P', 'S', 'W', 'Z'])
  })

  it('T4: neither earliest start nor shortest first is the most', () => {
    const long = named('L[0,10) M[1,3) N[4,6)')
    expect(assignByStart(long, 1).size).toBe(1)
    expect(mostServed(long, 1)).toEqual(['M', 'N'])
    expect(mostServed(named('A[1,5) B[4,6) C[5,9)'), 1)).toEqual(['A', 'C'])
  })

  it('is never beaten by trying every subset', () => {
    const few = fc.array(fc.tuple(fc.integer({ min: 1, max: 12 }), fc.integer({ min: 1, max: 5 })), {
      maxLength: 8,
    })
    fc.assert(
      fc.property(few, fc.integer({ min: 1, max: 3 }), (spans, places) => {
        const bookings = named(
          spans.map(([from, days], index) => `b${index}[${from},${from + days})`).join(' '),
        )
        let best = 0
        for (let subset = 0; subset < 1 << bookings.length; subset += 1) {
          const chosen = bookings.filter((_, index) => subset & (1 << index))
          if (Math.max(0, ...heldPerDay(chosen, window)) <= places) best = Math.max(best, chosen.length)
        }
        const served = mostServed(bookings, places)
        expect(served).toHaveLength(best)
        const kept = bookings.filter(({ id }) => served.includes(id))
        expect(Math.max(0, ...heldPerDay(kept, window))).toBeLessThanOrEqual(places)
      }),
      { numRuns: 200 },
    )
  })
})
