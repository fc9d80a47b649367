import type { Instead } from '#shared/loans/contract'
import { fits, type Hold, holdOf } from '#shared/loans/availability'
import { nearestFree } from '#shared/loans/nearest'
import { addDays } from '#shared/time/day'
import { lengthDays, type DayRange } from '#shared/time/day-range'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'
import { holdBind, holdsOfKinds, poolKey } from './shelf.ts'
import { KINDS_INSTEAD, type KindRow } from './shelf-queries.ts'

/** As many other kinds as a refusal names. */
const ALTERNATIVES_MAX = 5

export interface Missed {
  kind: KindRow
  wild: boolean
  range: DayRange
  serviceable: number
  /** What stands in the way, from today on, other lines of the same basket counted. */
  holds: readonly Hold[]
}

/**
 * What would do in place of bookings that were refused: the nearest free days, and other kinds of the category that are free
 * on the wanted days, hold at least as much and need no induction the member lacks. Two statements, however many missed.
 */
export function insteadOf(deps: Deps, memberId: string, missed: readonly Missed[]): Instead[] {
  const categories = JSON.stringify([...new Set(missed.map(({ kind }) => kind.category))])
  const bind = { memberId, categories }
  const others = prepared<typeof bind, KindRow>(deps.db, KINDS_INSTEAD).all(bind)
  const from = deps.clock.today()
  const last = missed.reduce((latest, { range }) => (range.to > latest ? range.to : latest), from)
  const longest = Math.max(0, ...others.map(({ turnaroundDays }) => turnaroundDays))
  const holds = holdsOfKinds(
    deps,
    holdBind(deps, memberId, { from, to: addDays(last, longest) }),
    others.map(({ id }) => id),
  )
  return missed.map((line) => ({
    nearest: nearestOf(deps, line) ?? null,
    alternatives: others
      .filter((other) => other.id !== line.kind.id && wouldServe(other, line, holds))
      .slice(0, ALTERNATIVES_MAX)
      .map(({ id, name }) => ({ kindId: id, name })),
  }))
}

function nearestOf(deps: Deps, { kind, range, serviceable, holds }: Missed) {
  // Longer than any loan of the kind may be: no other days would make it right.
  if (lengthDays(range) > kind.maxLoanDays) return undefined
  const today = deps.clock.today()
  const shelf = { serviceable, holds, turnaroundDays: kind.turnaroundDays }
  return nearestFree(range, shelf, today, addDays(today, kind.maxAheadDays))
}

function wouldServe(other: KindRow, line: Missed, holds: Map<string, Hold[]>): boolean {
  const { kind, range, wild } = line
  if (other.category !== kind.category || other.wildOnly !== kind.wildOnly) return false
  if (kind.capacityLitres !== null && (other.capacityLitres ?? 0) < kind.capacityLitres) return false
  if (other.needsInduction === 1 && (other.inductedUntil ?? '') < range.from) return false
  if (lengthDays(range) > other.maxLoanDays) return false
  const serviceable = wild ? other.serviceableWild : other.serviceableTame
  return fits(serviceable, holds.get(poolKey(other.id, wild)) ?? [], holdOf(range, other.turnaroundDays))
}
