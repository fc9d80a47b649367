import type { KindCategory } from '#shared/kit/vocabulary'
import type { CalendarDay } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'

/** What blocks a day, in three parts: loans; what is late, from the day it was last rolled to; offers kept for others. */
const HOLDS = (whichLoans: string, whichKinds: string) => `
SELECT kind_id AS kindId, wild, from_on AS "from", blocks_until_on AS blocksUntil FROM loans
WHERE blocking = 1 AND ${whichLoans} AND blocks_until_on >= @from AND from_on <= @to
UNION ALL
SELECT kind_id, wild, date(blocks_until_on, '+1 day'), date(@today, '+' || turnaround_days || ' days') FROM loans
WHERE status = 'out' AND to_on < @today AND blocks_until_on < date(@today, '+' || turnaround_days || ' days') AND ${whichKinds}
UNION ALL
SELECT kind_id, wild, from_on, blocks_until_on FROM waitings
WHERE state = 'offered' AND offered_until > @now AND member_id <> @memberId AND blocks_until_on >= @from AND from_on <= @to
  AND ${whichKinds}`

/** Of one pool of one kind. */
export const HOLDS_OF_POOL = HOLDS('kind_id = @kindId AND wild = @wild', 'kind_id = @kindId AND wild = @wild')

/** Of both pools of the listed kinds. */
export const HOLDS_OF_KINDS = HOLDS(
  'wild IN (0, 1) AND kind_id IN (SELECT value FROM json_each(@kindIds))',
  'kind_id IN (SELECT value FROM json_each(@kindIds))',
)

/** Of everything. */
export const HOLDS_OF_ALL = HOLDS('1', '1')

export interface HoldBind {
  from: CalendarDay
  to: CalendarDay
  today: CalendarDay
  now: Instant
  /** Whose own offers do not stand in the way. */
  memberId: string
}

export interface HoldRow {
  kindId: string
  wild: 0 | 1
  from: CalendarDay
  blocksUntil: CalendarDay
}

const SERVICEABLE = (wild: string) =>
  `(SELECT count(*) FROM serviceable_items AS s WHERE s.kind_id = k.id AND s.wild = ${wild})`

/** A kind as availability needs it; the pool is the kind's own unless one is named. */
export const POOL = `
SELECT k.id AS kindId, coalesce(@wild, k.wild_only) AS wild,
  CASE WHEN k.retired_at IS NULL THEN ${SERVICEABLE('coalesce(@wild, k.wild_only)')} ELSE 0 END AS serviceable
FROM kinds AS k WHERE k.id = @kindId`

export interface PoolRow {
  kindId: string
  wild: 0 | 1
  serviceable: number
}

/** Every kind that is lent, by name. */
export const POOLS = `
SELECT k.id AS kindId, k.name, coalesce(@wild, k.wild_only) AS wild,
  ${SERVICEABLE('coalesce(@wild, k.wild_only)')} AS serviceable
FROM kinds AS k WHERE k.retired_at IS NULL AND (@category IS NULL OR k.category = @category) ORDER BY k.name`

const KIND_FACTS = `
SELECT k.id, k.name, k.category, k.capacity_litres AS capacityLitres, k.turnaround_days AS turnaroundDays,
  k.max_loan_days AS maxLoanDays, k.max_ahead_days AS maxAheadDays, k.max_per_member AS maxPerMember,
  k.self_approving AS selfApproving, k.needs_induction AS needsInduction, k.induction_note AS inductionNote,
  k.wild_only AS wildOnly, k.retired_at AS retiredAt,
  ${SERVICEABLE('0')} AS serviceableTame, ${SERVICEABLE('1')} AS serviceableWild,
  (SELECT coalesce(n.expires_on, '9999') FROM inductions AS n WHERE n.member_id = @memberId AND n.kind_id = k.id) AS inductedUntil,
  EXISTS (
    SELECT 1 FROM waitings AS w WHERE w.kind_id = k.id AND w.member_id = @memberId AND w.state IN ('waiting', 'offered')
  ) AS waits
FROM kinds AS k`

/** All that a booking has to know about the kinds it asks for. */
export const KINDS_TO_BOOK = `${KIND_FACTS} WHERE k.id IN (SELECT value FROM json_each(@kindIds))`

/** The same facts of every kind in some categories: what might do instead. */
export const KINDS_INSTEAD = `${KIND_FACTS}
WHERE k.retired_at IS NULL AND k.category IN (SELECT value FROM json_each(@categories)) ORDER BY k.name`

export interface KindRow {
  id: string
  name: string
  category: KindCategory
  capacityLitres: number | null
  turnaroundDays: number
  maxLoanDays: number
  maxAheadDays: number
  maxPerMember: number
  selfApproving: 0 | 1
  needsInduction: 0 | 1
  inductionNote: string
  wildOnly: 0 | 1
  retiredAt: Instant | null
  serviceableTame: number
  serviceableWild: number
  /** The last day an induction counts; null: none was given. */
  inductedUntil: string | null
  waits: 0 | 1
}

/** A member's own live loans of the kinds a booking asks for. */
export const OWN_LOANS = `
SELECT kind_id AS kindId, from_on AS "from", CASE WHEN status = 'out' THEN max(to_on, @today) ELSE to_on END AS "to"
FROM loans WHERE member_id = @memberId AND status IN ('requested', 'approved', 'out')
  AND kind_id IN (SELECT value FROM json_each(@kindIds))`

export interface OwnRow {
  kindId: string
  from: CalendarDay
  to: CalendarDay
}
