import { and, asc, eq, gt, isNotNull, lte } from 'drizzle-orm'
import { dateState, SOON_DAYS } from '#shared/larder/expiry'
import { fromMilli } from '#shared/larder/quantity'
import { addDays } from '#shared/time/day'
import { ingredients, lots } from '../../db/schema/larder.ts'
import type { Deps } from '../../deps.ts'
import { readShoppingList } from './shopping.ts'

/** What a steward should buy, the emptiest first: for the desk. */
export function lowStock(deps: Deps) {
  return readShoppingList(deps)
    .items.map((line) => ({
      ingredientId: line.ingredientId,
      name: line.name,
      kind: line.kind,
      unit: line.unit,
      left: line.usable,
      reserved: line.reserved,
      parLevel: line.parLevel,
      toBuy: line.toBuy,
      state: line.usable > 0 ? ('low' as const) : ('out' as const),
    }))
    .sort((a, b) => share(a) - share(b) || (a.name < b.name ? -1 : 1))
}

const share = ({ left, parLevel, reserved }: { left: number; parLevel: number | null; reserved: number }) =>
  left / ((parLevel ?? 0) + reserved)

/** Lots that should be used soon or are past their date, oldest first: for the desk. */
export function expiringLots(deps: Deps) {
  const today = deps.clock.today()
  return deps.db
    .select({ lot: lots, ingredient: ingredients })
    .from(lots)
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .where(and(gt(lots.remainingMilli, 0), isNotNull(lots.useBy), lte(lots.useBy, addDays(today, SOON_DAYS))))
    .orderBy(asc(lots.useBy), asc(lots.id))
    .limit(50)
    .all()
    .map(({ lot, ingredient }) => ({
      lotId: lot.id,
      ingredientId: ingredient.id,
      name: ingredient.name,
      unit: ingredient.unit,
      remaining: fromMilli(lot.remainingMilli),
      useBy: lot.useBy,
      shelf: lot.shelf,
      state: dateState(lot.useBy, today),
    }))
}
