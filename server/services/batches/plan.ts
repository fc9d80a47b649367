import { expectedBottles } from '#shared/batches/bottling'
import {
  planEnd,
  planLines,
  planProblem,
  planProblemSentence,
  stepDays,
  type PlanLine,
} from '#shared/batches/plan'
import type { Plan, PlanIngredient, PlanLineReply } from '#shared/batches/plan-contract'
import type { PlanStep } from '#shared/batches/plan'
import type { RecipeStage, StepKind } from '#shared/batches/vocabulary'
import type { BasketRequest, Instead } from '#shared/loans/contract'
import { breachSentence, type LimitBreach } from '#shared/loans/limits'
import { laterDay, type CalendarDay } from '#shared/time/day'
import type { Db, Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { reserveIngredients, type Need, type Shortfall } from '../larder/reservations.ts'
import { bookBasket } from '../loans/book.ts'
import { ownBatch, type BatchRow } from './access.ts'
import { loadFacts, type BatchFacts } from './facts.ts'
import { rehearse } from './rehearse.ts'
import { needsOf, type NeedRow } from './view.ts'

export interface BatchPlan {
  batch: BatchRow
  facts: BatchFacts
  needs: NeedRow[]
  steps: PlanStep[]
}

/** The plan of one's own batch, as the rules take it. */
export function loadPlan(db: Db | Tx, memberId: string, batchId: string): BatchPlan {
  const batch = ownBatch(db, memberId, batchId)
  const facts = loadFacts(db, [batchId])(batchId)
  const needs = needsOf(db, batchId)
  const steps = facts.steps.map((step): PlanStep => ({
    ...step,
    needs: needs
      .filter(({ need }) => need.stepId === step.id)
      .map(({ need }) => ({ ...need, untilStepId: need.untilStepId ?? undefined })),
  }))
  return { batch, facts, needs, steps }
}

/** @throws AppError `wrong-state` for a plan that cannot be carried out */
export function checkPlan({ steps }: BatchPlan) {
  const problem = planProblem(steps)
  if (problem) throw new AppError('wrong-state', planProblemSentence(problem))
}

export const longestLoan = ({ needs }: BatchPlan) => {
  const longest = new Map(needs.map(({ need, kind }) => [need.kindId, kind.maxLoanDays]))
  return (kindId: string) => longest.get(kindId)
}

/** The basket of a plan whose steps fall on given days; undefined when it needs no kit. */
export function basketOf({ batch, needs }: BatchPlan, lines: readonly PlanLine[]): BasketRequest | undefined {
  if (lines.length === 0) return undefined
  const categories = new Map(needs.map(({ need, kind }) => [need.kindId, kind.category]))
  return {
    batchId: batch.id,
    lines: lines.map(({ kindId, from, to, stepId }) => {
      const category = categories.get(kindId)
      // What the must touches; a corker never meets the culture.
      const touches = category === 'vessel' || category === 'transfer'
      return { kindId, from, to, stepId, ...(batch.wild && touches && { wild: true }) }
    }),
  }
}

/** Whole bottles the plan counts on, after as many rackings as it has. */
export function plannedBottles({ batch, steps }: Pick<BatchPlan, 'batch' | 'steps'>): number {
  const rackings = steps.filter((step) => step.kind === 'rack').length
  const fruit = batch.style === 'melomel' || batch.style === 'wine'
  return expectedBottles({ volumeLitres: batch.volumeLitres, rackings, fruit }, batch.bottleMl).bottles
}

const STEP_OF_STAGE: Record<RecipeStage, StepKind> = {
  must: 'prepare',
  feed: 'feed',
  fining: 'fine',
  bottling: 'bottle',
}

/** What the larder is asked for, each by the day of the step that uses it. Closures are counted by the bottle. */
export function larderNeeds(
  plan: Pick<BatchPlan, 'batch' | 'steps' | 'facts'>,
  days: ReadonlyMap<string, CalendarDay>,
  startOn: CalendarDay,
): Need[] {
  const bottles = plannedBottles(plan)
  const dayOf = (stage: RecipeStage) => {
    const step = plan.steps.find(({ kind }) => kind === STEP_OF_STAGE[stage])
    return (step && days.get(step.id)) ?? startOn
  }
  return plan.facts.lines.flatMap(({ ingredientId, quantity, perBottle, stage, unit }) => {
    if (ingredientId === null) return []
    const wanted = perBottle ? quantity * bottles : quantity
    const whole = unit === 'each' ? Math.ceil(wanted - 1e-9) : Math.round(wanted * 1000) / 1000
    return whole > 0 ? [{ ingredientId, quantity: whole, neededOn: dayOf(stage) }] : []
  })
}

/** What was asked of the larder and what it lacks, by ingredient. */
export function ingredientReplies(
  facts: BatchFacts,
  needs: readonly Need[],
  short: readonly Shortfall[],
): PlanIngredient[] {
  const named = new Map(facts.lines.map((line) => [line.ingredientId, line]))
  const lacking = new Map(short.map((line) => [line.ingredientId, line.short]))
  const needed = new Map<string, number>()
  for (const need of needs)
    needed.set(need.ingredientId, (needed.get(need.ingredientId) ?? 0) + need.quantity)
  return [...needed].map(([ingredientId, quantity]) => {
    const line = named.get(ingredientId)
    // Other batches lack some of it as well; of this one no more is short than it needs.
    const lacks = Math.min(quantity, lacking.get(ingredientId) ?? 0)
    return { ingredientId, name: line?.name ?? '', unit: line?.unit ?? 'g', needed: quantity, short: lacks }
  })
}

/**
 * What the plan would be from a day: the steps with their dates, the basket, and what stands in the way of each line. It is
 * rehearsed with the very services that book and reserve.
 * @throws AppError `not-found`, `forbidden`, `wrong-state`, `invalid`
 */
export function previewPlan(deps: Deps, user: SignedIn, batchId: string, startOn: CalendarDay): Plan {
  const plan = loadPlan(deps.db, user.id, batchId)
  checkPlan(plan)
  const days = stepDays(plan.steps, startOn)
  const lines = planLines(plan.steps, days, longestLoan(plan))
  const needs = larderNeeds(plan, days, startOn)
  const quote = quoteLines(deps, user, plan, lines)
  const short = rehearse(deps.db, (tx) => reserveIngredients(deps, tx, batchId, needs))
  return {
    startOn,
    endsOn: laterDay(startOn, planEnd(lines, days.values()) ?? startOn),
    fits: quote.every((line) => line.free),
    steps: plan.steps.map(({ id, kind, title }) => ({ id, kind, title, on: days.get(id) ?? startOn })),
    lines: quote,
    ingredients: ingredientReplies(plan.facts, needs, short),
    bottles: plannedBottles(plan),
  }
}

/** Each line with what stands in its way, by asking for the whole basket and taking it back. */
export function quoteLines(
  deps: Deps,
  user: SignedIn,
  plan: BatchPlan,
  lines: readonly PlanLine[],
): PlanLineReply[] {
  const refusal = refusalOf(deps, user, plan, lines)
  const names = new Map(plan.needs.map(({ need, kind }) => [need.kindId, kind.name]))
  return lines.map((line, index) => ({
    ...line,
    kindName: names.get(line.kindId) ?? '',
    free: !refusal.has(index),
    reason: refusal.get(index)?.reason ?? null,
    nearest: refusal.get(index)?.nearest ?? null,
    alternatives: refusal.get(index)?.alternatives ?? [],
  }))
}

type LineRefusal = Partial<Instead> & { reason: string | null }

function refusalOf(deps: Deps, user: SignedIn, plan: BatchPlan, lines: readonly PlanLine[]) {
  const basket = basketOf(plan, lines)
  if (!basket) return new Map<number, LineRefusal>()
  try {
    rehearse(deps.db, () => bookBasket(deps, user, basket))
    return new Map<number, LineRefusal>()
  } catch (error) {
    if (error instanceof AppError && error.more.body?.lines) return lineRefusals(error)
    throw error
  }
}

interface RefusedLine extends Partial<Instead> {
  index: number
  howTo?: string
  limits?: LimitBreach[]
}

/** What the basket said of each line it refused. */
function lineRefusals(error: AppError): Map<number, LineRefusal> {
  const refused = error.more.body?.lines as RefusedLine[]
  return new Map(
    refused.map(({ index, howTo, limits, ...instead }) => {
      const reason =
        error.code === 'needs-induction'
          ? `You need an induction first. ${howTo || 'Ask a steward to show you.'}`
          : (limits?.map(breachSentence).join(' ') ?? null)
      return [index, { ...instead, reason }]
    }),
  )
}
