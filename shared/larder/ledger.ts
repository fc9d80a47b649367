import { addMinutes, type Instant } from '../time/instant.ts'
import { afterAdding, afterTaking, costOfTakingMinor, valueLeftMinor, type LotValue } from './cost.ts'
import type { LedgerReason, MoveReason } from './vocabulary.ts'

/** How long a slip can be undone by the one who made it. A judgement: long enough to notice, too short to rewrite a month. */
export const UNDO_MINUTES = 15

/** What a move does to its lot. */
export interface Effect {
  deltaMilli: number
  /** What its value grows by; negative when something is taken. */
  valueMinor: number
  /** What goes on the tab of the one who moved it: for draws only. */
  chargeMinor: number
  after: LotValue
}

export type Outcome = { ok: true; effect: Effect } | { ok: false; reason: 'short'; shortMilli: number }

interface Asked {
  reason: MoveReason
  /** What came or went; for a recount, what was found. */
  milli: number
  /** What was paid for a top-up, minor units. */
  costMinor?: number
}

/**
 * What a move would do, or by how much the lot is short. Waste and a recount that finds less are a loss of the space: they
 * take their share of the cost with them. A recount that finds more adds no cost.
 * From 1000 g at 12.00, a draw of 70 g charges 0.84.
 */
export function effectOf(lot: LotValue, { reason, milli, costMinor = 0 }: Asked): Outcome {
  switch (reason) {
    case 'draw':
      return taken(lot, milli, true)
    case 'waste':
      return taken(lot, milli, false)
    case 'top-up':
      return added(lot, milli, costMinor)
    case 'recount':
      return milli < lot.remainingMilli
        ? taken(lot, lot.remainingMilli - milli, false)
        : added(lot, milli - lot.remainingMilli, 0)
  }
}

function taken(lot: LotValue, milli: number, charged: boolean): Outcome {
  if (milli > lot.remainingMilli)
    return { ok: false, reason: 'short', shortMilli: milli - lot.remainingMilli }
  const costMinor = costOfTakingMinor(lot, milli)
  return {
    ok: true,
    effect: {
      deltaMilli: -milli,
      valueMinor: 0 - costMinor,
      chargeMinor: charged ? costMinor : 0,
      after: afterTaking(lot, milli),
    },
  }
}

function added(lot: LotValue, milli: number, costMinor: number): Outcome {
  const after = milli === 0 && costMinor === 0 ? lot : afterAdding(lot, milli, costMinor)
  return { ok: true, effect: { deltaMilli: milli, valueMinor: costMinor, chargeMinor: 0, after } }
}

/** A move as it stands in the ledger. */
export interface LedgerMove {
  reason: LedgerReason
  deltaMilli: number
  valueMinor: number
  chargeMinor: number
}

/**
 * The move that takes a slip back. What was taken goes in again at what it was charged or written off; what was added
 * comes out with what it cost, as far as that is still there, and with all of it when the lot ends empty.
 */
export function effectOfUndoing(lot: LotValue, slip: LedgerMove): Outcome {
  if (slip.deltaMilli <= 0) {
    const back = added(lot, 0 - slip.deltaMilli, 0 - slip.valueMinor)
    if (back.ok) back.effect.chargeMinor = 0 - slip.chargeMinor
    return back
  }
  const left = lot.remainingMilli - slip.deltaMilli
  if (left < 0) return { ok: false, reason: 'short', shortMilli: 0 - left }
  const worth = valueLeftMinor(lot)
  const out = left === 0 ? worth : Math.min(worth, slip.valueMinor)
  const after = { basisMilli: left, basisMinor: worth - out, remainingMilli: left }
  return { ok: true, effect: { deltaMilli: 0 - slip.deltaMilli, valueMinor: 0 - out, chargeMinor: 0, after } }
}

export type UndoRefusal = 'opening' | 'undone' | 'is-undo' | 'too-late'

/** Whether a move can still be taken back at a moment; a steward has no more time than anyone, a recount mends the rest. */
export function undoRefusal(
  move: { reason: LedgerReason; at: Instant; undone: boolean; undoes: boolean },
  now: Instant,
): UndoRefusal | undefined {
  if (move.reason === 'opening') return 'opening'
  if (move.undoes) return 'is-undo'
  if (move.undone) return 'undone'
  if (now > undoUntil(move.at)) return 'too-late'
  return undefined
}

export const undoUntil = (at: Instant): Instant => addMinutes(at, UNDO_MINUTES)

/** Remaining, value left and charges of a lot, added up from its moves alone: what the database must agree with. */
export function replay(moves: readonly LedgerMove[]) {
  const sum = { remainingMilli: 0, valueMinor: 0, chargedMinor: 0 }
  for (const move of moves) {
    sum.remainingMilli += move.deltaMilli
    sum.valueMinor += move.valueMinor
    sum.chargedMinor += move.chargeMinor
  }
  return sum
}
