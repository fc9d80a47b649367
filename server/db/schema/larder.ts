import { sql } from 'drizzle-orm'
import {
  type AnySQLiteColumn,
  index,
  integer,
  primaryKey,
  real,
  sqliteTable,
  text,
  uniqueIndex,
} from 'drizzle-orm/sqlite-core'
import type { Composition } from '#shared/larder/contract'
import {
  INGREDIENT_KINDS,
  LEDGER_REASONS,
  SETTLEMENT_METHODS,
  UNITS,
  type Allergen,
} from '#shared/larder/vocabulary'
import { batches } from './batches.ts'
import { createdAt, day, flag, id, instant, updatedAt, version } from './columns.ts'
import { members } from './people.ts'

export const ingredients = sqliteTable(
  'ingredients',
  {
    id: id(),
    name: text('name').notNull(),
    kind: text('kind', { enum: INGREDIENT_KINDS }).notNull(),
    unit: text('unit', { enum: UNITS }).notNull(),
    /** Null: nothing a must would take from it (a stopper), or nobody knows. */
    composition: text('composition', { mode: 'json' }).$type<Composition>(),
    allergens: text('allergens', { mode: 'json' }).$type<Allergen[]>().notNull().default([]),
    /** Null: the space keeps none on purpose. */
    parMilli: integer('par_milli'),
    /** Null: opening changes nothing. */
    keepsOpenedDays: integer('keeps_opened_days'),
    gramsPerUnit: real('grams_per_unit'),
    note: text('note'),
    archived: flag('archived').notNull().default(false),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [uniqueIndex('ingredients_name').on(t.name)],
)

/** One jar, sack or box. What is in it is the sum of its moves: `remainingMilli` follows them by trigger and no other way. */
export const lots = sqliteTable(
  'lots',
  {
    id: id(),
    ingredientId: text('ingredient_id')
      .notNull()
      .references(() => ingredients.id),
    quantityMilli: integer('quantity_milli').notNull(),
    remainingMilli: integer('remaining_milli').notNull().default(0),
    /** What was in it, and what that was worth, when something was last put in: draws are priced from here. */
    basisMilli: integer('basis_milli').notNull().default(0),
    basisMinor: integer('basis_minor').notNull().default(0),
    costMinor: integer('cost_minor').notNull(),
    currency: text('currency').notNull(),
    bestBefore: day('best_before'),
    openedOn: day('opened_on'),
    /** Best-before, or the end of its time since opening: kept by the service from the rule in shared/larder/expiry. */
    useBy: day('use_by'),
    shelf: text('shelf'),
    donor: text('donor'),
    lotCode: text('lot_code'),
    note: text('note'),
    addedBy: text('added_by')
      .notNull()
      .references(() => members.id),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [
    index('lots_ingredient').on(t.ingredientId, t.useBy),
    index('lots_added_by').on(t.addedBy),
    index('lots_stock')
      .on(t.ingredientId, t.useBy, t.remainingMilli)
      .where(sql`remaining_milli > 0`),
    index('lots_use_by')
      .on(t.useBy)
      .where(sql`remaining_milli > 0`),
  ],
)

export const stocktakes = sqliteTable(
  'stocktakes',
  {
    id: id(),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id),
    note: text('note'),
    at: instant('at').notNull(),
  },
  (t) => [index('stocktakes_member').on(t.memberId), index('stocktakes_at').on(t.at, t.id)],
)

/** The ledger. It only grows: triggers refuse every change and removal, and a move that would take more than is there. */
export const moves = sqliteTable(
  'moves',
  {
    seq: integer('seq').primaryKey({ autoIncrement: true }),
    id: text('id').notNull(),
    lotId: text('lot_id')
      .notNull()
      .references(() => lots.id),
    reason: text('reason', { enum: LEDGER_REASONS }).notNull(),
    deltaMilli: integer('delta_milli').notNull(),
    /** What the value of the lot grew by. */
    valueMinor: integer('value_minor').notNull(),
    /** What went on the tab of the one who made it. */
    chargeMinor: integer('charge_minor').notNull(),
    afterMilli: integer('after_milli').notNull(),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id),
    /** Null: for no batch, or for one that was erased. */
    batchId: text('batch_id').references(() => batches.id, { onDelete: 'set null' }),
    stocktakeId: text('stocktake_id').references(() => stocktakes.id),
    undoesId: text('undoes_id').references((): AnySQLiteColumn => moves.id),
    note: text('note'),
    at: instant('at').notNull(),
  },
  (t) => [
    uniqueIndex('moves_id').on(t.id),
    index('moves_lot').on(t.lotId, t.deltaMilli),
    index('moves_lot_order').on(t.lotId, t.seq),
    index('moves_member').on(t.memberId, t.chargeMinor),
    index('moves_batch').on(t.batchId),
    index('moves_stocktake').on(t.stocktakeId),
    uniqueIndex('moves_undoes').on(t.undoesId),
  ],
)

/** What a member paid or brought, recorded by a steward. It only grows; a correction takes back. */
export const settlements = sqliteTable(
  'settlements',
  {
    seq: integer('seq').primaryKey({ autoIncrement: true }),
    id: text('id').notNull(),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id),
    amountMinor: integer('amount_minor').notNull(),
    currency: text('currency').notNull(),
    method: text('method', { enum: SETTLEMENT_METHODS }).notNull(),
    note: text('note'),
    recordedBy: text('recorded_by')
      .notNull()
      .references(() => members.id),
    at: instant('at').notNull(),
  },
  (t) => [
    uniqueIndex('settlements_id').on(t.id),
    index('settlements_member').on(t.memberId, t.amountMinor),
    index('settlements_recorded_by').on(t.recordedBy),
  ],
)

/** What a planned batch needs of an ingredient in all; what it has drawn already counts towards it. */
export const reservations = sqliteTable(
  'reservations',
  {
    batchId: text('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    ingredientId: text('ingredient_id')
      .notNull()
      .references(() => ingredients.id),
    quantityMilli: integer('quantity_milli').notNull(),
    neededOn: day('needed_on'),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.batchId, t.ingredientId] }),
    index('reservations_ingredient').on(t.ingredientId, t.batchId),
  ],
)
