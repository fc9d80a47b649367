import { and, asc, eq, isNull, notInArray } from 'drizzle-orm'
import { chooseKind } from '#shared/batches/kit-choice'
import { inOrder, planProblem, planProblemSentence } from '#shared/batches/plan'
import type { BatchStep, StepsRequest } from '#shared/batches/plan-contract'
import { templateFor } from '#shared/batches/plan-template'
import type { StepKind } from '#shared/batches/vocabulary'
import { addDays, daysBetween, type CalendarDay } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'
import { batches, batchSteps, stepNeeds } from '../../db/schema/batches.ts'
import { kinds } from '../../db/schema/kit.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { newId } from '../../ids.ts'
import { ownBatch, touchBatch, type BatchRow } from './access.ts'
import { batchReply, needsOf, oneStepReply } from './view.ts'

interface NewStep {
  id: string
  kind: StepKind
  title: string
  guidance: string
  dayOffset: number
  needs: { kindId: string; fromDays: number; toDays: number; untilStepId: string | undefined }[]
}

/** The usual steps of a batch's style, with the kinds of the shelf that would do for each. */
export function writeUsualSteps(tx: Tx, batch: BatchRow) {
  const shelf = tx.select().from(kinds).where(isNull(kinds.retiredAt)).orderBy(asc(kinds.name)).all()
  const template = templateFor(batch.style, (batch.targetVolumesCo2 ?? 0) > 0)
  const ids = template.map(() => newId())
  const steps = template.map((step, place): NewStep => ({
    ...step,
    id: ids[place] as string,
    needs: step.needs.flatMap((need) => {
      const kind = chooseKind(need.role, shelf, batch)
      if (!kind) return []
      const until = need.until && ids[template.findIndex((other) => other.kind === need.until)]
      return [{ kindId: kind.id, fromDays: need.fromDays, toDays: need.toDays, untilStepId: until }]
    }),
  }))
  insertSteps(tx, batch, steps)
}

function insertSteps(tx: Tx, batch: Pick<BatchRow, 'id' | 'startOn'>, steps: readonly NewStep[]) {
  inOrder(steps).forEach((step, position) => {
    const values = {
      position,
      kind: step.kind,
      title: step.title,
      guidance: step.guidance,
      dayOffset: step.dayOffset,
      plannedOn: batch.startOn && addDays(batch.startOn, step.dayOffset),
    }
    tx.insert(batchSteps)
      .values({ ...values, id: step.id, batchId: batch.id })
      .onConflictDoUpdate({ target: batchSteps.id, set: values })
      .run()
  })
  // Needs come after all steps: one may be kept until a step that stands later.
  for (const step of steps)
    step.needs.forEach((need, position) =>
      tx
        .insert(stepNeeds)
        .values({ ...need, id: newId(), stepId: step.id, position, untilStepId: need.untilStepId ?? null })
        .run(),
    )
}

/** Copies the steps of another batch, undone and undated. */
export function copySteps(tx: Tx, fromBatchId: string, batch: BatchRow) {
  const rows = tx
    .select()
    .from(batchSteps)
    .where(eq(batchSteps.batchId, fromBatchId))
    .orderBy(asc(batchSteps.position))
    .all()
  const ids = new Map(rows.map(({ id }) => [id, newId()]))
  const needs = needsOf(tx, fromBatchId)
  insertSteps(
    tx,
    batch,
    rows.map((row) => ({
      ...row,
      id: ids.get(row.id) as string,
      needs: needs
        .filter(({ need }) => need.stepId === row.id)
        .map(({ need }) => ({
          kindId: need.kindId,
          fromDays: need.fromDays,
          toDays: need.toDays,
          untilStepId: need.untilStepId === null ? undefined : ids.get(need.untilStepId),
        })),
    })),
  )
}

/**
 * Writes the steps of one's own batch in place of those that were there; a step that keeps its id keeps its tick.
 * @throws AppError `wrong-state` while kit is booked for it, `invalid` for a plan that cannot be, `stale`
 */
export function saveSteps(
  deps: Deps,
  memberId: string,
  batchId: string,
  version: number,
  request: StepsRequest,
): { version: number; steps: BatchStep[] } {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    refuseWhileBooked(tx, batchId)
    const before = new Map(stepRows(tx, batchId).map((step) => [step.id, step]))
    request.steps.forEach((step, place) => {
      if (step.id !== undefined && !before.has(step.id))
        throw invalidField(`steps.${place}.id`, 'This batch has no such step.')
    })
    const ids = request.steps.map((step) => step.id ?? newId())
    if (new Set(ids).size < ids.length) throw invalidField('steps', 'A step stands in the list twice.')
    const steps = request.steps.map((step, place): NewStep => ({
      ...step,
      id: ids[place] as string,
      needs: step.needs.map(({ untilStep, ...need }) => ({
        ...need,
        // A place that is not in the list is found by the check of the whole plan.
        untilStepId: untilStep == null ? undefined : (ids[untilStep] ?? 'none'),
      })),
    }))
    const problem = planProblem(steps)
    if (problem) {
      const place = 'stepId' in problem ? ids.indexOf(problem.stepId) : 0
      throw invalidField(
        'need' in problem ? `steps.${place}.needs.${problem.need}` : 'steps',
        planProblemSentence(problem),
      )
    }
    checkKinds(tx, request)
    for (const { need } of needsOf(tx, batchId)) tx.delete(stepNeeds).where(eq(stepNeeds.id, need.id)).run()
    tx.delete(batchSteps)
      .where(and(eq(batchSteps.batchId, batchId), notInArray(batchSteps.id, ids)))
      .run()
    insertSteps(tx, batch, steps)
    touchBatch(deps, tx, batchId, version)
    const { steps: saved } = batchReply(tx, memberId, batchId)
    return { version: version + 1, steps: saved }
  })
}

function checkKinds(tx: Tx, request: StepsRequest) {
  const known = new Set(
    tx
      .select({ id: kinds.id })
      .from(kinds)
      .where(isNull(kinds.retiredAt))
      .all()
      .map(({ id }) => id),
  )
  request.steps.forEach((step, place) =>
    step.needs.forEach((need, at) => {
      if (!known.has(need.kindId))
        throw invalidField(`steps.${place}.needs.${at}.kindId`, 'The space does not lend this.')
    }),
  )
}

export function refuseWhileBooked(db: Db | Tx, batchId: string) {
  const live = needsOf(db, batchId).some(
    ({ loan }) => loan !== null && ['requested', 'approved', 'out'].includes(loan.status),
  )
  if (live)
    throw new AppError('wrong-state', 'Kit is booked for this plan. Move its steps, or drop the plan first.')
}

export const stepRows = (tx: Tx, batchId: string) =>
  tx.select().from(batchSteps).where(eq(batchSteps.batchId, batchId)).orderBy(asc(batchSteps.position)).all()

/** Adds a step that needs no kit. */
export function addStep(
  deps: Deps,
  memberId: string,
  batchId: string,
  request: { kind: StepKind; title: string; guidance: string; on: CalendarDay },
): BatchStep {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    const startOn = batch.startOn ?? deps.clock.today()
    const dayOffset = daysBetween(startOn, request.on)
    if (dayOffset < 0) throw invalidField('on', 'That is before the first day of the plan.')
    if (dayOffset > 730) throw invalidField('on', 'That is more than two years on.')
    const rows = stepRows(tx, batchId)
    const after = rows.filter((row) => row.dayOffset > dayOffset)
    const position = rows.length - after.length
    for (const row of after)
      tx.update(batchSteps)
        .set({ position: row.position + 1 })
        .where(eq(batchSteps.id, row.id))
        .run()
    const id = newId()
    const { on, ...step } = request
    tx.insert(batchSteps)
      .values({ ...step, id, batchId, position, dayOffset, plannedOn: batch.startOn && on })
      .run()
    touchBatch(deps, tx, batchId)
    return oneStepReply(tx, batch, id)
  })
}

/**
 * Ticks a step. Pitching starts the ferment; what it moves on besides is the batch's state.
 * @throws AppError `not-found`, `wrong-state` when it is ticked already
 */
export function tickStep(
  deps: Deps,
  memberId: string,
  batchId: string,
  stepId: string,
  { at = deps.clock.now(), note }: { at?: Instant | undefined; note?: string | undefined },
): BatchStep {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    const step = stepOf(tx, batchId, stepId)
    if (step.doneAt !== null) throw new AppError('wrong-state', 'This step is ticked already.')
    if (at > deps.clock.now()) throw invalidField('at', 'That is still to come. Tick it once it is done.')
    tx.update(batchSteps)
      .set({ doneAt: at, doneNote: note ?? null })
      .where(eq(batchSteps.id, stepId))
      .run()
    if (step.kind === 'pitch' && batch.status === 'planned')
      tx.update(batches)
        .set({ status: 'fermenting', pitchedAt: batch.pitchedAt ?? at })
        .where(eq(batches.id, batchId))
        .run()
    touchBatch(deps, tx, batchId)
    return oneStepReply(tx, batch, stepId)
  })
}

/** @throws AppError `not-found`, `wrong-state` when it is not ticked */
export function untickStep(deps: Deps, memberId: string, batchId: string, stepId: string): BatchStep {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    const step = stepOf(tx, batchId, stepId)
    if (step.doneAt === null) throw new AppError('wrong-state', 'This step is not ticked.')
    tx.update(batchSteps).set({ doneAt: null, doneNote: null }).where(eq(batchSteps.id, stepId)).run()
    touchBatch(deps, tx, batchId)
    return oneStepReply(tx, batch, stepId)
  })
}

function stepOf(tx: Tx, batchId: string, stepId: string) {
  const step = tx
    .select()
    .from(batchSteps)
    .where(and(eq(batchSteps.id, stepId), eq(batchSteps.batchId, batchId)))
    .get()
  if (!step) throw notFound('That step')
  return step
}
