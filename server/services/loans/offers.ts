import { and, asc, eq, gte, inArray, lt, lte, or } from 'drizzle-orm'
import { fits } from '#shared/loans/availability'
import { OFFER_HOURS } from '#shared/loans/vocabulary'
import { addMinutes } from '#shared/time/instant'
import { laterDay } from '#shared/time/day'
import type { DayRange } from '#shared/time/day-range'
import { waitings } from '../../db/schema/loans.ts'
import type { Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { queueNotice } from '../notices.ts'
import { kindOfPool, type Pool } from './pool.ts'
import { holdBind, holdsOfKinds, poolKey } from './shelf.ts'

/**
 * Offers what has come free to those who wait, first come first served; who does not fit keeps their place. What is offered
 * is kept for them until the offer runs out.
 */
export function offerNext(tx: Tx, deps: Deps, pool: Pool) {
  const today = deps.clock.today()
  const queue = tx
    .select()
    .from(waitings)
    .where(
      and(
        eq(waitings.kindId, pool.kindId),
        eq(waitings.wild, pool.wild),
        eq(waitings.state, 'waiting'),
        gte(waitings.fromOn, today),
      ),
    )
    .orderBy(asc(waitings.createdAt), asc(waitings.id))
    .all()
  const [first] = queue
  if (!first) return
  const kind = kindOfPool(deps, pool)
  const until = queue.reduce(
    (latest, { blocksUntilOn }) => laterDay(latest, blocksUntilOn),
    first.blocksUntilOn,
  )
  // Nobody's own offer is left out: an empty id belongs to no one.
  const bind = holdBind(deps, '', { from: today, to: until })
  const holds = [...(holdsOfKinds(deps, bind, [pool.kindId]).get(poolKey(pool.kindId, pool.wild)) ?? [])]
  const now = deps.clock.now()
  const takeBy = addMinutes(now, OFFER_HOURS * 60)
  for (const waiting of queue) {
    const hold = { from: waiting.fromOn, blocksUntil: waiting.blocksUntilOn }
    if (!fits(kind.serviceable, holds, hold)) continue
    holds.push(hold)
    tx.update(waitings)
      .set({ state: 'offered', offeredUntil: takeBy, updatedAt: now })
      .where(eq(waitings.id, waiting.id))
      .run()
    queueNotice(tx, deps, {
      kind: 'waiting-offer',
      memberId: waiting.memberId,
      dedupeKey: `waiting-offer:${waiting.id}:${takeBy}`,
      about: { type: 'waiting', id: waiting.id, on: waiting.fromOn },
      usefulUntil: takeBy,
      facts: {
        kindId: pool.kindId,
        kindName: kind.name,
        from: waiting.fromOn,
        to: waiting.toOn,
        takeBy,
      },
    })
  }
}

/** Ends offers nobody took in time and waits for days that have passed. */
export function expireWaitings(tx: Tx, deps: Deps) {
  const now = deps.clock.now()
  tx.update(waitings)
    .set({ state: 'expired', updatedAt: now })
    .where(
      or(
        and(eq(waitings.state, 'offered'), lte(waitings.offeredUntil, now)),
        and(eq(waitings.state, 'waiting'), lt(waitings.fromOn, deps.clock.today())),
      ),
    )
    .run()
}

/** A booking answers the member's own wait for the same kind on any of its days. */
export function takeWaitings(
  tx: Tx,
  deps: Deps,
  loan: DayRange & { id: string; kindId: string; memberId: string; wild: boolean },
) {
  tx.update(waitings)
    .set({ state: 'taken', loanId: loan.id, updatedAt: deps.clock.now() })
    .where(
      and(
        eq(waitings.memberId, loan.memberId),
        eq(waitings.kindId, loan.kindId),
        eq(waitings.wild, loan.wild),
        inArray(waitings.state, ['waiting', 'offered']),
        lte(waitings.fromOn, loan.to),
        gte(waitings.toOn, loan.from),
      ),
    )
    .run()
}

/** The pools somebody waits for. */
export const waitedFor = (tx: Tx): Pool[] =>
  tx
    .selectDistinct({ kindId: waitings.kindId, wild: waitings.wild })
    .from(waitings)
    .where(eq(waitings.state, 'waiting'))
    .all()
