import { asc, eq, sql } from 'drizzle-orm'
import type { ShoppingLine, ShoppingList } from '#shared/larder/contract'
import { estimateMinor } from '#shared/larder/cost'
import { fromMilli, toMilli } from '#shared/larder/quantity'
import { quantityToBuy } from '#shared/larder/stock'
import { ingredients, lots } from '../../db/schema/larder.ts'
import type { Deps } from '../../deps.ts'
import { spaceBrief } from '../space.ts'
import { parLevelOf, readHoldings } from './holdings.ts'

/** What brings every ingredient back to its par level after the planned batches took theirs; four statements. */
export function readShoppingList(deps: Deps): ShoppingList {
  const holdings = readHoldings(deps.db, deps.clock.today())
  const prices = lastPrices(deps)
  const items = deps.db
    .select()
    .from(ingredients)
    .where(eq(ingredients.archived, false))
    .orderBy(asc(ingredients.name), asc(ingredients.id))
    .all()
    .map((row): ShoppingLine => {
      const holding = holdings.of(row.id)
      const parLevel = parLevelOf(row)
      const toBuy = quantityToBuy({ ...holding, parLevel })
      const price = prices.get(row.id)
      return {
        ...row,
        ingredientId: row.id,
        usable: holding.usable,
        past: fromMilli(toMilli(holding.remaining) - toMilli(holding.usable)),
        reserved: holding.reserved,
        parLevel,
        toBuy,
        estimateMinor: price ? estimateMinor(price, toMilli(toBuy)) : null,
      }
    })
    .filter((line) => line.toBuy > 0)
  return {
    currency: spaceBrief(deps).currency,
    estimateMinor: items.reduce((sum, line) => sum + (line.estimateMinor ?? 0), 0),
    items,
    nextCursor: null,
  }
}

/** Cost and quantity of the newest paid lot of each ingredient. */
function lastPrices(deps: Deps) {
  const rows = deps.db
    .select({
      ingredientId: lots.ingredientId,
      costMinor: lots.costMinor,
      quantityMilli: lots.quantityMilli,
      // SQLite takes the bare columns from the row that holds the maximum.
      newest: sql<string>`max(${lots.createdAt})`,
    })
    .from(lots)
    .where(sql`${lots.costMinor} > 0`)
    .groupBy(lots.ingredientId)
    .all()
  return new Map(rows.map((row) => [row.ingredientId, row]))
}
