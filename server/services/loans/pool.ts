import type { LiveLoan } from '#shared/loans/risk'
import type { RiskReason } from '#shared/loans/vocabulary'
import type { CalendarDay } from '#shared/time/day'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'

/** A kind, and whether its items kept for wild cultures are meant. */
export interface Pool {
  kindId: string
  wild: boolean
}

/** A loan that takes a place in a pool, with what a letter about it has to say. */
export interface PoolLoan extends LiveLoan {
  memberId: string
  memberName: string
  bookedTo: CalendarDay
  atRisk: 0 | 1
  atRiskReason: RiskReason | null
}

const LOANS_OF_POOL = `
SELECT l.id, l.status, l.from_on AS "from", coalesce(l.returned_on, l.to_on) AS "to", l.to_on AS bookedTo,
  l.turnaround_days AS turnaroundDays, l.member_id AS memberId, m.name AS memberName, l.at_risk AS atRisk,
  l.at_risk_reason AS atRiskReason
FROM loans AS l JOIN members AS m ON m.id = l.member_id
WHERE l.blocking = 1 AND l.kind_id = @kindId AND l.wild = @wild AND (l.blocks_until_on >= @today OR l.status = 'out')
ORDER BY l.requested_at, l.rowid`

const KIND_OF_POOL = `
SELECT k.name, k.turnaround_days AS turnaroundDays, k.max_loan_days AS maxLoanDays, k.max_ahead_days AS maxAheadDays,
  k.max_per_member AS maxPerMember,
  (SELECT count(*) FROM serviceable_items AS s WHERE s.kind_id = k.id AND s.wild = @wild) AS serviceable
FROM kinds AS k WHERE k.id = @kindId`

interface PoolKind {
  name: string
  turnaroundDays: number
  maxLoanDays: number
  maxAheadDays: number
  maxPerMember: number
  serviceable: number
}

/** Every loan that takes a place in a pool from today on, in the order they were asked for. */
export function loansOfPool(deps: Deps, { kindId, wild }: Pool): PoolLoan[] {
  const bind = { kindId, wild: wild ? 1 : 0, today: deps.clock.today() }
  return prepared<typeof bind, PoolLoan>(deps.db, LOANS_OF_POOL).all(bind)
}

export function kindOfPool(deps: Deps, { kindId, wild }: Pool): PoolKind {
  const bind = { kindId, wild: wild ? 1 : 0 }
  const kind = prepared<typeof bind, PoolKind>(deps.db, KIND_OF_POOL).get(bind)
  if (!kind) throw new Error(`no kind ${kindId}`)
  return kind
}
