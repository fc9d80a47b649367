import { eq } from 'drizzle-orm'
import { isOver } from '#shared/batches/lifecycle'
import { planLines, stepDays } from '#shared/batches/plan'
import type { PlanIngredient } from '#shared/batches/plan-contract'
import type { Loan } from '#shared/loans/contract'
import type { CalendarDay } from '#shared/time/day'
import { batches, batchSteps, stepNeeds } from '../../db/schema/batches.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { releaseReservations, reserveIngredients } from '../larder/reservations.ts'
import { bookBasket } from '../loans/book.ts'
import { cancelLoan } from '../loans/decide.ts'
import { ownBatch, touchBatch } from './access.ts'
import { basketOf, checkPlan, ingredientReplies, larderNeeds, loadPlan, longestLoan } from './plan.ts'
import { refuseWhileBooked } from './steps.ts'
import { needsOf } from './view.ts'

interface RequestedPlan {
  startOn: CalendarDay
  loans: Loan[]
  /** What the larder lacks; it is on the shopping list now. */
  short: PlanIngredient[]
  version: number
}

/**
 * Books the basket, reserves the ingredients and dates the steps: all of it or nothing.
 *
 * The basket is asked for before anything is written here, and outside a transaction of this service: what it refuses stays
 * counted as demand that could not be met. The caller's transaction (the route creates) holds both together.
 * @throws AppError `not-available`, `over-limit` and `needs-induction` as the basket says, `wrong-state`, `invalid`
 */
export function requestPlan(
  deps: Deps,
  user: SignedIn,
  batchId: string,
  startOn: CalendarDay,
): RequestedPlan {
  const plan = loadPlan(deps.db, user.id, batchId)
  const { batch } = plan
  if (isOver(batch.status) || batch.status === 'bottled')
    throw new AppError('wrong-state', `A batch that is ${batch.status} needs no more kit.`)
  if (startOn < deps.clock.today()) throw invalidField('startOn', 'That day has passed. Choose a later one.')
  refuseWhileBooked(deps.db, batchId)
  checkPlan(plan)
  const days = stepDays(plan.steps, startOn)
  const lines = planLines(plan.steps, days, longestLoan(plan))
  const basket = basketOf(plan, lines)
  const loans = basket ? bookBasket(deps, user, basket).loans : []
  return write(deps.db, (tx) => {
    lines.forEach((line, index) => {
      const need = plan.needs.filter(({ need }) => need.stepId === line.stepId)[line.need]
      tx.update(stepNeeds)
        .set({ loanId: loans[index]?.id ?? null })
        .where(eq(stepNeeds.id, need?.need.id ?? ''))
        .run()
    })
    for (const [stepId, on] of days)
      tx.update(batchSteps).set({ plannedOn: on }).where(eq(batchSteps.id, stepId)).run()
    const needs = larderNeeds(plan, days, startOn)
    const short = reserveIngredients(deps, tx, batchId, needs)
    tx.update(batches).set({ startOn }).where(eq(batches.id, batchId)).run()
    touchBatch(deps, tx, batchId)
    return {
      startOn,
      loans,
      short: ingredientReplies(plan.facts, needs, short).filter((line) => line.short > 0),
      version: batch.version + 1,
    }
  })
}

/** Cancels what is booked and not collected, and lets go of what is reserved. Gives back how many bookings that were. */
export function releasePlan(deps: Deps, tx: Tx, user: SignedIn, batchId: string): number {
  const waiting = needsOf(tx, batchId).flatMap(({ loan }) =>
    loan && (loan.status === 'requested' || loan.status === 'approved') ? [loan.id] : [],
  )
  for (const loanId of waiting) cancelLoan(deps, user, loanId, 'The plan of the batch was dropped.')
  releaseReservations(tx, batchId)
  return waiting.length
}

/** Drops the plan of one's own batch: steps that are not done lose their dates. */
export function dropPlan(deps: Deps, user: SignedIn, batchId: string) {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, user.id, batchId)
    const cancelled = releasePlan(deps, tx, user, batchId)
    if (batch.status === 'planned') {
      tx.update(batchSteps).set({ plannedOn: null }).where(eq(batchSteps.batchId, batchId)).run()
      tx.update(batches).set({ startOn: null }).where(eq(batches.id, batchId)).run()
    }
    touchBatch(deps, tx, batchId)
    return { cancelled, version: batch.version + 1 }
  })
}
