import type { MustLine } from './must.ts'

export const INGREDIENT_GROUPS = [
  'honey',
  'sugar',
  'malt',
  'juice',
  'fruit',
  'dried-fruit',
  'vegetable',
] as const
export type IngredientGroup = (typeof INGREDIENT_GROUPS)[number]

export const DATASETS = ['USDA SR', 'UK CoFID', 'common practice'] as const
export type Dataset = (typeof DATASETS)[number]

export interface IngredientFacts {
  name: string
  group: IngredientGroup
  waterFraction: number
  /** What dissolves: all that is neither water nor fibre, fat and the like. */
  solubleFraction: number
  /** Share of what dissolves that yeast can eat. */
  fermentableFraction: number
  /** mg N per kg, where known. */
  yanMgPerKg: number | undefined
  dataset: Dataset
  /** Number of the food in its table. */
  table: string
  /** Whether its figures were looked up, or recalled and still to be checked against the table. */
  provenance: 'seen' | 'memory'
  note: string | undefined
}

/** Grams of simple sugar that 100 g of sucrose would become: 105.26. Source: molar masses, 2 × 180.156 / 342.297. */
export const SUCROSE_AS_SIMPLE_SUGARS = (2 * 180.156) / 342.297

/**
 * Real mass of sugars from UK table figures, which count them as simple sugars (white sugar is listed as 105 g in 100 g).
 *
 * @param simple glucose, fructose and the like, g/100 g: the same either way
 * @param sucroseEquivalents sucrose and other double sugars as the table gives them, g/100 g
 * @returns g/100 g
 * Source: molar masses. Golden syrup (17-065): 46.1 and 32.8 make 77.3, not 79.0.
 */
export function sugarsFromEquivalents({
  simple,
  sucroseEquivalents,
}: {
  simple: number
  sucroseEquivalents: number
}): number {
  return simple + sucroseEquivalents / SUCROSE_AS_SIMPLE_SUGARS
}

interface Row {
  water: number
  /** Real grams, never equivalents. */
  sugars: number
  /** Fibre, fat and the protein that settles: g/100 g. For fruit from the same table's fibre column, from memory. */
  pulp?: number
  yan?: number
  /** Where sugars over solids misleads: the share that ferments, with the reason in `note`. */
  fermentable?: number
  note?: string
  provenance?: 'memory'
}

function facts(
  name: string,
  group: IngredientGroup,
  dataset: Dataset,
  table: string,
  row: Row,
): IngredientFacts {
  const soluble = Math.max(0, 100 - row.water - (row.pulp ?? 0))
  return {
    name,
    group,
    waterFraction: row.water / 100,
    solubleFraction: soluble / 100,
    fermentableFraction: row.fermentable ?? Math.min(1, row.sugars / soluble),
    yanMgPerKg: row.yan,
    dataset,
    table,
    provenance: row.provenance ?? 'seen',
    note: row.note,
  }
}

const usda = (table: string, name: string, group: IngredientGroup, row: Row): IngredientFacts =>
  facts(name, group, 'USDA SR', table, row)
const cofid = (table: string, name: string, group: IngredientGroup, row: Row): IngredientFacts =>
  facts(name, group, 'UK CoFID', table, row)
const remembered = (row: Row): Row => ({ ...row, provenance: 'memory' })

const HONEY_NOTE = 'A twentieth of honey sugars are double and triple sugars that most wine yeast leaves.'
const CRUSHED = 'As crushed: the pulp is left out of the volume of liquid.'

/**
 * What is in the things people ferment, per 100 g. Water and sugars come from the table named; `memory` marks rows that
 * were recalled. Fruit differs from tree to tree: measure the must.
 */
export const INGREDIENTS: Readonly<Record<string, IngredientFacts>> = {
  // Honey
  honey: usda('19296', 'Honey', 'honey', {
    water: 17.1,
    sugars: 82.12,
    fermentable: 0.95,
    yan: 25,
    note: HONEY_NOTE,
  }),
  'honey-uk': cofid('17-050', 'Honey (UK table)', 'honey', {
    water: 17.5,
    sugars: 76.4,
    fermentable: 0.93,
    yan: 25,
    note: 'Counted as simple sugars in its table; nearly all of it is.',
  }),

  // Sugars and syrups
  'white-sugar': usda('19335', 'White sugar', 'sugar', { water: 0.02, sugars: 99.8, fermentable: 1 }),
  'brown-sugar': usda('19334', 'Brown sugar', 'sugar', remembered({ water: 1.34, sugars: 97.02 })),
  glucose: facts('Glucose (brewing sugar)', 'sugar', 'common practice', 'monohydrate', {
    water: 9.1,
    sugars: 90.9,
    fermentable: 1,
    note: 'One molecule of water to each of sugar: 9.1 % by its formula.',
  }),
  'golden-syrup': cofid('17-065', 'Golden syrup', 'sugar', {
    water: 20,
    sugars: sugarsFromEquivalents({ simple: 23.1 + 23, sucroseEquivalents: 32.8 }),
    note: 'Half of it is split into simple sugars already.',
  }),
  'black-treacle': cofid('17-826', 'Black treacle', 'sugar', {
    water: 28.5,
    sugars: sugarsFromEquivalents({ simple: 0.45 * 66.8, sucroseEquivalents: 0.55 * 66.8 }),
    note: 'Total from the table; its split between sugars (55 % sucrose) is from memory.',
  }),
  molasses: usda('19304', 'Molasses', 'sugar', { water: 21.87, sugars: 74.72 }),
  'maple-syrup': usda('19353', 'Maple syrup', 'sugar', remembered({ water: 32.39, sugars: 60.46 })),
  'agave-syrup': usda('19912', 'Agave syrup', 'sugar', remembered({ water: 22.94, sugars: 68.03 })),

  // Malt
  'malt-syrup': usda('19352', 'Malt syrup', 'malt', {
    water: 21.1,
    sugars: 71.3,
    fermentable: 0.77,
    yan: 900,
    note: 'Long sugars count as sugar in the table; about 77 % ferments. Share and nitrogen from memory.',
  }),
  'dried-malt-extract': facts('Dried malt extract', 'malt', 'common practice', 'no table entry', {
    water: 4,
    sugars: 74,
    fermentable: 0.75,
    yan: 1100,
    provenance: 'memory',
    note: 'Solids, share and nitrogen from memory: go by the pack.',
  }),

  // Juices
  'apple-juice': usda('09016', 'Apple juice', 'juice', {
    water: 88.24,
    sugars: 9.62,
    pulp: 0.2,
    yan: 56,
    note: 'Nitrogen: mean 59 mg N/L of a Virginia survey, which ran from 9 to 249.',
  }),
  'apple-juice-clear': cofid('14-331', 'Apple juice, clear (UK table)', 'juice', {
    water: 86.6,
    sugars: sugarsFromEquivalents({ simple: 7.3, sucroseEquivalents: 2.4 }),
    pulp: 2.2,
    yan: 56,
    note: 'Total 9.7 as simple sugars; its split is from memory.',
  }),
  'grape-juice': usda(
    '09135',
    'Grape juice',
    'juice',
    remembered({ water: 84.51, sugars: 14.2, pulp: 0.2, yan: 140 }),
  ),
  'orange-juice': usda('09206', 'Orange juice', 'juice', remembered({ water: 88.3, sugars: 8.4, pulp: 0.4 })),
  'pineapple-juice': usda(
    '09273',
    'Pineapple juice',
    'juice',
    remembered({ water: 86.37, sugars: 9.98, pulp: 0.3 }),
  ),
  'pomegranate-juice': usda(
    '09442',
    'Pomegranate juice',
    'juice',
    remembered({ water: 85.95, sugars: 12.65, pulp: 0.3 }),
  ),
  'lemon-juice': usda('09152', 'Lemon juice', 'juice', remembered({ water: 92.31, sugars: 2.52, pulp: 0.4 })),

  // Fruit
  apple: usda('09003', 'Apples', 'fruit', { water: 85.56, sugars: 10.39, pulp: 2.6, note: CRUSHED }),
  applesauce: usda('09019', 'Apple purée, unsweetened', 'fruit', { water: 88.22, sugars: 9.39, pulp: 1.3 }),
  'applesauce-sweet': usda('09020', 'Apple purée, sweetened', 'fruit', {
    water: 81.98,
    sugars: 14.67,
    pulp: 1.4,
  }),
  'stewed-apple': cofid('14-320', 'Cooking apples, stewed without sugar', 'fruit', {
    water: 87.3,
    sugars: sugarsFromEquivalents({ simple: 7.7, sucroseEquivalents: 2 }),
    pulp: 2,
    note: 'Total 9.7 as simple sugars; its split is from memory.',
  }),
  'stewed-apple-sweet': cofid('14-332', 'Cooking apples, stewed with sugar', 'fruit', {
    water: 77.5,
    sugars: sugarsFromEquivalents({ simple: 10.3, sucroseEquivalents: 10.5 }),
    pulp: 1.9,
    note: 'Total 20.8 as simple sugars; its split is from memory.',
  }),
  pear: usda('09252', 'Pears', 'fruit', {
    water: 83.96,
    sugars: 9.75,
    pulp: 3.3,
    note: 'Part of the rest is sorbitol, which yeast leaves: perry stays a little sweet.',
  }),
  plum: usda('09279', 'Plums', 'fruit', { water: 87.23, sugars: 9.92, pulp: 1.8 }),
  'sour-cherry': usda('09063', 'Cherries, sour', 'fruit', { water: 86.13, sugars: 8.49, pulp: 2.1 }),
  'sweet-cherry': usda(
    '09070',
    'Cherries, sweet',
    'fruit',
    remembered({ water: 82.25, sugars: 12.82, pulp: 2.6 }),
  ),
  grape: usda('09132', 'Grapes', 'fruit', { water: 80.54, sugars: 15.48, pulp: 1.3, yan: 140 }),
  blackberry: usda('09042', 'Blackberries', 'fruit', { water: 88.15, sugars: 4.88, pulp: 6.2 }),
  raspberry: usda('09302', 'Raspberries', 'fruit', { water: 85.75, sugars: 4.42, pulp: 7.5 }),
  strawberry: usda('09316', 'Strawberries', 'fruit', { water: 90.95, sugars: 4.89, pulp: 2.4 }),
  blueberry: usda('09050', 'Blueberries', 'fruit', remembered({ water: 84.21, sugars: 9.96, pulp: 2.9 })),
  blackcurrant: cofid('14-053', 'Blackcurrants', 'fruit', {
    water: 77.4,
    sugars: 6.5,
    pulp: 8.5,
    note: 'Total 6.6 as simple sugars, nearly all of which are. Much acid.',
  }),
  redcurrant: usda('09068', 'Redcurrants', 'fruit', remembered({ water: 83.95, sugars: 7.37, pulp: 4.9 })),
  gooseberry: usda('09107', 'Gooseberries', 'fruit', remembered({ water: 87.87, sugars: 5, pulp: 5 })),
  elderberry: cofid('14-089', 'Elderberries', 'fruit', {
    water: 80.3,
    sugars: 7.3,
    pulp: 7.8,
    note: 'Total 7.4 as simple sugars. Heat the berries first: raw ones upset the stomach.',
  }),
  cranberry: usda('09078', 'Cranberries', 'fruit', remembered({ water: 87.32, sugars: 4.27, pulp: 3.9 })),
  mulberry: usda('09190', 'Mulberries', 'fruit', remembered({ water: 87.68, sugars: 8.1, pulp: 2.4 })),
  apricot: usda('09021', 'Apricots', 'fruit', remembered({ water: 86.35, sugars: 9.24, pulp: 2.6 })),
  peach: usda('09236', 'Peaches', 'fruit', remembered({ water: 88.87, sugars: 8.39, pulp: 1.9 })),
  nectarine: usda('09191', 'Nectarines', 'fruit', remembered({ water: 87.59, sugars: 7.89, pulp: 2.3 })),
  banana: usda('09040', 'Bananas', 'fruit', remembered({ water: 74.91, sugars: 12.23, pulp: 8.8 })),
  mango: usda('09176', 'Mangoes', 'fruit', remembered({ water: 83.46, sugars: 13.66, pulp: 2.1 })),
  pineapple: usda('09266', 'Pineapple', 'fruit', remembered({ water: 86, sugars: 9.85, pulp: 1.7 })),
  kiwi: usda('09148', 'Kiwi fruit', 'fruit', remembered({ water: 83.07, sugars: 8.99, pulp: 3.8 })),
  watermelon: usda('09326', 'Watermelon', 'fruit', remembered({ water: 91.45, sugars: 6.2, pulp: 0.6 })),
  fig: usda('09089', 'Figs, fresh', 'fruit', remembered({ water: 79.11, sugars: 16.26, pulp: 3.3 })),

  // Dried fruit
  raisin: usda('09298', 'Raisins', 'dried-fruit', { water: 15.43, sugars: 59.19, pulp: 6 }),
  date: usda('09087', 'Dates', 'dried-fruit', remembered({ water: 20.53, sugars: 63.35, pulp: 9.5 })),

  // Roots and stalks
  rhubarb: usda('09307', 'Rhubarb', 'vegetable', remembered({ water: 93.61, sugars: 1.1, pulp: 2.2 })),
  beetroot: usda('11080', 'Beetroot', 'vegetable', remembered({ water: 87.58, sugars: 6.76, pulp: 3.6 })),
  carrot: usda('11124', 'Carrots', 'vegetable', remembered({ water: 88.29, sugars: 4.74, pulp: 3.3 })),
  parsnip: usda('11298', 'Parsnips', 'vegetable', remembered({ water: 79.53, sugars: 4.8, pulp: 5.5 })),
}

/** A line of a must from an amount of something in the table. Throws `RangeError` for a name that is not in it. */
export function mustLine(ingredient: string, grams: number): MustLine {
  const found = INGREDIENTS[ingredient]
  if (!found) throw new RangeError(`ingredient is "${ingredient}": not in the table`)
  const { waterFraction, solubleFraction, fermentableFraction, yanMgPerKg } = found
  return { grams, waterFraction, solubleFraction, fermentableFraction, yanMgPerKg }
}
