import { earliestStart, type ShelfDemand } from '#shared/batches/earliest-start'
import { planLines, planSpans, stepDays } from '#shared/batches/plan'
import type { PlanLineReply } from '#shared/batches/plan-contract'
import { heldPerDay, spareByDay } from '#shared/loans/availability'
import { addDays, dayFromNumber, dayNumber, earlierDay, laterDay, type CalendarDay } from '#shared/time/day'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { holdBind, holdsOfKinds, poolKey } from '../loans/shelf.ts'
import { KINDS_TO_BOOK, OWN_LOANS, type KindRow, type OwnRow } from '../loans/shelf-queries.ts'
import { basketOf, checkPlan, loadPlan, longestLoan, quoteLines, type BatchPlan } from './plan.ts'

/** A plan with no kit at all can start any day; no further than this is looked. */
const LOOK_AHEAD_DAYS = 730

/**
 * The first day, today or later, from which every booking of the plan would be granted as far as the shelf and the limits
 * of its kinds go; with each line as the desk would answer it (an induction may still be missing).
 */
export function findEarliestStart(
  deps: Deps,
  user: SignedIn,
  batchId: string,
  after: CalendarDay | undefined,
): { startOn: CalendarDay | null; searchedTo: CalendarDay; lines: PlanLineReply[] } {
  const plan = loadPlan(deps.db, user.id, batchId)
  checkPlan(plan)
  const { startOn, searchedTo } = searchStart(deps, user, plan, after)
  if (startOn === undefined) return { startOn: null, searchedTo, lines: [] }
  const lines = planLines(plan.steps, stepDays(plan.steps, startOn), longestLoan(plan))
  return { startOn, searchedTo, lines: quoteLines(deps, user, plan, lines) }
}

/** The search alone: four statements and the rule. */
export function searchStart(
  deps: Deps,
  user: SignedIn,
  plan: BatchPlan,
  after: CalendarDay | undefined,
): { startOn: CalendarDay | undefined; searchedTo: CalendarDay } {
  const today = deps.clock.today()
  const first = laterDay(after ?? today, today)
  const spans = planSpans(plan.steps, longestLoan(plan))
  const kindIds = [...spans.keys()]
  const kinds = prepared<object, KindRow>(deps.db, KINDS_TO_BOOK).all({
    memberId: user.id,
    kindIds: JSON.stringify(kindIds),
  })
  const last = lastStart(kinds, spans, today)
  const searchedTo = laterDay(last, addDays(first, -1))
  if (last < first) return { startOn: undefined, searchedTo }
  const longestSpan = Math.max(0, ...[...spans.values()].flat().map((span) => span.to))
  const turnaround = Math.max(0, ...kinds.map((kind) => kind.turnaroundDays))
  const range = { from: first, to: addDays(last, longestSpan + turnaround) }
  const holds = holdsOfKinds(deps, holdBind(deps, user.id, range), kindIds)
  const own = ownLoans(deps, user.id, kindIds, today)
  const wildKinds = wildLines(plan)
  const shelves = kinds.flatMap((kind): ShelfDemand[] => {
    const days = spans.get(kind.id) ?? []
    const wild = kind.wildOnly === 1 || wildKinds.has(kind.id)
    const serviceable = kind.retiredAt ? 0 : wild ? kind.serviceableWild : kind.serviceableTame
    return [
      {
        spare: spareByDay(serviceable, holds.get(poolKey(kind.id, wild)) ?? [], range),
        spans: days.map(({ from, to }) => ({ from, to: to + kind.turnaroundDays })),
      },
      // What one member may hold at once is a shelf of its own.
      {
        spare: heldPerDay(own.get(kind.id) ?? [], range).map((held) => kind.maxPerMember - held),
        spans: days,
      },
    ]
  })
  const found = earliestStart({
    shelves,
    first: 0,
    last: dayNumber(last) - dayNumber(first),
  })
  return { startOn: found === undefined ? undefined : dayFromNumber(dayNumber(first) + found), searchedTo }
}

/** No start may have a booking further ahead than its kind allows. */
function lastStart(
  kinds: readonly KindRow[],
  spans: ReadonlyMap<string, { from: number; to: number }[]>,
  today: CalendarDay,
): CalendarDay {
  return kinds.reduce(
    (last, kind) => {
      const latest = Math.max(0, ...(spans.get(kind.id) ?? []).map((span) => span.from))
      return earlierDay(last, addDays(today, kind.maxAheadDays - latest))
    },
    addDays(today, LOOK_AHEAD_DAYS),
  )
}

function ownLoans(deps: Deps, memberId: string, kindIds: readonly string[], today: CalendarDay) {
  const own = new Map<string, { from: CalendarDay; blocksUntil: CalendarDay }[]>()
  const rows = prepared<object, OwnRow>(deps.db, OWN_LOANS).all({
    memberId,
    today,
    kindIds: JSON.stringify(kindIds),
  })
  for (const { kindId, from, to } of rows)
    own.set(kindId, [...(own.get(kindId) ?? []), { from, blocksUntil: to }])
  return own
}

/** Kinds the basket would ask for from the items kept for wild cultures. */
function wildLines(plan: BatchPlan): Set<string> {
  const days = new Map(plan.steps.map((step) => [step.id, dayFromNumber(step.dayOffset)]))
  const basket = basketOf(plan, planLines(plan.steps, days))
  return new Set(basket?.lines.flatMap((line) => (line.wild ? [line.kindId] : [])) ?? [])
}
