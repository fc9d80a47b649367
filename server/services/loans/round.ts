import { and, eq, inArray, lt, sql } from 'drizzle-orm'
import { hasLapsed } from '#shared/loans/lateness'
import type { CalendarDay } from '#shared/time/day'
import { kinds } from '../../db/schema/kit.ts'
import { loanRolls, loans } from '../../db/schema/loans.ts'
import { write, type Tx } from '../../db/open.ts'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'
import { queueNotice } from '../notices.ts'
import { addLoanEvents } from './history.ts'
import { expireWaitings, offerNext, waitedFor } from './offers.ts'
import type { Pool } from './pool.ts'
import { refreshRisk } from './risk.ts'

const ROLLED_ON = 'SELECT rolled_on AS rolledOn FROM loan_rolls'

/**
 * Brings loans up to today: what is late blocks until today and its turnaround, what nobody came for lapses, bookings that
 * are in danger by now are marked. Once a day; every later call of the day reads one row. Every writing service calls it
 * first, so that nothing hangs on a job having run.
 */
export function rollLoans(tx: Tx, deps: Deps) {
  const today = deps.clock.today()
  const rolledOn = prepared<object, { rolledOn: CalendarDay }>(deps.db, ROLLED_ON).get({})?.rolledOn
  if (rolledOn === undefined || rolledOn >= today) return
  tx.update(loanRolls).set({ rolledOn: today }).run()
  const until = sql`date(${today}, '+' || ${loans.turnaroundDays} || ' days')`
  const late = tx
    .update(loans)
    .set({ blocksUntilOn: sql`${until}` })
    .where(and(eq(loans.status, 'out'), lt(loans.toOn, today), lt(loans.blocksUntilOn, until)))
    .returning({ kindId: loans.kindId, wild: loans.wild })
    .all()
  tx.update(loans)
    .set({ blocking: false })
    .where(and(eq(loans.status, 'returned'), eq(loans.blocking, true), lt(loans.blocksUntilOn, today)))
    .run()
  const touched = [...late, ...lapseLoans(tx, deps), ...poolsAtRisk(tx)]
  for (const pool of distinct(touched)) refreshRisk(tx, deps, pool)
}

/** Lets go what was not collected by the end of its grace day, and what was never decided while it mattered. */
function lapseLoans(tx: Tx, deps: Deps): Pool[] {
  const today = deps.clock.today()
  const at = deps.clock.now()
  const lapsed = tx
    .select({ loan: loans, kindName: kinds.name })
    .from(loans)
    .innerJoin(kinds, eq(kinds.id, loans.kindId))
    .where(and(inArray(loans.status, ['requested', 'approved']), lt(loans.fromOn, today)))
    .all()
    .filter(({ loan }) =>
      hasLapsed(
        { ...loan, from: loan.fromOn, to: loan.toOn, approvedOn: loan.approvedOn ?? undefined },
        today,
      ),
    )
  for (const { loan, kindName } of lapsed) {
    tx.update(loans)
      .set({
        status: 'lapsed',
        blocking: false,
        atRisk: false,
        atRiskReason: null,
        extensionTo: null,
        updatedAt: at,
        version: loan.version + 1,
      })
      .where(eq(loans.id, loan.id))
      .run()
    addLoanEvents(tx, [{ loanId: loan.id, event: 'lapsed', at, byId: null }])
    queueNotice(tx, deps, {
      kind: 'loan-lapsed',
      memberId: loan.memberId,
      dedupeKey: `loan-lapsed:${loan.id}`,
      about: { type: 'loan', id: loan.id, on: loan.fromOn },
      facts: { loanId: loan.id, kindName, from: loan.fromOn, to: loan.toOn },
    })
  }
  return lapsed.map(({ loan }) => loan)
}

const poolsAtRisk = (tx: Tx): Pool[] =>
  tx
    .selectDistinct({ kindId: loans.kindId, wild: loans.wild })
    .from(loans)
    .where(eq(loans.atRisk, true))
    .all()

function distinct(pools: readonly Pool[]): Pool[] {
  return [...new Map(pools.map(({ kindId, wild }) => [`${kindId}:${wild}`, { kindId, wild }])).values()]
}

/**
 * What loans need done by the clock, every minute: the daily roll when a day has begun, offers that ran out, and whatever
 * has come free for those who wait.
 */
export function runLoanRound(deps: Deps) {
  write(deps.db, (tx) => {
    rollLoans(tx, deps)
    expireWaitings(tx, deps)
    for (const pool of waitedFor(tx)) offerNext(tx, deps, pool)
  })
}
