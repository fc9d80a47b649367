import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { EMPTY_LOT, valueLeftMinor, type LotValue } from '#shared/larder/cost'
import {
  effectOf,
  effectOfUndoing,
  replay,
  undoRefusal,
  type LedgerMove,
  type Outcome,
} from '#shared/larder/ledger'
import type { MoveReason } from '#shared/larder/vocabulary'
import type { Instant } from '#shared/time/instant'

const jar: LotValue = { basisMilli: 1_000_000, basisMinor: 1200, remainingMilli: 1_000_000 }

const effect = (outcome: Outcome) => {
  if (!outcome.ok) throw new Error('refused')
  return outcome.effect
}

describe('what a move does to a lot', () => {
  it('draws at cost', () => {
    const { chargeMinor, deltaMilli, after } = effect(effectOf(jar, { reason: 'draw', milli: 70_000 }))
    expect([chargeMinor, deltaMilli, after.remainingMilli]).toEqual([84, -70_000, 930_000])
  })

  it('says by how much a lot is short', () => {
    const outcome = effectOf(jar, { reason: 'draw', milli: 1_000_001 })
    expect(outcome).toEqual({ ok: false, reason: 'short', shortMilli: 1 })
  })

  it.each<[MoveReason, number, number, number]>([
    ['waste', 500_000, -500_000, -600],
    ['recount', 900_000, -100_000, -120],
    ['recount', 1_000_000, 0, 0],
    ['recount', 1_100_000, 100_000, 0],
    ['top-up', 250_000, 250_000, 0],
  ])('%s of %i charges nobody', (reason, milli, deltaMilli, valueMinor) => {
    const found = effect(effectOf(jar, { reason, milli }))
    expect(found).toMatchObject({ deltaMilli, valueMinor, chargeMinor: 0 })
  })

  it('takes a draw back at what it was charged', () => {
    const drawn = effect(effectOf(jar, { reason: 'draw', milli: 333_333 }))
    const slip: LedgerMove = { reason: 'draw', ...drawn }
    const back = effect(effectOfUndoing(drawn.after, slip))
    expect(back.chargeMinor).toBe(-drawn.chargeMinor)
    expect(valueLeftMinor(back.after)).toBe(1200)
    expect(back.after.remainingMilli).toBe(1_000_000)
  })

  it('cannot take back what was added once it is gone', () => {
    const topped = effect(effectOf(EMPTY_LOT, { reason: 'top-up', milli: 500, costMinor: 9 }))
    const drawn = effect(effectOf(topped.after, { reason: 'draw', milli: 200 }))
    expect(effectOfUndoing(drawn.after, { reason: 'top-up', ...topped })).toMatchObject({ ok: false })
  })
})

describe('undoing a slip', () => {
  const at = '2031-05-06T10:00:00.000Z' as Instant
  const move = { reason: 'draw' as const, at, undone: false, undoes: false }
  it.each([
    ['within a quarter of an hour', move, '2031-05-06T10:15:00.000Z', undefined],
    ['a millisecond later', move, '2031-05-06T10:15:00.001Z', 'too-late'],
    ['twice', { ...move, undone: true }, at, 'undone'],
    ['an undoing', { ...move, undoes: true }, at, 'is-undo'],
    ['the first filling', { ...move, reason: 'opening' as const }, at, 'opening'],
  ])('%s', (_name, which, now, refusal) => {
    expect(undoRefusal(which, now as Instant)).toBe(refusal)
  })
})

type Step = { reason: MoveReason; milli: number; costMinor: number } | { undo: number }

const step: fc.Arbitrary<Step> = fc.oneof(
  fc.record({
    reason: fc.constantFrom<MoveReason>('draw', 'draw', 'draw', 'top-up', 'waste', 'recount'),
    milli: fc.integer({ min: 0, max: 400_000 }),
    costMinor: fc.integer({ min: 0, max: 900 }),
  }),
  fc.record({ undo: fc.nat(60) }),
)

describe('any history of a lot', () => {
  it('never goes below nothing, and its cost is all there: in the jar, on tabs, or written off', () => {
    const history = fc.array(step, { maxLength: 60 })
    fc.assert(
      fc.property(history, fc.integer({ min: 1, max: 1_000_000 }), fc.nat(5000), (steps, milli, minor) => {
        let lot: LotValue = { basisMilli: milli, basisMinor: minor, remainingMilli: milli }
        const ledger: LedgerMove[] = [
          { reason: 'opening', deltaMilli: milli, valueMinor: minor, chargeMinor: 0 },
        ]
        const settled = new Set<LedgerMove>()
        for (const next of steps) {
          const slip = 'undo' in next ? ledger[1 + next.undo] : undefined
          if (slip && settled.has(slip)) continue
          const reason = 'undo' in next ? slip?.reason : next.reason
          const outcome = 'undo' in next ? slip && effectOfUndoing(lot, slip) : effectOf(lot, next)
          if (!outcome?.ok || reason === undefined) continue
          const move = { reason, ...outcome.effect }
          ledger.push(move)
          // A move is undone once, and an undoing not at all.
          if (slip) settled.add(slip).add(move)
          lot = outcome.effect.after
          const sums = replay(ledger)
          expect(sums.remainingMilli).toBe(lot.remainingMilli)
          expect(lot.remainingMilli).toBeGreaterThanOrEqual(0)
          expect(sums.valueMinor).toBe(valueLeftMinor(lot))
          expect(valueLeftMinor(lot)).toBeGreaterThanOrEqual(0)
          if (lot.remainingMilli === 0) expect(sums.valueMinor).toBe(0)
        }
        const drawn = ledger.filter((move) => move.reason === 'draw')
        for (const move of drawn) expect(move.chargeMinor).toBe(0 - move.valueMinor)
      }),
      { numRuns: 1000 },
    )
  })
})
