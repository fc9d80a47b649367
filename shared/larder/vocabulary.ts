/** How a thing in the larder is counted. Quantities of it are in this unit everywhere. */
export const UNITS = ['g', 'ml', 'each'] as const
export type Unit = (typeof UNITS)[number]

export const INGREDIENT_KINDS = [
  'honey',
  'sugar',
  'fruit',
  'juice',
  'malt',
  'hops',
  'spice',
  'nutrient',
  'acid',
  'fining',
  'preservative',
  'priming',
  'closure',
  'bottle',
  'label',
  'cleaning',
  'other',
] as const
export type IngredientKind = (typeof INGREDIENT_KINDS)[number]

export const KIND_WORDS: Record<IngredientKind, string> = {
  honey: 'Honey',
  sugar: 'Sugar and syrup',
  fruit: 'Fruit',
  juice: 'Juice',
  malt: 'Malt',
  hops: 'Hops',
  spice: 'Spice and herb',
  nutrient: 'Yeast food',
  acid: 'Acid and tannin',
  fining: 'Finings',
  preservative: 'Preservative',
  priming: 'Priming sugar',
  closure: 'Closures',
  bottle: 'Bottles',
  label: 'Labels',
  cleaning: 'Cleaning',
  other: 'Other',
}

/** The shelves of the larder, by the moment a brewer reaches for them. */
export const SHELVES = ['ferment', 'season', 'finish', 'bottling', 'cleaning', 'other'] as const
export type LarderShelf = (typeof SHELVES)[number]

export const SHELF_WORDS: Record<LarderShelf, string> = {
  ferment: 'To ferment',
  season: 'To feed and season',
  finish: 'To clear and prime',
  bottling: 'To bottle',
  cleaning: 'To clean',
  other: 'Other things',
}

export const SHELF_OF_KIND: Record<IngredientKind, LarderShelf> = {
  honey: 'ferment',
  sugar: 'ferment',
  fruit: 'ferment',
  juice: 'ferment',
  malt: 'ferment',
  hops: 'season',
  spice: 'season',
  nutrient: 'season',
  acid: 'season',
  fining: 'finish',
  preservative: 'finish',
  priming: 'finish',
  closure: 'bottling',
  bottle: 'bottling',
  label: 'bottling',
  cleaning: 'cleaning',
  other: 'other',
}

/** The 14 groups that must be named on food: Annex II of Regulation (EU) No 1169/2011, kept in UK law. */
export const ALLERGENS = [
  'celery',
  'cereals-with-gluten',
  'crustaceans',
  'eggs',
  'fish',
  'lupin',
  'milk',
  'molluscs',
  'mustard',
  'nuts',
  'peanuts',
  'sesame',
  'soya',
  'sulphites',
] as const
export type Allergen = (typeof ALLERGENS)[number]

export const ALLERGEN_WORDS: Record<Allergen, string> = {
  celery: 'celery',
  'cereals-with-gluten': 'cereals with gluten',
  crustaceans: 'crustaceans',
  eggs: 'eggs',
  fish: 'fish',
  lupin: 'lupin',
  milk: 'milk',
  molluscs: 'molluscs',
  mustard: 'mustard',
  nuts: 'nuts',
  peanuts: 'peanuts',
  sesame: 'sesame',
  soya: 'soya',
  sulphites: 'sulphites',
}

/** Why a lot grew or shrank, as a person says it. A recount gives what is there, the others what came or went. */
export const MOVE_REASONS = ['draw', 'top-up', 'waste', 'recount'] as const
export type MoveReason = (typeof MOVE_REASONS)[number]

/** What the ledger holds: the first filling of a lot is a move as well. */
export const LEDGER_REASONS = ['opening', ...MOVE_REASONS] as const
export type LedgerReason = (typeof LEDGER_REASONS)[number]

/** How a tab was settled, outside the app. `in-kind`: the member brought something for the shelf. */
export const SETTLEMENT_METHODS = ['cash', 'transfer', 'in-kind', 'correction'] as const
export type SettlementMethod = (typeof SETTLEMENT_METHODS)[number]

export const METHOD_WORDS: Record<SettlementMethod, string> = {
  cash: 'Cash',
  transfer: 'Bank transfer',
  'in-kind': 'Brought something in',
  correction: 'Correction',
}

/** Where a lot stands by its date. */
export const DATE_STATES = ['past', 'soon', 'fine', 'undated'] as const
export type DateState = (typeof DATE_STATES)[number]

/** How much there is of an ingredient, against what the space keeps and what planned batches need. */
export const STOCK_STATES = ['out', 'low', 'enough'] as const
export type StockState = (typeof STOCK_STATES)[number]
