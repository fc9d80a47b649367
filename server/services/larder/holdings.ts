import { and, gt, eq, sql } from 'drizzle-orm'
import type { IngredientStock } from '#shared/larder/contract'
import { dateState } from '#shared/larder/expiry'
import { fromMilli } from '#shared/larder/quantity'
import { freeQuantity, stockState } from '#shared/larder/stock'
import type { CalendarDay } from '#shared/time/day'
import type { ingredients } from '../../db/schema/larder.ts'
import { lots, reservations } from '../../db/schema/larder.ts'
import type { Db, Tx } from '../../db/open.ts'

/** What there is of an ingredient in all its lots, and what is spoken for. */
export interface Holding {
  remaining: number
  usable: number
  reserved: number
  lots: number
  pastLots: number
  useBy: CalendarDay | null
}

const NOTHING: Holding = { remaining: 0, usable: 0, reserved: 0, lots: 0, pastLots: 0, useBy: null }

/** What a batch has drawn of an ingredient, undone draws taken off. */
const drawnForBatch = sql<number>`coalesce((
  SELECT -sum(m.delta_milli) FROM moves m JOIN lots l ON l.id = m.lot_id
  WHERE m.batch_id = ${reservations.batchId} AND m.reason = 'draw' AND l.ingredient_id = ${reservations.ingredientId}
), 0)`

/** What a reservation still holds back: what the batch has drawn already no longer needs holding. */
export const outstandingMilli = sql<number>`max(0, ${reservations.quantityMilli} - ${drawnForBatch})`

/** Holdings by ingredient id, of one ingredient or of all: two statements, however many there are. */
export function readHoldings(db: Db | Tx, today: CalendarDay, ingredientId?: string) {
  const past = sql`${lots.useBy} IS NOT NULL AND ${lots.useBy} < ${today}`
  const stock = db
    .select({
      ingredientId: lots.ingredientId,
      remaining: sql<number>`sum(${lots.remainingMilli})`,
      past: sql<number>`sum(CASE WHEN ${past} THEN ${lots.remainingMilli} ELSE 0 END)`,
      lots: sql<number>`count(*)`,
      pastLots: sql<number>`sum(CASE WHEN ${past} THEN 1 ELSE 0 END)`,
      useBy: sql<CalendarDay | null>`min(CASE WHEN ${lots.useBy} >= ${today} THEN ${lots.useBy} END)`,
    })
    .from(lots)
    .where(and(gt(lots.remainingMilli, 0), ingredientId ? eq(lots.ingredientId, ingredientId) : undefined))
    .groupBy(lots.ingredientId)
    .all()
  const reserved = db
    .select({ ingredientId: reservations.ingredientId, milli: sql<number>`sum(${outstandingMilli})` })
    .from(reservations)
    .where(ingredientId ? eq(reservations.ingredientId, ingredientId) : undefined)
    .groupBy(reservations.ingredientId)
    .all()
  const found = new Map<string, Holding>()
  for (const row of stock)
    found.set(row.ingredientId, {
      remaining: fromMilli(row.remaining),
      usable: fromMilli(row.remaining - row.past),
      reserved: 0,
      lots: row.lots,
      pastLots: row.pastLots,
      useBy: row.useBy,
    })
  for (const row of reserved)
    found.set(row.ingredientId, {
      ...(found.get(row.ingredientId) ?? NOTHING),
      reserved: fromMilli(row.milli),
    })
  return { of: (id: string): Holding => found.get(id) ?? NOTHING }
}

export const parLevelOf = (row: typeof ingredients.$inferSelect) =>
  row.parMilli === null ? null : fromMilli(row.parMilli)

export function stockReply(holding: Holding, parLevel: number | null, today: CalendarDay): IngredientStock {
  const stock = { ...holding, parLevel }
  const onlyPast = holding.lots > 0 && holding.lots === holding.pastLots
  return {
    remaining: holding.remaining,
    usable: holding.usable,
    reserved: holding.reserved,
    free: freeQuantity(stock),
    lots: holding.lots,
    pastLots: holding.pastLots,
    state: stockState(stock),
    dateState: onlyPast ? 'past' : dateState(holding.useBy, today),
    useBy: holding.useBy,
  }
}
