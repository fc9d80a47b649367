import type { Calendar, CalendarQuery } from '#shared/loans/calendar-contract'
import { isOverdue } from '#shared/loans/lateness'
import type { LoanStatus } from '#shared/loans/vocabulary'
import { roleCovers } from '#shared/people/vocabulary'
import { addDays, type CalendarDay, laterDay } from '#shared/time/day'
import { prepared } from '../db/prepared.ts'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'
import type { SignedIn } from '../http/sessions.ts'

/** More than anyone can see in a month. */
const ROWS_MAX = 2000

interface Row {
  loanId: string
  kindId: string
  kindName: string
  itemTag: string | null
  memberId: string
  memberName: string
  from: CalendarDay
  to: CalendarDay
  status: LoanStatus
  atRisk: 0 | 1
}

/**
 * The loans that touch a range of days. Few are longer than two months and have an index of their own; so for the rest only
 * those that started up to 62 days before need a look, however long the history. What is late is still there today.
 */
export function calendarSql({ member, kind }: { member: boolean; kind: boolean }): string {
  const whose = (member ? ' AND member_id = @memberId' : '') + (kind ? ' AND kind_id = @kindId' : '')
  return `
SELECT l.id AS loanId, l.kind_id AS kindId, k.name AS kindName, i.tag AS itemTag, l.member_id AS memberId,
  m.name AS memberName, l.from_on AS "from", l.to_on AS "to", l.status, l.at_risk AS atRisk
FROM (
  SELECT rowid AS at FROM loans WHERE from_on BETWEEN @shortFrom AND @to AND to_on >= @from${whose}
  UNION
  SELECT rowid FROM loans WHERE julianday(to_on) - julianday(from_on) > 62
    AND from_on BETWEEN @longFrom AND @to AND to_on >= @from${whose}
  UNION
  SELECT rowid FROM loans WHERE status = 'out' AND to_on < @from AND @from <= @today${whose}
) AS touched
CROSS JOIN loans AS l ON l.rowid = touched.at
CROSS JOIN kinds AS k ON k.id = l.kind_id
CROSS JOIN members AS m ON m.id = l.member_id
LEFT JOIN items AS i ON i.id = l.item_id
WHERE l.status IN ('requested', 'approved', 'out', 'returned')
ORDER BY l.from_on, l.id LIMIT ${ROWS_MAX}`
}

/** A member's own loans; for stewards with `scope=all` everyone's. */
export function readCalendar(deps: Deps, user: SignedIn, query: CalendarQuery): Calendar {
  const { from, to, scope, kindId } = query
  const isSteward = user.status === 'active' && roleCovers(user.role, 'steward')
  const others = scope === 'all' || (query.memberId !== undefined && query.memberId !== user.id)
  if (others && !isSteward) throw new AppError('forbidden', 'Only a steward can see the loans of others.')
  const memberId = query.memberId ?? (scope === 'me' ? user.id : undefined)
  const today = deps.clock.today()
  const sql = calendarSql({ member: memberId !== undefined, kind: kindId !== undefined })
  const rows = prepared<object, Row>(deps.db, sql).all({
    from,
    to,
    today,
    shortFrom: addDays(from, -62),
    longFrom: addDays(from, -730),
    ...(memberId !== undefined && { memberId }),
    ...(kindId !== undefined && { kindId }),
  })
  const loans = rows.map((row) => {
    const overdue = isOverdue(row, today)
    return {
      ...row,
      mine: row.memberId === user.id,
      atRisk: row.atRisk === 1,
      overdue,
      until: overdue ? laterDay(row.to, today) : row.to,
    }
  })
  return { from, to, loans }
}
