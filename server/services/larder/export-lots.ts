import { asc, eq } from 'drizzle-orm'
import { fromMilli } from '#shared/larder/quantity'
import { ALLERGEN_WORDS, KIND_WORDS } from '#shared/larder/vocabulary'
import { moneyFigures } from '#shared/units/money'
import { ingredients, lots } from '../../db/schema/larder.ts'
import type { Deps } from '../../deps.ts'
import { csvFile } from '../../http/csv.ts'
import { readShoppingList } from './shopping.ts'

const allergenWords = (allergens: (keyof typeof ALLERGEN_WORDS)[]) =>
  allergens.map((allergen) => ALLERGEN_WORDS[allergen]).join('; ')

/** Every lot there ever was, oldest first. Its first columns are those an import reads. */
export function exportLots(deps: Deps) {
  const rows = deps.db
    .select({ lot: lots, ingredient: ingredients })
    .from(lots)
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .orderBy(asc(lots.createdAt), asc(lots.id))
    .all()
    .map(({ lot, ingredient }) => [
      ingredient.name,
      fromMilli(lot.quantityMilli),
      ingredient.unit,
      moneyFigures(lot.costMinor, lot.currency),
      lot.currency,
      lot.bestBefore,
      lot.openedOn,
      lot.shelf,
      lot.donor,
      lot.lotCode,
      fromMilli(lot.remainingMilli),
      lot.useBy,
      KIND_WORDS[ingredient.kind],
      allergenWords(ingredient.allergens),
      lot.note,
      lot.createdAt,
      lot.id,
    ])
  const columns = [
    'ingredient',
    'quantity',
    'unit',
    'cost',
    'currency',
    'best_before',
    'opened_on',
    'shelf',
    'donor',
    'lot_code',
    'remaining',
    'use_by',
    'kind',
    'allergens',
    'note',
    'added_at',
    'id',
  ]
  return csvFile(`lots-${deps.clock.today()}.csv`, columns, rows)
}

/** The shopping list, for a phone in a shop. */
export function exportShoppingList(deps: Deps) {
  const list = readShoppingList(deps)
  const rows = list.items.map((line) => [
    line.name,
    KIND_WORDS[line.kind],
    line.toBuy,
    line.unit,
    line.usable,
    line.reserved,
    line.parLevel,
    line.estimateMinor === null ? null : moneyFigures(line.estimateMinor, list.currency),
    list.currency,
    allergenWords(line.allergens),
  ])
  const columns = [
    'ingredient',
    'kind',
    'to_buy',
    'unit',
    'in_stock',
    'planned',
    'par_level',
    'estimate',
    'currency',
    'allergens',
  ]
  return csvFile(`shopping-list-${deps.clock.today()}.csv`, columns, rows)
}
