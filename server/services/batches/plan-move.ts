import { eq } from 'drizzle-orm'
import { movedDays, planLines } from '#shared/batches/plan'
import type { MoveOutcome, PlanMove } from '#shared/batches/plan-contract'
import type { CalendarDay } from '#shared/time/day'
import type { DayRange } from '#shared/time/day-range'
import { batchSteps, stepNeeds } from '../../db/schema/batches.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { reserveIngredients } from '../larder/reservations.ts'
import { bookBasket } from '../loans/book.ts'
import { cancelLoan } from '../loans/decide.ts'
import { extendLoan } from '../loans/extend.ts'
import { touchBatch } from './access.ts'
import { basketOf, larderNeeds, loadPlan, longestLoan, type BatchPlan } from './plan.ts'
import { rehearse } from './rehearse.ts'

interface Move {
  stepId: string
  on: CalendarDay
  alone: boolean
  confirm: boolean
}

type Booking = PlanMove['bookings'][number] & { needId: string }

/**
 * Moves a step, those that come after it, and the bookings that depend on them, in one change. Until it is confirmed it is
 * rehearsed: what is shown is what would happen.
 * @throws AppError `not-found`, `wrong-state` when nothing is dated or the step is done, `invalid`
 */
export function movePlan(deps: Deps, user: SignedIn, batchId: string, move: Move): PlanMove {
  const plan = loadPlan(deps.db, user.id, batchId)
  const step = plan.facts.steps.find(({ id }) => id === move.stepId)
  if (!step) throw notFound('That step')
  if (step.plannedOn === null) throw new AppError('wrong-state', 'This plan has no dates yet.')
  if (step.doneAt !== null)
    throw new AppError('wrong-state', 'This step is done. Move one that is still to come.')
  if (move.on < deps.clock.today()) throw invalidField('on', 'That day has passed. Choose a later one.')
  const act = (tx: Tx) => carryOut(deps, tx, user, plan, move)
  try {
    return move.confirm ? write(deps.db, act) : { ...rehearse(deps.db, act), moved: false }
  } catch (error) {
    if (!(error instanceof NotFree)) throw error
    if (move.confirm)
      throw new AppError('not-available', error.message, { body: { bookings: error.answer.bookings } })
    return error.answer
  }
}

/** Some booking cannot move: everything is undone, and this says which. */
class NotFree extends Error {
  readonly answer: PlanMove

  constructor(message: string, answer: PlanMove) {
    super(message)
    this.answer = answer
  }
}

function carryOut(deps: Deps, tx: Tx, user: SignedIn, plan: BatchPlan, move: Move): PlanMove {
  const before = new Map(plan.facts.steps.map(({ id, plannedOn }) => [id, plannedOn]))
  const days = newDays(plan, move)
  const steps = plan.facts.steps.flatMap(({ id, title }) => {
    const [from, to] = [before.get(id), days.get(id)]
    return from && to && from !== to ? [{ id, title, from, to }] : []
  })
  const bookings = moveBookings(deps, tx, user, plan, days, steps)
  for (const { id, to } of steps)
    tx.update(batchSteps).set({ plannedOn: to }).where(eq(batchSteps.id, id)).run()
  if (plan.batch.startOn)
    reserveIngredients(deps, tx, plan.batch.id, larderNeeds(plan, days, plan.batch.startOn))
  touchBatch(deps, tx, plan.batch.id)
  return { moved: true, possible: true, steps, bookings }
}

/** Undated steps stay where they are, out of the count. */
function newDays({ facts }: BatchPlan, { stepId, on, alone }: Move): Map<string, CalendarDay> {
  const dated = facts.steps.flatMap(({ id, plannedOn, doneAt }) =>
    plannedOn ? [{ id, on: plannedOn, done: doneAt !== null }] : [],
  )
  return movedDays(dated, stepId, on, alone)
}

function moveBookings(
  deps: Deps,
  tx: Tx,
  user: SignedIn,
  plan: BatchPlan,
  days: Map<string, CalendarDay>,
  steps: PlanMove['steps'],
): PlanMove['bookings'] {
  const wanted = planLines(
    plan.steps.filter((step) => days.has(step.id)),
    days,
    longestLoan(plan),
  )
  const affected = wanted.flatMap((line): Booking[] => {
    const row = plan.needs.filter(({ need }) => need.stepId === line.stepId)[line.need]
    if (!row?.loan || !LIVE.includes(row.loan.status)) return []
    const range = { before: rangeOf(row.loan), after: { from: line.from, to: line.to } }
    if (!moves(range.before, range.after, row.loan.status)) return []
    return [{ loanId: row.loan.id, needId: row.need.id, kindName: row.kind.name, ...range, outcome: 'stays' }]
  })
  const out = affected.filter(({ loanId }) => statusOf(plan, loanId) === 'out')
  const waiting = affected.filter(({ loanId }) => statusOf(plan, loanId) !== 'out')
  return [
    ...out.map((booking) => keepLonger(deps, user, booking)),
    ...rebook(deps, tx, user, plan, waiting, steps),
  ].map(({ needId: _, ...booking }) => booking)
}

const LIVE: readonly string[] = ['requested', 'approved', 'out']
const rangeOf = (loan: DayRange): DayRange => ({ from: loan.from, to: loan.to })
const statusOf = (plan: BatchPlan, loanId: string) =>
  plan.needs.find(({ loan }) => loan?.id === loanId)?.loan?.status

/** What is out can only be kept longer; it may come back early without anybody's leave. */
const moves = (before: DayRange, after: DayRange, status: string) =>
  status === 'out' ? after.to > before.to : before.from !== after.from || before.to !== after.to

function keepLonger(deps: Deps, user: SignedIn, booking: Booking): Booking {
  const loan = extendLoan(deps, user, booking.loanId, { to: booking.after.to })
  const outcome: MoveOutcome = loan.to >= booking.after.to ? 'kept-longer' : 'asked-longer'
  return { ...booking, after: { from: booking.before.from, to: booking.after.to }, outcome }
}

/** What is not collected yet is given up and asked for again on its new days, all of it or nothing. */
function rebook(
  deps: Deps,
  tx: Tx,
  user: SignedIn,
  plan: BatchPlan,
  waiting: readonly Booking[],
  steps: PlanMove['steps'],
): Booking[] {
  for (const { loanId } of waiting) cancelLoan(deps, user, loanId, 'The plan of the batch moved.')
  const lines = waiting.flatMap(({ needId, after }) => {
    const row = plan.needs.find(({ need }) => need.id === needId)
    return row ? [{ stepId: row.need.stepId, kindId: row.need.kindId, need: 0, capped: false, ...after }] : []
  })
  const basket = basketOf(plan, lines)
  if (!basket) return []
  try {
    const { loans } = bookBasket(deps, user, basket)
    return waiting.map((booking, index) => {
      const loan = loans[index]
      tx.update(stepNeeds)
        .set({ loanId: loan?.id ?? null })
        .where(eq(stepNeeds.id, booking.needId))
        .run()
      const wasApproved = statusOf(plan, booking.loanId) === 'approved'
      const outcome = wasApproved && loan?.status === 'requested' ? 'asked-again' : 'moves'
      return { ...booking, loanId: loan?.id ?? booking.loanId, outcome }
    })
  } catch (error) {
    if (!(error instanceof AppError)) throw error
    const refused = ((error.more.body?.lines ?? []) as { index: number }[]).map(({ index }) => index)
    const bookings = waiting.map(({ needId: _, ...booking }, index) => ({
      ...booking,
      outcome: refused.includes(index) ? ('not-free' as const) : ('moves' as const),
    }))
    throw new NotFree(error.message, { moved: false, possible: false, steps, bookings })
  }
}
