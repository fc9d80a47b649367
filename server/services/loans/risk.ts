import { and, eq, sql } from 'drizzle-orm'
import { bookingsAtRisk } from '#shared/loans/risk'
import { loans } from '../../db/schema/loans.ts'
import type { Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { queueNotice } from '../notices.ts'
import { addLoanEvents } from './history.ts'
import { kindOfPool, loansOfPool, type Pool } from './pool.ts'

/**
 * Marks the bookings of a pool that will find nothing on the shelf as things stand, clears those that are safe again, and
 * tells their members. Called whenever a pool loses or regains an item or a loan of it is late.
 */
export function refreshRisk(tx: Tx, deps: Deps, pool: Pool) {
  const kind = kindOfPool(deps, pool)
  const all = loansOfPool(deps, pool)
  const endangered = bookingsAtRisk(all, kind.serviceable, deps.clock.today())
  const at = deps.clock.now()
  for (const loan of all) {
    const reason = endangered.get(loan.id) ?? null
    if (reason === loan.atRiskReason || (loan.status !== 'requested' && loan.status !== 'approved')) continue
    tx.update(loans)
      .set({
        atRisk: reason !== null,
        atRiskReason: reason,
        updatedAt: at,
        version: sql`${loans.version} + 1`,
      })
      .where(eq(loans.id, loan.id))
      .run()
    // Another reason for the same danger is no news.
    if (reason !== null && loan.atRiskReason !== null) continue
    addLoanEvents(tx, [
      { loanId: loan.id, event: reason ? 'at-risk' : 'safe-again', at, byId: null, detail: reason },
    ])
    const facts = { loanId: loan.id, kindName: kind.name, from: loan.from, to: loan.bookedTo }
    const about = { type: 'loan' as const, id: loan.id, on: loan.from }
    const shared = { memberId: loan.memberId, about }
    if (reason)
      queueNotice(tx, deps, {
        ...shared,
        kind: 'loan-at-risk',
        facts: { ...facts, reason },
        dedupeKey: `loan-at-risk:${loan.id}:${at}`,
      })
    else
      queueNotice(tx, deps, {
        ...shared,
        kind: 'loan-safe-again',
        facts,
        dedupeKey: `loan-safe-again:${loan.id}:${at}`,
      })
  }
}

/** Both pools of a kind, as far as anyone has booked from them. */
export function refreshRiskOfKind(tx: Tx, deps: Deps, kindId: string) {
  const booked = tx
    .selectDistinct({ wild: loans.wild })
    .from(loans)
    .where(and(eq(loans.blocking, true), eq(loans.kindId, kindId)))
    .all()
  for (const { wild } of booked) refreshRisk(tx, deps, { kindId, wild })
}
