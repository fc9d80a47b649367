import { fits, type Hold, holdOf } from '#shared/loans/availability'
import { type LimitBreach, limitBreaches } from '#shared/loans/limits'
import { addDays, laterDay } from '#shared/time/day'
import type { DayRange } from '#shared/time/day-range'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'
import { invalidField, notFound } from '../../errors.ts'
import type { Missed } from './instead.ts'
import { holdBind, holdsOfKinds, poolKey } from './shelf.ts'
import { KINDS_TO_BOOK, type KindRow, OWN_LOANS, type OwnRow } from './shelf-queries.ts'

export interface Line extends DayRange {
  kindId: string
  wild?: boolean | undefined
  stepId?: string | undefined
}

export interface Booking {
  lines: readonly Line[]
  /** Where line `index` stands in the request, for error paths. */
  pathOf: (index: number, field: string) => string
  basketId: string | null
  batchId?: string | undefined
  note?: string | undefined
  memberId?: string | undefined
  overrideReason?: string | undefined
}

type Answer = { ok: true } | { ok: false; refusal: Refusal }
export type Refusal =
  | { reason: 'needs-induction'; kind: KindRow }
  | { reason: 'over-limit'; kind: KindRow; breaches: LimitBreach[] }
  | { reason: 'not-available'; missed: Missed }

export interface Facts {
  kinds: Map<string, KindRow>
  own: Map<string, DayRange[]>
  holds: Map<string, Hold[]>
}

/** What stands in the way is read from today on: enough to say which days would do instead. */
export function loadFacts(deps: Deps, memberId: string, booking: Booking): Facts {
  const today = deps.clock.today()
  booking.lines.forEach((line, index) => {
    if (line.from < today)
      throw invalidField(booking.pathOf(index, 'from'), 'That day has passed. Choose a later one.')
  })
  const kindIds = [...new Set(booking.lines.map(({ kindId }) => kindId))]
  const bind = { memberId, today, kindIds: JSON.stringify(kindIds) }
  const kinds = new Map(
    prepared<object, KindRow>(deps.db, KINDS_TO_BOOK)
      .all({ memberId, kindIds: bind.kindIds })
      .map((kind) => [kind.id, kind]),
  )
  for (const { kindId } of booking.lines) if (!kinds.has(kindId)) throw notFound('That kind')
  const own = new Map<string, DayRange[]>()
  for (const { kindId, from, to } of prepared<typeof bind, OwnRow>(deps.db, OWN_LOANS).all(bind))
    own.set(kindId, [...(own.get(kindId) ?? []), { from, to }])
  return {
    kinds,
    own,
    holds: holdsOfKinds(
      deps,
      holdBind(deps, memberId, { from: today, to: horizon(booking, kinds, today) }),
      kindIds,
    ),
  }
}

/** The last day that could matter: the end of the latest booking these kinds allow. */
function horizon(booking: Booking, kinds: Map<string, KindRow>, today: Line['from']) {
  return booking.lines.reduce((latest, { kindId, to }) => {
    const kind = kinds.get(kindId)
    const ahead = addDays(today, (kind?.maxAheadDays ?? 0) + (kind?.maxLoanDays ?? 0))
    return laterDay(latest, addDays(laterDay(ahead, to), kind?.turnaroundDays ?? 0))
  }, today)
}

/** Asks the rules about one line, and lets the lines after it see what it takes. */
export function answerLine(facts: Facts, line: Line, today: Line['from'], mayExceed: boolean): Answer {
  const kind = kindAt(facts, line)
  const wild = isWild(kind, line)
  const range = { from: line.from, to: line.to }
  if (kind.needsInduction === 1 && (kind.inductedUntil ?? '') < line.from)
    return { ok: false, refusal: { reason: 'needs-induction', kind } }
  const own = facts.own.get(kind.id) ?? []
  const breaches = mayExceed ? [] : limitBreaches(range, kind, own, today)
  if (breaches.length > 0) return { ok: false, refusal: { reason: 'over-limit', kind, breaches } }
  const key = poolKey(kind.id, wild)
  const holds = facts.holds.get(key) ?? []
  const serviceable = serviceableOf(kind, wild)
  const wanted = holdOf(range, kind.turnaroundDays)
  if (!fits(serviceable, holds, wanted))
    return {
      ok: false,
      refusal: { reason: 'not-available', missed: { kind, wild, range, serviceable, holds } },
    }
  facts.holds.set(key, [...holds, wanted])
  facts.own.set(kind.id, [...own, range])
  return { ok: true }
}

export const isWild = (kind: KindRow, line: Line) => kind.wildOnly === 1 || (line.wild ?? false)

function serviceableOf(kind: KindRow, wild: boolean) {
  if (kind.retiredAt !== null) return 0
  return wild ? kind.serviceableWild : kind.serviceableTame
}

export function kindAt(facts: Facts, line: Line): KindRow {
  const kind = facts.kinds.get(line.kindId)
  if (!kind) throw notFound('That kind')
  return kind
}

export function lineAt(booking: Booking, index: number): Line {
  const line = booking.lines[index]
  if (!line) throw new RangeError(`no line ${index}`)
  return line
}
