import { and, asc, eq, inArray, isNull } from 'drizzle-orm'
import type { BatchCard, Standing } from '#shared/batches/contract'
import { isOver } from '#shared/batches/lifecycle'
import { nextStep } from '#shared/batches/plan'
import { expectedEnd, recipeSums, type RecipeSums } from '#shared/batches/recipe'
import { standingOf, type BatchReading } from '#shared/batches/standing'
import type { BatchStatus, StepKind } from '#shared/batches/vocabulary'
import { day } from '#shared/time/day'
import { batchSteps, readings, recipeLines } from '../../db/schema/batches.ts'
import { ingredients } from '../../db/schema/larder.ts'
import type { Db, Tx } from '../../db/open.ts'
import type { BatchRow } from './access.ts'

const BEFORE_YEAST: readonly StepKind[] = ['prepare', 'pitch']
const BEFORE_BOTTLES: readonly StepKind[] = [...BEFORE_YEAST, 'feed', 'rack', 'fine', 'chill', 'bottle']
/** Kinds of steps a batch in a state has behind it, ticked or not. */
const PAST: Record<BatchStatus, readonly StepKind[]> = {
  planned: [],
  fermenting: BEFORE_YEAST,
  conditioning: [...BEFORE_YEAST, 'feed'],
  bottled: BEFORE_BOTTLES,
  finished: BEFORE_BOTTLES,
  abandoned: BEFORE_BOTTLES,
}

/** Lines with what the larder knows of them; a line of one's own knows it itself. */
const selectLines = (db: Db | Tx, batchIds: readonly string[]) =>
  db
    .select({
      line: recipeLines,
      ingredient: {
        name: ingredients.name,
        kind: ingredients.kind,
        composition: ingredients.composition,
        gramsPerUnit: ingredients.gramsPerUnit,
        allergens: ingredients.allergens,
      },
    })
    .from(recipeLines)
    .leftJoin(ingredients, eq(ingredients.id, recipeLines.ingredientId))
    .where(inArray(recipeLines.batchId, [...batchIds]))
    .orderBy(asc(recipeLines.position))
    .all()
    .map(({ line, ingredient }) => ({
      ...line,
      name: ingredient?.name ?? line.name ?? '',
      kind: ingredient?.kind ?? null,
      composition: ingredient ? ingredient.composition : line.composition,
      gramsPerUnit: ingredient?.gramsPerUnit ?? null,
      allergens: ingredient?.allergens ?? line.allergens,
    }))
export type LineRow = ReturnType<typeof selectLines>[number]

const selectSteps = (db: Db | Tx, batchIds: readonly string[]) =>
  db
    .select()
    .from(batchSteps)
    .where(inArray(batchSteps.batchId, [...batchIds]))
    .orderBy(asc(batchSteps.position))
    .all()
export type StepRow = ReturnType<typeof selectSteps>[number]

const selectReadings = (db: Db | Tx, batchIds: readonly string[]) =>
  db
    .select()
    .from(readings)
    .where(and(inArray(readings.batchId, [...batchIds]), isNull(readings.deletedAt)))
    .orderBy(asc(readings.at))
    .all()
type ReadingRow = ReturnType<typeof selectReadings>[number]

export interface BatchFacts {
  lines: LineRow[]
  steps: StepRow[]
  readings: ReadingRow[]
}

/** Recipe, steps and readings of some batches: three statements however many. */
export function loadFacts(db: Db | Tx, batchIds: readonly string[]): (batchId: string) => BatchFacts {
  const lines = byBatch(selectLines(db, batchIds))
  const steps = byBatch(selectSteps(db, batchIds))
  const taken = byBatch(selectReadings(db, batchIds))
  return (batchId) => ({
    lines: lines.get(batchId) ?? [],
    steps: steps.get(batchId) ?? [],
    readings: taken.get(batchId) ?? [],
  })
}

export const sumsOf = (batch: BatchRow, lines: readonly LineRow[]): RecipeSums =>
  recipeSums({ ...batch, lines, tolerancePercent: batch.tolerancePercent ?? undefined })

/** Corrected readings as the sums take them. */
export const asReadings = (rows: readonly ReadingRow[]): BatchReading[] =>
  rows.map(({ at, correctedGravity, temperatureC }) => ({ at, gravity: correctedGravity, temperatureC }))

/** What it started from, and where it should end: written down, or what the recipe and the readings say. */
export function gravitiesOf(batch: BatchRow, facts: BatchFacts) {
  const sums = sumsOf(batch, facts.lines)
  const og = batch.og ?? facts.readings[0]?.correctedGravity ?? undefined
  const from = og ?? sums.must?.og
  const usualFg =
    sums.expectedFg ??
    (from !== undefined && from >= 1 && from <= 1.2
      ? expectedEnd({ style: batch.style, og: from, tolerancePercent: batch.tolerancePercent ?? undefined })
      : undefined)
  return { og, usualFg, expectedFg: batch.expectedFg ?? usualFg, sums }
}

export function standingReply(batch: BatchRow, facts: BatchFacts): Standing {
  const { og, expectedFg } = gravitiesOf(batch, facts)
  const standing = standingOf(og, expectedFg, asReadings(facts.readings))
  return {
    og: standing.og ?? null,
    gravity: standing.gravity ?? null,
    readAt: facts.readings.at(-1)?.at ?? null,
    drop: standing.drop ?? null,
    strength: standing.strength ?? null,
  }
}

/** The next thing to do: by its day, or by its place while nothing is dated. What is over or behind it asks for nothing. */
export function nextReply(batch: BatchRow, steps: readonly StepRow[]): BatchCard['next'] {
  if (isOver(batch.status)) return null
  const past: readonly StepKind[] = PAST[batch.status]
  const dated = steps
    .filter((step) => !past.includes(step.kind))
    .map((step) => ({
      ...step,
      // Undated steps keep the order they stand in.
      on: step.plannedOn ?? day('2999-12-31'),
      done: step.doneAt !== null,
    }))
  const next = nextStep(dated)
  return next ? { id: next.id, kind: next.kind, title: next.title, on: next.plannedOn } : null
}

function byBatch<Row extends { batchId: string }>(rows: readonly Row[]): Map<string, Row[]> {
  const groups = new Map<string, Row[]>()
  for (const row of rows) {
    const group = groups.get(row.batchId)
    if (group) group.push(row)
    else groups.set(row.batchId, [row])
  }
  return groups
}
