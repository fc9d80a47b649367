import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm'
import type { Batch } from '#shared/batches/contract'
import type { Bottling, Tasting } from '#shared/batches/bottling-contract'
import { stepCautions } from '#shared/batches/cautions'
import type { BatchStep } from '#shared/batches/plan-contract'
import type { RecipeLineReply } from '#shared/batches/recipe-contract'
import type { RecipeStage, StepKind } from '#shared/batches/vocabulary'
import { ALLERGEN_WORDS } from '#shared/larder/vocabulary'
import { addDays } from '#shared/time/day'
import { batchSteps, bottlings, readingChanges, stepNeeds, tastings } from '../../db/schema/batches.ts'
import { items, kinds } from '../../db/schema/kit.ts'
import { loans } from '../../db/schema/loans.ts'
import type { Db, Tx } from '../../db/open.ts'
import { readableBatch, type BatchRow } from './access.ts'
import { gravitiesOf, loadFacts, nextReply, standingReply, type LineRow, type StepRow } from './facts.ts'

const LIVE: readonly string[] = ['requested', 'approved', 'out']

/**
 * A batch with all that hangs on it, as this member may see it.
 * @throws AppError `not-found`
 */
export function batchReply(db: Db | Tx, memberId: string, batchId: string): Batch {
  const { batch, memberName } = readableBatch(db, memberId, batchId)
  const mine = batch.memberId === memberId
  const facts = loadFacts(db, [batchId])(batchId)
  const needs = needsOf(db, batchId)
  return {
    ...batch,
    memberName,
    mine,
    standing: standingReply(batch, facts),
    next: nextReply(batch, facts.steps),
    usualFg: gravitiesOf(batch, facts).usualFg ?? null,
    recipe: facts.lines.map(lineReply),
    steps: facts.steps.map((step) => stepReply(batch, facts, step, needs, mine)),
    booked: needs.some(({ loan }) => loan !== null && LIVE.includes(loan.status)),
    readings: readingReplies(db, facts.readings),
    bottlings: bottlingsOf(db, batchId),
    tastings: tastingsOf(db, batchId),
  }
}

export const lineReply = (line: LineRow): RecipeLineReply => ({
  ...line,
  grams: line.unit === 'g' ? line.quantity : undefined,
  ml: line.unit === 'ml' ? line.quantity : undefined,
  each: line.unit === 'each' ? line.quantity : undefined,
})

/** What the steps of a batch need, with the bookings made for it. */
export const needsOf = (db: Db | Tx, batchId: string) =>
  db
    .select({
      need: stepNeeds,
      kind: {
        name: kinds.name,
        category: kinds.category,
        maxFillTemperatureC: kinds.maxFillTemperatureC,
        maxLoanDays: kinds.maxLoanDays,
      },
      loan: loans,
      tag: items.tag,
    })
    .from(stepNeeds)
    .innerJoin(batchSteps, eq(batchSteps.id, stepNeeds.stepId))
    .innerJoin(kinds, eq(kinds.id, stepNeeds.kindId))
    .leftJoin(loans, eq(loans.id, stepNeeds.loanId))
    .leftJoin(items, eq(items.id, loans.itemId))
    .where(eq(batchSteps.batchId, batchId))
    .orderBy(asc(batchSteps.position), asc(stepNeeds.position))
    .all()
    .map(({ need, kind, loan, tag }) => ({
      need,
      kind,
      loan: loan && { id: loan.id, status: loan.status, from: loan.fromOn, to: loan.toOn, tag },
    }))
export type NeedRow = ReturnType<typeof needsOf>[number]

function stepReply(
  batch: BatchRow,
  facts: { lines: readonly LineRow[]; steps: readonly StepRow[] },
  step: StepRow,
  needs: readonly NeedRow[],
  mine: boolean,
): BatchStep {
  const own = needs.filter(({ need }) => need.stepId === step.id)
  const vessel = own.find(({ kind }) => kind.category === 'vessel')
  const dayOf = new Map(facts.steps.map(({ id, plannedOn }) => [id, plannedOn]))
  return {
    id: step.id,
    kind: step.kind,
    title: step.title,
    guidance: step.guidance,
    dayOffset: step.dayOffset,
    on: step.plannedOn,
    doneAt: step.doneAt,
    doneNote: step.doneNote,
    needs: own.map(({ need, kind, loan }) => {
      const end = dayOf.get(need.untilStepId ?? step.id) ?? null
      return {
        ...need,
        kindName: kind.name,
        from: step.plannedOn && addDays(step.plannedOn, need.fromDays),
        to: end && addDays(end, need.toDays),
        loan: mine ? loan : null,
      }
    }),
    cautions: stepCautions({
      kind: step.kind,
      vessel: vessel && {
        name: vessel.kind.name,
        maxFillTemperatureC: vessel.kind.maxFillTemperatureC,
      },
      bottleKind: batch.bottleKind,
      carbonated: (batch.targetVolumesCo2 ?? 0) > 0,
      allergens: allergenWords(linesOf(step.kind, facts.lines)),
      sulphite:
        (step.kind === 'prepare' && batch.waterTreatment === 'sulphite') ||
        usesSulphite(linesOf(step.kind, facts.lines)),
    }),
  }
}

/** The reply of one step. */
export function oneStepReply(db: Db | Tx, batch: BatchRow, stepId: string): BatchStep {
  const facts = loadFacts(db, [batch.id])(batch.id)
  const step = facts.steps.find(({ id }) => id === stepId) as StepRow
  return stepReply(batch, facts, step, needsOf(db, batch.id), true)
}

const STAGE_OF_STEP: Partial<Record<StepKind, RecipeStage>> = {
  prepare: 'must',
  feed: 'feed',
  fine: 'fining',
  bottle: 'bottling',
}
/** What a step puts in. */
const linesOf = (kind: StepKind, lines: readonly LineRow[]) =>
  lines.filter((line) => line.stage === STAGE_OF_STEP[kind])

const usesSulphite = (lines: readonly LineRow[]) =>
  lines.some((line) => line.kind === 'preservative' || line.allergens.includes('sulphites'))

const allergenWords = (lines: readonly LineRow[]) =>
  [...new Set(lines.flatMap((line) => line.allergens))].map((allergen) => ALLERGEN_WORDS[allergen])

function readingReplies(
  db: Db | Tx,
  rows: readonly ReturnType<ReturnType<typeof loadFacts>>['readings'][number][],
): Batch['readings'] {
  const itemIds = [...new Set(rows.flatMap((row) => row.hydrometerItemId ?? []))]
  const tags = new Map(
    db
      .select({ id: items.id, tag: items.tag })
      .from(items)
      .where(inArray(items.id, itemIds))
      .all()
      .map(({ id, tag }) => [id, tag]),
  )
  const edited = new Set(
    db
      .select({ readingId: readingChanges.readingId })
      .from(readingChanges)
      .where(
        and(
          eq(readingChanges.change, 'edited'),
          inArray(
            readingChanges.readingId,
            rows.map(({ id }) => id),
          ),
        ),
      )
      .all()
      .map(({ readingId }) => readingId),
  )
  return rows.map((row) => ({
    ...row,
    hydrometerTag: (row.hydrometerItemId && tags.get(row.hydrometerItemId)) ?? null,
    edited: edited.has(row.id),
  }))
}

export const bottlingsOf = (db: Db | Tx, batchId: string): Bottling[] =>
  db
    .select()
    .from(bottlings)
    .where(eq(bottlings.batchId, batchId))
    .orderBy(desc(bottlings.bottledOn), sql`rowid DESC`)
    .all()

export const tastingsOf = (db: Db | Tx, batchId: string): Tasting[] =>
  db
    .select()
    .from(tastings)
    .where(eq(tastings.batchId, batchId))
    .orderBy(desc(tastings.tastedOn), sql`rowid DESC`)
    .all()
