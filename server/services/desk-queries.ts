import type { ShelfItem } from '#shared/loans/suggestion'
import type { HoldingLoanStatus, LoanStatus, RiskReason } from '#shared/loans/vocabulary'
import type { CalendarDay } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'

/**
 * Every loan somebody has to do something about today. Each part has an index, and none looks at history; CROSS JOIN keeps
 * the planner from starting anywhere else.
 */
export const DESK_LOANS = `
WITH todo (at) AS MATERIALIZED (
  SELECT rowid FROM loans WHERE status = 'requested'
  UNION SELECT rowid FROM loans WHERE status = 'approved' AND from_on <= @today
  UNION SELECT rowid FROM loans WHERE status = 'out' AND to_on <= @today
  UNION SELECT rowid FROM loans WHERE at_risk = 1
  UNION SELECT rowid FROM loans WHERE extension_to IS NOT NULL
)
SELECT l.id AS loanId, l.kind_id AS kindId, k.name AS kindName, k.needs_sanitised AS needsSanitised, l.wild,
  l.item_id AS itemId, i.tag AS itemTag, i.shelf, l.member_id AS memberId, m.name AS memberName, m.email AS memberEmail,
  m.phone AS memberPhone, l.from_on AS "from", l.to_on AS "to", l.status, l.approved_on AS approvedOn, l.at_risk AS atRisk,
  l.at_risk_reason AS reason, l.note, l.basket_id AS basketId, l.extension_to AS extensionTo,
  l.extension_asked_at AS extensionAskedAt, l.requested_at AS requestedAt, l.version
FROM todo
CROSS JOIN loans AS l ON l.rowid = todo.at
CROSS JOIN kinds AS k ON k.id = l.kind_id
CROSS JOIN members AS m ON m.id = l.member_id
LEFT JOIN items AS i ON i.id = l.item_id
ORDER BY l.from_on, l.requested_at, l.rowid`

export interface DeskLoanRow {
  loanId: string
  kindId: string
  kindName: string
  needsSanitised: 0 | 1
  wild: 0 | 1
  itemId: string | null
  itemTag: string | null
  shelf: string | null
  memberId: string
  memberName: string
  memberEmail: string
  memberPhone: string | null
  from: CalendarDay
  to: CalendarDay
  status: LoanStatus
  approvedOn: CalendarDay | null
  atRisk: 0 | 1
  reason: RiskReason | null
  note: string | null
  basketId: string | null
  extensionTo: CalendarDay | null
  extensionAskedAt: Instant | null
  requestedAt: Instant
  version: number
}

/** What needs washing or mending, and what could be handed out for today's collections: one row an item and open fault. */
export const DESK_ITEMS = `
WITH todo (id) AS MATERIALIZED (
  SELECT id FROM items WHERE hygiene = 'dirty'
  UNION SELECT item_id FROM faults INDEXED BY faults_open WHERE resolved_at IS NULL
  UNION SELECT id FROM items
    WHERE kind_id IN (SELECT kind_id FROM loans WHERE status = 'approved' AND from_on <= @today)
)
SELECT i.id AS itemId, i.tag, i.shelf, i.kind_id AS kindId, k.name AS kindName, k.needs_sanitised AS needsSanitised, i.wild,
  i.status, i.hygiene, i.sanitised_until AS sanitisedUntil, i.version, f.id AS faultId, f.summary, f.blocking,
  f.reported_at AS reportedAt,
  EXISTS (SELECT 1 FROM loans AS o WHERE o.item_id = i.id AND o.status = 'out') AS out,
  (
    SELECT min(l.from_on) FROM loans AS l INDEXED BY loans_hold
    WHERE l.blocking = 1 AND l.kind_id = i.kind_id AND l.wild = i.wild AND l.status = 'approved'
  ) AS wantedOn
FROM todo
CROSS JOIN items AS i ON i.id = todo.id
CROSS JOIN kinds AS k ON k.id = i.kind_id
LEFT JOIN faults AS f ON f.item_id = i.id AND f.resolved_at IS NULL
ORDER BY i.tag`

export interface DeskItemRow {
  itemId: string
  tag: string
  shelf: string | null
  kindId: string
  kindName: string
  needsSanitised: 0 | 1
  wild: 0 | 1
  status: 'in-service' | 'repair' | 'retired' | 'lost'
  hygiene: ShelfItem['hygiene']
  sanitisedUntil: Instant | null
  version: number
  faultId: string | null
  summary: string | null
  blocking: 0 | 1 | null
  reportedAt: Instant | null
  out: 0 | 1
  wantedOn: CalendarDay | null
}

/** The pools somebody asks something of: their loans in the order asked for, and how many items serve them. */
export const DESK_POOLS = `
WITH asked (kind_id) AS MATERIALIZED (
  SELECT kind_id FROM loans WHERE status = 'requested'
  UNION SELECT kind_id FROM loans WHERE extension_to IS NOT NULL
)
SELECT l.kind_id AS kindId, l.wild, l.id, l.status, l.from_on AS "from", coalesce(l.returned_on, l.to_on) AS "to",
  l.turnaround_days AS turnaroundDays, m.name AS memberName, l.requested_at AS requestedAt, l.rowid AS asked, 0 AS serviceable
FROM asked
CROSS JOIN loans AS l INDEXED BY loans_hold ON l.kind_id = asked.kind_id AND l.blocking = 1
CROSS JOIN members AS m ON m.id = l.member_id
UNION ALL
SELECT kind_id, wild, '', 'approved', '', '', 0, '', '', 0, count(*) FROM serviceable_items
WHERE kind_id IN (SELECT kind_id FROM asked) GROUP BY kind_id, wild
ORDER BY 9, 10`

export interface DeskPoolRow {
  kindId: string
  wild: 0 | 1
  /** Empty in the row that only counts. */
  id: string
  status: HoldingLoanStatus
  from: CalendarDay
  to: CalendarDay
  turnaroundDays: number
  memberName: string
  serviceable: number
}

/** Who waits, and what is offered. */
export const DESK_WAITING = `
SELECT w.id AS waitingId, w.kind_id AS kindId, k.name AS kindName, w.member_id AS memberId, m.name AS memberName,
  w.from_on AS "from", w.to_on AS "to", w.state, w.offered_until AS offeredUntil, w.created_at AS createdAt
FROM waitings AS w
JOIN kinds AS k ON k.id = w.kind_id
JOIN members AS m ON m.id = w.member_id
WHERE w.state IN ('waiting', 'offered')
ORDER BY w.created_at, w.id LIMIT @limit`
