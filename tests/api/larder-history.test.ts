import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { eq, sql } from 'drizzle-orm'
import type { Lot } from '#shared/larder/contract'
import { replay } from '#shared/larder/ledger'
import { MOVE_REASONS } from '#shared/larder/vocabulary'
import { lots, moves, settlements } from '#server/db/schema/larder'
import { balanceMinor, readTab, settleTab } from '#server/services/larder/tabs'
import { AppError } from '#server/errors'
import { moveLot, undoMove } from '#server/services/larder/draws'
import { readLot } from '#server/services/larder/lots'
import { makeIngredient, makeLot } from '#tests/support/larder'
import { people, type Person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

const signedIn = (person: Person, role: 'member' | 'steward') => ({
  ...person,
  role,
  status: 'active' as const,
})

const act = fc.oneof(
  {
    weight: 6,
    arbitrary: fc.record({
      kind: fc.constant('move' as const),
      who: fc.nat(2),
      lot: fc.nat(2),
      reason: fc.constantFrom('draw' as const, 'draw' as const, ...MOVE_REASONS),
      milli: fc.integer({ min: 1, max: 600_000 }),
      costMinor: fc.nat(700),
    }),
  },
  { weight: 2, arbitrary: fc.record({ kind: fc.constant('undo' as const), which: fc.nat(80) }) },
  {
    weight: 1,
    arbitrary: fc.record({
      kind: fc.constant('settle' as const),
      who: fc.nat(2),
      minor: fc.integer({ min: 1, max: 900 }),
    }),
  },
  { weight: 1, arbitrary: fc.record({ kind: fc.constant('wait' as const), minutes: fc.nat(20) }) },
)

/** Every lot and tab against its ledger, added up here and nowhere else. */
function check(app: TestApp, jars: Lot[], members: ReturnType<typeof signedIn>[]) {
  const ledger = app.db.select().from(moves).orderBy(moves.seq).all()
  const paid = app.db.select().from(settlements).all()
  for (const jar of jars) {
    const ofLot = ledger.filter((move) => move.lotId === jar.id)
    const sums = replay(ofLot)
    const seen = readLot(app.deps, jar.id)
    expect(Math.round(seen.remaining * 1000)).toBe(sums.remainingMilli)
    expect(seen.valueMinor).toBe(sums.valueMinor)
    expect(sums.remainingMilli).toBeGreaterThanOrEqual(0)
    let running = 0
    for (const move of ofLot) {
      running += move.deltaMilli
      expect(move.afterMilli).toBe(running)
      expect(running).toBeGreaterThanOrEqual(0)
    }
  }
  for (const member of members) {
    const charged = ledger.filter((move) => move.memberId === member.id)
    const owed =
      charged.reduce((sum, move) => sum + move.chargeMinor, 0) -
      paid.filter((row) => row.memberId === member.id).reduce((sum, row) => sum + row.amountMinor, 0)
    expect(balanceMinor(app.db, member.id)).toBe(owed)
    const tab = readTab(app.deps, member, member.id, {})
    expect(tab.balanceMinor).toBe(owed)
    expect(tab.items.reduce((sum, item) => sum + item.amountMinor, 0)).toBe(owed)
    expect(tab.items[0]?.balanceMinor ?? 0).toBe(owed)
  }
  // What was ever put into the lots is in them, on tabs, or written off: nothing lost, nothing made up.
  const sum = (list: typeof ledger) => list.reduce((total, move) => total + move.valueMinor, 0)
  const drawn = ledger.filter((move) => move.reason === 'draw')
  expect(0 - sum(drawn)).toBe(drawn.reduce((total, move) => total + move.chargeMinor, 0))
}

describe('any history of three lots and three people', () => {
  it('leaves remaining and tabs equal to the replayed ledger', () => {
    fc.assert(
      fc.property(fc.array(act, { minLength: 20, maxLength: 80 }), (acts) => {
        const app = testApp()
        const cast = people(app)
        const members = [
          signedIn(cast.ada, 'member'),
          signedIn(cast.bo, 'member'),
          signedIn(cast.sam, 'steward'),
        ]
        const honey = makeIngredient(app)
        const jars = [1000, 333.333, 50].map((quantity) =>
          makeLot(app, cast.sam, honey, { quantity, costMinor: 1001 }),
        )
        const made: { id: string; by: number }[] = []
        for (const step of acts) {
          try {
            if (step.kind === 'move') {
              const { reason, milli, costMinor } = step
              const request = { reason, quantity: milli / 1000, ...(reason === 'top-up' && { costMinor }) }
              const move = moveLot(app.deps, members[step.who]!, jars[step.lot]!.id, request)
              made.push({ id: move.id, by: step.who })
            } else if (step.kind === 'undo') {
              const slip = made[step.which]
              if (slip) undoMove(app.deps, members[slip.by]!, slip.id)
            } else if (step.kind === 'settle')
              settleTab(app.deps, cast.sam.id, members[step.who]!.id, {
                amountMinor: step.minor,
                method: 'cash',
              })
            else app.clock.advance({ minutes: step.minutes })
          } catch (error) {
            if (!(error instanceof AppError)) throw error
          }
        }
        check(app, jars, members)
        const short = app.db
          .select({ id: lots.id })
          .from(lots)
          .where(sql`${lots.remainingMilli} < 0`)
          .all()
        expect(short).toEqual([])
        expect(app.db.select().from(moves).where(eq(moves.reason, 'opening')).all()).toHaveLength(3)
        app.db.$client.close()
      }),
      { numRuns: 50 },
    )
  })
})
