import { sql } from 'drizzle-orm'
import { type AnySQLiteColumn, index, integer, real, sqliteTable, text } from 'drizzle-orm/sqlite-core'
import type { ReadingBefore } from '#shared/batches/reading-contract'
import type { LineComposition } from '#shared/batches/recipe'
import {
  AGAIN_ANSWERS,
  BATCH_PRIMERS,
  BATCH_STATUSES,
  BATCH_STYLES,
  BOTTLE_KINDS,
  NITROGEN_DEMANDS,
  READING_CHANGES,
  RECIPE_STAGES,
  RECIPE_UNITS,
  STEP_KINDS,
  VISIBILITIES,
  WATER_TREATMENTS,
} from '#shared/batches/vocabulary'
import type { Allergen } from '#shared/larder/vocabulary'
import { createdAt, day, flag, id, instant, updatedAt, version } from './columns.ts'
import { items, kinds } from './kit.ts'
import { ingredients } from './larder.ts'
import { loans } from './loans.ts'
import { members } from './people.ts'

export const batches = sqliteTable(
  'batches',
  {
    id: id(),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id),
    name: text('name').notNull(),
    style: text('style', { enum: BATCH_STYLES }).notNull(),
    volumeLitres: real('volume_litres').notNull(),
    visibility: text('visibility', { enum: VISIBILITIES }).notNull(),
    status: text('status', { enum: BATCH_STATUSES }).notNull(),
    /** Fermented with wild or mixed cultures: it takes kit that is kept for them. */
    wild: flag('wild').notNull().default(false),
    /** Measured or expected original gravity; null until either is known. */
    og: real('og'),
    expectedFg: real('expected_fg'),
    /** Day 0 of the plan; null until a day is fixed. */
    startOn: day('start_on'),
    pitchedAt: instant('pitched_at'),
    /** When it was drunk up, given away or given up. */
    endedAt: instant('ended_at'),
    notes: text('notes').notNull().default(''),
    waterTreatment: text('water_treatment', { enum: WATER_TREATMENTS }).notNull().default('none'),
    chlorineMgPerLitre: real('chlorine_mg_per_litre'),
    nitrogenDemand: text('nitrogen_demand', { enum: NITROGEN_DEMANDS }).notNull().default('medium'),
    /** The strain in the maker's words; what was pitched is a pitch. */
    yeast: text('yeast'),
    /** The strain's own limit, % by volume; null when not known. */
    tolerancePercent: real('tolerance_percent'),
    bottleKind: text('bottle_kind', { enum: BOTTLE_KINDS }).notNull().default('still-wine'),
    bottleMl: integer('bottle_ml').notNull().default(750),
    /** Null: bottled still. */
    targetVolumesCo2: real('target_volumes_co2'),
    primer: text('primer', { enum: BATCH_PRIMERS }).notNull().default('none'),
    /** Total sulphur dioxide added so far, for the label. */
    sulphiteMgPerLitre: real('sulphite_mg_per_litre').notNull().default(0),
    copiedFromId: text('copied_from_id').references((): AnySQLiteColumn => batches.id, {
      onDelete: 'set null',
    }),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [
    index('batches_member').on(t.memberId, t.createdAt, t.id),
    index('batches_shared')
      .on(t.createdAt, t.id)
      .where(sql`visibility = 'space'`),
    index('batches_status').on(t.status),
    index('batches_copied_from')
      .on(t.copiedFromId)
      .where(sql`copied_from_id IS NOT NULL`),
  ],
)

/** What goes in, in the order it is written. A line is of the larder, or the maker's own. */
export const recipeLines = sqliteTable(
  'recipe_lines',
  {
    id: id(),
    batchId: text('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    position: integer('position').notNull(),
    stage: text('stage', { enum: RECIPE_STAGES }).notNull(),
    /** Null: the maker's own, by `name`. */
    ingredientId: text('ingredient_id').references(() => ingredients.id),
    name: text('name'),
    unit: text('unit', { enum: RECIPE_UNITS }).notNull(),
    quantity: real('quantity').notNull(),
    /** So many for each bottle: a cap, a cork. */
    perBottle: flag('per_bottle').notNull().default(false),
    /** Of a line of one's own; an ingredient of the larder has its own. */
    composition: text('composition', { mode: 'json' }).$type<LineComposition>(),
    allergens: text('allergens', { mode: 'json' }).$type<Allergen[]>().notNull().default([]),
  },
  (t) => [
    index('recipe_lines_batch').on(t.batchId, t.position),
    index('recipe_lines_ingredient')
      .on(t.ingredientId)
      .where(sql`ingredient_id IS NOT NULL`),
  ],
)

export const batchSteps = sqliteTable(
  'batch_steps',
  {
    id: id(),
    batchId: text('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    position: integer('position').notNull(),
    kind: text('kind', { enum: STEP_KINDS }).notNull(),
    title: text('title').notNull(),
    guidance: text('guidance').notNull().default(''),
    dayOffset: integer('day_offset').notNull(),
    /** Null until the plan has a first day. */
    plannedOn: day('planned_on'),
    doneAt: instant('done_at'),
    doneNote: text('done_note'),
  },
  (t) => [
    index('batch_steps_batch').on(t.batchId, t.position),
    index('batch_steps_due')
      .on(t.plannedOn)
      .where(sql`planned_on IS NOT NULL AND done_at IS NULL`),
  ],
)

/** Kit a step needs, and the loan it was booked as. */
export const stepNeeds = sqliteTable(
  'step_needs',
  {
    id: id(),
    stepId: text('step_id')
      .notNull()
      .references(() => batchSteps.id, { onDelete: 'cascade' }),
    position: integer('position').notNull(),
    kindId: text('kind_id')
      .notNull()
      .references(() => kinds.id),
    fromDays: integer('from_days').notNull(),
    toDays: integer('to_days').notNull(),
    /** Kept until that step's day; null: its own step's. */
    untilStepId: text('until_step_id').references(() => batchSteps.id, { onDelete: 'set null' }),
    /** Null until it is booked. */
    loanId: text('loan_id').references(() => loans.id, { onDelete: 'set null' }),
  },
  (t) => [
    index('step_needs_step').on(t.stepId, t.position),
    index('step_needs_kind').on(t.kindId),
    index('step_needs_until_step')
      .on(t.untilStepId)
      .where(sql`until_step_id IS NOT NULL`),
    index('step_needs_loan')
      .on(t.loanId)
      .where(sql`loan_id IS NOT NULL`),
  ],
)

/** A gravity as it was read, and what it is worth. Deleted ones stay as a trace. */
export const readings = sqliteTable(
  'readings',
  {
    id: id(),
    batchId: text('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    at: instant('at').notNull(),
    gravity: real('gravity').notNull(),
    temperatureC: real('temperature_c').notNull(),
    correctedGravity: real('corrected_gravity').notNull(),
    /** Null: an instrument of one's own. */
    hydrometerItemId: text('hydrometer_item_id').references(() => items.id),
    /** What was added for the instrument then: a later check changes no old reading. */
    offsetSg: real('offset_sg').notNull().default(0),
    markedForTemperatureC: real('marked_for_temperature_c').notNull().default(20),
    ph: real('ph'),
    note: text('note'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    deletedAt: instant('deleted_at'),
    version: version(),
  },
  (t) => [
    index('readings_batch').on(t.batchId, t.at),
    index('readings_hydrometer')
      .on(t.hydrometerItemId)
      .where(sql`hydrometer_item_id IS NOT NULL`),
  ],
)

/** What a reading said before it was edited or deleted. */
export const readingChanges = sqliteTable(
  'reading_changes',
  {
    id: integer('id').primaryKey(),
    readingId: text('reading_id')
      .notNull()
      .references(() => readings.id, { onDelete: 'cascade' }),
    change: text('change', { enum: READING_CHANGES }).notNull(),
    changedAt: instant('changed_at').notNull(),
    changedBy: text('changed_by')
      .notNull()
      .references(() => members.id),
    before: text('before', { mode: 'json' }).$type<ReadingBefore>().notNull(),
  },
  (t) => [
    index('reading_changes_reading').on(t.readingId, t.id),
    index('reading_changes_by').on(t.changedBy),
  ],
)

export const bottlings = sqliteTable(
  'bottlings',
  {
    id: id(),
    batchId: text('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    bottledOn: day('bottled_on').notNull(),
    bottleKind: text('bottle_kind', { enum: BOTTLE_KINDS }).notNull(),
    bottleMl: integer('bottle_ml').notNull(),
    bottles: integer('bottles').notNull(),
    primer: text('primer', { enum: BATCH_PRIMERS }).notNull(),
    primingGrams: real('priming_grams'),
    targetVolumesCo2: real('target_volumes_co2'),
    gravity: real('gravity'),
    abvPercent: real('abv_percent'),
    /** What the gate said then. */
    ready: flag('ready').notNull(),
    /** Bottled although the gate was shut; `shown` is what the person was told before. */
    anyway: flag('anyway').notNull(),
    shown: text('shown', { mode: 'json' }).$type<string[]>().notNull().default([]),
    worstCaseVolumes: real('worst_case_volumes').notNull(),
    worstCaseBar: real('worst_case_bar').notNull(),
    note: text('note'),
    createdAt: createdAt(),
  },
  (t) => [index('bottlings_batch').on(t.batchId, t.bottledOn)],
)

export const tastings = sqliteTable(
  'tastings',
  {
    id: id(),
    batchId: text('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    tastedOn: day('tasted_on').notNull(),
    look: text('look').notNull().default(''),
    nose: text('nose').notNull().default(''),
    taste: text('taste').notNull().default(''),
    again: text('again', { enum: AGAIN_ANSWERS }).notNull(),
    changes: text('changes').notNull().default(''),
    createdAt: createdAt(),
  },
  (t) => [index('tastings_batch').on(t.batchId, t.tastedOn)],
)
