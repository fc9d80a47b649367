import { eq } from 'drizzle-orm'
import { freeQuantity } from '#shared/larder/stock'
import { fromMilli, toMilli } from '#shared/larder/quantity'
import type { CalendarDay } from '#shared/time/day'
import { reservations } from '../../db/schema/larder.ts'
import type { Db, Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { readHoldings } from './holdings.ts'

export interface Need {
  ingredientId: string
  /** In the ingredient's unit, for the whole batch; what it has drawn already counts towards it. */
  quantity: number
  neededOn?: CalendarDay
}

export interface Shortfall {
  ingredientId: string
  /** What no lot in date can give once every planned batch has its part: it goes on the shopping list. */
  short: number
}

/**
 * Holds back what a batch needs, in place of what was held for it before. Never refuses: what the larder lacks comes back
 * as shortfalls, and the shopping list shows it. Call it inside the transaction that plans the batch.
 */
export function reserveIngredients(deps: Deps, tx: Tx, batchId: string, needs: Need[]): Shortfall[] {
  releaseReservations(tx, batchId)
  const wanted = new Map<string, { milli: number; neededOn: CalendarDay | null }>()
  for (const need of needs) {
    const before = wanted.get(need.ingredientId)
    const neededOn = [before?.neededOn, need.neededOn].filter((on) => on != null).sort()[0] ?? null
    wanted.set(need.ingredientId, { milli: (before?.milli ?? 0) + toMilli(need.quantity), neededOn })
  }
  for (const [ingredientId, { milli, neededOn }] of wanted)
    if (milli > 0)
      tx.insert(reservations)
        .values({ batchId, ingredientId, quantityMilli: milli, neededOn, createdAt: deps.clock.now() })
        .run()
  return shortfalls(deps, tx, [...wanted.keys()])
}

/** Lets go of all that is held for a batch. */
export function releaseReservations(tx: Tx, batchId: string) {
  tx.delete(reservations).where(eq(reservations.batchId, batchId)).run()
}

/** What is held for a batch, by ingredient. */
export function reservationsOf(db: Db | Tx, batchId: string) {
  return db
    .select()
    .from(reservations)
    .where(eq(reservations.batchId, batchId))
    .all()
    .map((row) => ({
      ingredientId: row.ingredientId,
      quantity: fromMilli(row.quantityMilli),
      neededOn: row.neededOn,
    }))
}

function shortfalls(deps: Deps, tx: Tx, ingredientIds: string[]): Shortfall[] {
  const holdings = readHoldings(tx, deps.clock.today())
  return ingredientIds.flatMap((ingredientId) => {
    const { usable, reserved } = holdings.of(ingredientId)
    const short = freeQuantity({ usable: reserved, reserved: usable, parLevel: null })
    return short > 0 ? [{ ingredientId, short }] : []
  })
}
