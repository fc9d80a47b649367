import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, line, numberIn, prose, queryFlag } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import { Quantity, QUANTITY_MAX, SomeQuantity } from './quantity.ts'
import {
  ALLERGENS,
  DATE_STATES,
  INGREDIENT_KINDS,
  LEDGER_REASONS,
  MOVE_REASONS,
  SHELVES,
  STOCK_STATES,
  UNITS,
} from './vocabulary.ts'

/** Most that one lot may have cost: a million pounds. */
export const COST_MAX_MINOR = 100_000_000

const Cost = intIn(0, COST_MAX_MINOR)
const params = z.object({ id: Id })

/** What a must takes from it. Fractions of its mass; what is neither water nor soluble stays as pulp. */
export const Composition = z
  .strictObject({
    waterFraction: numberIn(0, 1),
    solubleFraction: numberIn(0, 1),
    fermentableFraction: numberIn(0, 1),
    yanMgPerKg: numberIn(0, 250_000).optional(),
    /** Where the figures come from: a table and its row, or a label. */
    source: line(160).optional(),
  })
  .refine((c) => c.waterFraction + c.solubleFraction <= 1.000001, {
    path: ['solubleFraction'],
    message: 'Water and solids together cannot be more than the whole.',
  })
export type Composition = z.output<typeof Composition>

const Allergens = z
  .array(z.enum(ALLERGENS))
  .max(ALLERGENS.length)
  .transform((list) => ALLERGENS.filter((allergen) => list.includes(allergen)))

const ingredientFacts = {
  name: line(80),
  kind: z.enum(INGREDIENT_KINDS),
  unit: z.enum(UNITS),
  composition: Composition.nullable(),
  allergens: Allergens,
  /** What the space likes to keep; null: none on purpose. */
  parLevel: numberIn(0, QUANTITY_MAX).nullable(),
  /** How long it keeps once opened; null where opening changes nothing. */
  keepsOpenedDays: intIn(1, 3650).nullable(),
  /** Mass of one unit: of a ml by density, of a piece (a priming tablet). Null where mass does not matter. */
  gramsPerUnit: z.number().gt(0).max(100_000).nullable(),
  note: prose(1000).nullable(),
}

export const IngredientRequest = z.strictObject({
  ...z.object(ingredientFacts).partial().shape,
  name: ingredientFacts.name,
  unit: ingredientFacts.unit,
})
export type IngredientRequest = z.output<typeof IngredientRequest>

const { unit: _fixed, ...patchable } = ingredientFacts
/** The unit stays: every lot and move is counted in it. */
export const IngredientPatch = z.strictObject({
  ...z.object(patchable).partial().shape,
  archived: z.boolean().optional(),
})
export type IngredientPatch = z.output<typeof IngredientPatch>

export const IngredientStock = z.object({
  /** All there is, past its date or not. */
  remaining: z.number(),
  /** In lots that are not past their date. */
  usable: z.number(),
  /** What planned batches still need. */
  reserved: z.number(),
  free: z.number(),
  lots: z.int(),
  pastLots: z.int(),
  state: z.enum(STOCK_STATES),
  /** Of the lot to use next; `past` when there is none but old ones. */
  dateState: z.enum(DATE_STATES),
  useBy: CalendarDay.nullable(),
  /** Up to a dozen lots as they stand there, first expiring first: how full each is, and how its date is. */
  jars: z.array(z.object({ share: z.number(), dateState: z.enum(DATE_STATES) })),
})
export type IngredientStock = z.output<typeof IngredientStock>

export const Ingredient = z.object({
  id: Id,
  ...z.object(ingredientFacts).shape,
  allergens: z.array(z.enum(ALLERGENS)),
  composition: z.looseObject({ waterFraction: z.number(), solubleFraction: z.number() }).nullable(),
  archived: z.boolean(),
  stock: IngredientStock,
  version: z.int(),
})
export type Ingredient = z.output<typeof Ingredient>

const Person = z.object({ id: Id, name: z.string() })

const lotFacts = {
  bestBefore: CalendarDay.nullable(),
  openedOn: CalendarDay.nullable(),
  shelf: line(40).nullable(),
  donor: line(80).nullable(),
  lotCode: line(60).nullable(),
  note: prose(500).nullable(),
}

export const LotRequest = z.strictObject({
  ingredientId: Id,
  quantity: SomeQuantity,
  /** What was paid for all of it; 0 for a gift. */
  costMinor: Cost.default(0),
  currency: z.string().length(3).optional(),
  ...z.object(lotFacts).partial().shape,
})
export type LotRequest = z.output<typeof LotRequest>

export const LotPatch = z.strictObject({
  ...z.object(lotFacts).partial().shape,
  /** Only while nothing has been taken: what was charged stays charged. */
  costMinor: Cost.optional(),
})
export type LotPatch = z.output<typeof LotPatch>

export const Lot = z.object({
  id: Id,
  ingredientId: Id,
  ingredientName: z.string(),
  kind: z.enum(INGREDIENT_KINDS),
  unit: z.enum(UNITS),
  allergens: z.array(z.enum(ALLERGENS)),
  /** What it was filled with at first. */
  quantity: z.number(),
  remaining: z.number(),
  costMinor: z.int(),
  /** What is left of the cost: what the last drop would bring it to nothing from. */
  valueMinor: z.int(),
  currency: z.string(),
  ...z.object(lotFacts).shape,
  useBy: CalendarDay.nullable(),
  dateState: z.enum(DATE_STATES),
  addedBy: Person.nullable(),
  createdAt: Instant,
  version: z.int(),
})
export type Lot = z.output<typeof Lot>

export const MoveRequest = z.strictObject({
  reason: z.enum(MOVE_REASONS),
  /** What came or went; for a recount, what is there now (0 when it is empty). */
  quantity: Quantity,
  /** For a draw: the batch it goes into. */
  batchId: Id.optional(),
  /** For a top-up: what it cost. */
  costMinor: Cost.optional(),
  note: prose(300).optional(),
})
export type MoveRequest = z.output<typeof MoveRequest>

export const Move = z.object({
  id: Id,
  lotId: Id,
  ingredientId: Id,
  ingredientName: z.string(),
  unit: z.enum(UNITS),
  allergens: z.array(z.enum(ALLERGENS)),
  reason: z.enum(LEDGER_REASONS),
  /** What came or went, without sign; for a recount, what was found. */
  quantity: z.number(),
  /** What it did to the lot: negative when something was taken. */
  delta: z.number(),
  /** What was in the lot after it. */
  remaining: z.number(),
  /** What it put on the tab of the one who made it; negative when a draw was undone. */
  costMinor: z.int(),
  currency: z.string(),
  at: Instant,
  /** Who: yourself, or anyone for a steward; null for others. */
  by: Person.nullable(),
  batchId: Id.nullable(),
  note: z.string().nullable(),
  /** The move this one takes back. */
  undoes: Id.nullable(),
  undone: z.boolean(),
  /** Until when you can take it back; null when you cannot. */
  undoUntil: Instant.nullable(),
})
export type Move = z.output<typeof Move>

export const ShoppingLine = z.object({
  ingredientId: Id,
  name: z.string(),
  kind: z.enum(INGREDIENT_KINDS),
  unit: z.enum(UNITS),
  allergens: z.array(z.enum(ALLERGENS)),
  usable: z.number(),
  /** There, but past its date. */
  past: z.number(),
  reserved: z.number(),
  parLevel: z.number().nullable(),
  toBuy: z.number(),
  /** At the price of the newest lot that was paid for; null when none was. */
  estimateMinor: z.int().nullable(),
})
export type ShoppingLine = z.output<typeof ShoppingLine>

export const ShoppingList = z.object({
  currency: z.string(),
  estimateMinor: z.int(),
  items: z.array(ShoppingLine),
  nextCursor: z.null(),
})
export type ShoppingList = z.output<typeof ShoppingList>

export const ImportRow = z.object({
  line: z.int(),
  outcome: z.enum(['add', 'problem']),
  ingredient: z.string(),
  ingredientId: Id.nullable(),
  quantity: z.number().nullable(),
  unit: z.enum(UNITS).nullable(),
  costMinor: z.int().nullable(),
  bestBefore: CalendarDay.nullable(),
  openedOn: CalendarDay.nullable(),
  shelf: z.string().nullable(),
  donor: z.string().nullable(),
  lotCode: z.string().nullable(),
  messages: z.array(z.object({ column: z.string(), message: z.string() })),
})
export type ImportRow = z.output<typeof ImportRow>

export const ImportReport = z.object({
  dryRun: z.boolean(),
  /** Lots added, or that would be. */
  added: z.int(),
  problems: z.int(),
  /** Columns nobody asked for: not read. */
  ignoredColumns: z.array(z.string()),
  currency: z.string(),
  rows: z.array(ImportRow),
})
export type ImportReport = z.output<typeof ImportReport>

export const STOCKTAKE_LINES_MAX = 500

export const StocktakeRequest = z.strictObject({
  note: prose(500).optional(),
  lines: z
    .array(
      z.strictObject({
        lotId: Id,
        /** What the app said was there when the count was made. */
        seen: Quantity,
        counted: Quantity,
      }),
    )
    .min(1)
    .max(STOCKTAKE_LINES_MAX)
    .refine((lines) => new Set(lines.map((l) => l.lotId)).size === lines.length, 'Count each lot once.'),
})
export type StocktakeRequest = z.output<typeof StocktakeRequest>

export const StocktakeLine = z.object({
  lotId: Id,
  ingredientId: Id,
  ingredientName: z.string(),
  unit: z.enum(UNITS),
  shelf: z.string().nullable(),
  seen: z.number(),
  counted: z.number(),
  difference: z.number(),
  /** Cost that went with what was missing; 0 or less. */
  valueMinor: z.int(),
})

export const StocktakeBrief = z.object({
  id: Id,
  at: Instant,
  by: Person.nullable(),
  note: z.string().nullable(),
  counted: z.int(),
  different: z.int(),
  valueMinor: z.int(),
  currency: z.string(),
})
export const Stocktake = z.object({ ...StocktakeBrief.shape, lines: z.array(StocktakeLine) })
export type Stocktake = z.output<typeof Stocktake>

export const larderEndpoints = {
  ingredients: endpoint({
    method: 'GET',
    path: '/ingredients',
    access: 'member',
    summary: 'What the larder keeps, with its stock; by name.',
    query: z.object({
      ...pageQuery,
      q: z.string().trim().max(80).optional(),
      kind: z.enum(INGREDIENT_KINDS).optional(),
      group: z.enum(SHELVES).optional(),
      state: z.enum(['low', 'soon', 'past']).optional(),
      archived: queryFlag.default(false),
    }),
    reply: pageOf(Ingredient),
  }),
  ingredient: endpoint({
    method: 'GET',
    path: '/ingredients/:id',
    access: 'member',
    summary: 'One ingredient, with its stock.',
    params,
    reply: Ingredient,
  }),
  addIngredient: endpoint({
    method: 'POST',
    path: '/ingredients',
    access: 'steward',
    summary: 'Adds an ingredient or a consumable to the catalogue.',
    body: IngredientRequest,
    status: 201,
    creates: 'sync',
    reply: Ingredient,
  }),
  changeIngredient: endpoint({
    method: 'PATCH',
    path: '/ingredients/:id',
    access: 'steward',
    summary: 'Changes an ingredient; its unit stays.',
    params,
    body: IngredientPatch,
    versioned: true,
    reply: Ingredient,
  }),
  drawIngredient: endpoint({
    method: 'POST',
    path: '/ingredients/:id/draws',
    access: 'member',
    summary: 'Takes a quantity, first expiring first, from as many lots as it needs: all or nothing.',
    params,
    body: z.strictObject({ quantity: SomeQuantity, batchId: Id.optional(), note: prose(300).optional() }),
    status: 201,
    creates: 'sync',
    reply: z.object({ moves: z.array(Move), costMinor: z.int(), currency: z.string() }),
  }),
  lots: endpoint({
    method: 'GET',
    path: '/lots',
    access: 'member',
    summary: 'Lots that hold something, first expiring first or by shelf.',
    query: z.object({
      ...pageQuery,
      ingredientId: Id.optional(),
      shelf: line(40).optional(),
      state: z.enum(['soon', 'past']).optional(),
      /** Empty ones as well. */
      empty: queryFlag.default(false),
      sort: z.enum(['use-by', 'shelf']).default('use-by'),
    }),
    reply: pageOf(Lot),
  }),
  lot: endpoint({
    method: 'GET',
    path: '/lots/:id',
    access: 'member',
    summary: 'One lot.',
    params,
    reply: Lot,
  }),
  addLot: endpoint({
    method: 'POST',
    path: '/lots',
    access: 'member',
    summary: 'Puts a lot on the shelf.',
    body: LotRequest,
    status: 201,
    creates: 'sync',
    reply: Lot,
  }),
  changeLot: endpoint({
    method: 'PATCH',
    path: '/lots/:id',
    access: 'member',
    summary: 'Corrects a lot: for stewards, and for the one who added it.',
    params,
    body: LotPatch,
    versioned: true,
    reply: Lot,
  }),
  importLots: endpoint({
    method: 'POST',
    path: '/lots/import',
    access: 'steward',
    summary: 'Adds lots from a CSV file, all or none; with dryRun shows row by row what would happen.',
    query: z.object({ dryRun: queryFlag.default(false) }),
    upload: 'file',
    uploadType: 'text/csv',
    creates: 'sync',
    reply: ImportReport,
  }),
  exportLots: endpoint({
    method: 'GET',
    path: '/lots.csv',
    access: 'steward',
    summary: 'Every lot as CSV, safe to open in a spreadsheet.',
    file: 'text/csv; charset=utf-8',
    reply: null,
  }),
  moves: endpoint({
    method: 'GET',
    path: '/lots/:id/moves',
    access: 'member',
    summary: 'What came to a lot and went from it, newest first; names for stewards only.',
    params,
    query: z.object({ ...pageQuery }),
    reply: pageOf(Move),
  }),
  addMove: endpoint({
    method: 'POST',
    path: '/lots/:id/moves',
    access: 'member',
    summary: 'Draws from a lot, tops it up, writes off waste, or (stewards) recounts it.',
    params,
    body: MoveRequest,
    status: 201,
    creates: 'sync',
    reply: Move,
  }),
  undoMove: endpoint({
    method: 'POST',
    path: '/moves/:id/undo',
    access: 'member',
    summary: 'Takes a slip back within a quarter of an hour, by a move of its own.',
    params,
    body: z.strictObject({}),
    status: 201,
    creates: 'sync',
    reply: Move,
  }),
  shoppingList: endpoint({
    method: 'GET',
    path: '/shopping-list',
    access: 'member',
    summary: 'What to buy: up to the par levels, and for planned batches.',
    reply: ShoppingList,
  }),
  shoppingListCsv: endpoint({
    method: 'GET',
    path: '/shopping-list.csv',
    access: 'member',
    summary: 'The shopping list as CSV.',
    file: 'text/csv; charset=utf-8',
    reply: null,
  }),
  stocktakes: endpoint({
    method: 'GET',
    path: '/stocktakes',
    access: 'steward',
    summary: 'Counts of the shelf, newest first.',
    query: z.object({ ...pageQuery }),
    reply: pageOf(StocktakeBrief),
  }),
  stocktake: endpoint({
    method: 'GET',
    path: '/stocktakes/:id',
    access: 'steward',
    summary: 'One count, line by line.',
    params,
    reply: Stocktake,
  }),
  commitStocktake: endpoint({
    method: 'POST',
    path: '/stocktakes',
    access: 'steward',
    summary: 'Recounts many lots at once; refused line by line where a lot moved since it was seen.',
    body: StocktakeRequest,
    status: 201,
    creates: 'sync',
    reply: Stocktake,
  }),
}
