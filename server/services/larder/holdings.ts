import { and, asc, eq, gt, sql } from 'drizzle-orm'
import type { IngredientStock } from '#shared/larder/contract'
import { dateState, firstExpiringFirst } from '#shared/larder/expiry'
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
  /** The lots as one sees them standing there, first expiring first. */
  jars: IngredientStock['jars']
}

const NOTHING: Holding = { remaining: 0, usable: 0, reserved: 0, lots: 0, pastLots: 0, useBy: null, jars: [] }

/** More than these would not fit on a row. */
const JARS_SHOWN = 12

/** What a batch has drawn of an ingredient, undone draws taken off. */
const drawnForBatch = sql<number>`coalesce((
  SELECT -sum(m.delta_milli) FROM moves m JOIN lots l ON l.id = m.lot_id
  WHERE m.batch_id = ${reservations.batchId} AND m.reason = 'draw' AND l.ingredient_id = ${reservations.ingredientId}
), 0)`

/** What a reservation still holds back: what the batch has drawn already no longer needs holding. */
export const outstandingMilli = sql<number>`max(0, ${reservations.quantityMilli} - ${drawnForBatch})`

/** Holdings by ingredient id, of one ingredient or of all: two statements, however many there are. */
export function readHoldings(db: Db | Tx, today: CalendarDay, ingredientId?: string) {
  const held = db
    .select({
      id: lots.id,
      ingredientId: lots.ingredientId,
      remainingMilli: lots.remainingMilli,
      quantityMilli: lots.quantityMilli,
      basisMilli: lots.basisMilli,
      useBy: lots.useBy,
      openedOn: lots.openedOn,
    })
    .from(lots)
    .where(and(gt(lots.remainingMilli, 0), ingredientId ? eq(lots.ingredientId, ingredientId) : undefined))
    .orderBy(asc(lots.ingredientId), asc(lots.useBy))
    .all()
  const reserved = db
    .select({ ingredientId: reservations.ingredientId, milli: sql<number>`sum(${outstandingMilli})` })
    .from(reservations)
    .where(ingredientId ? eq(reservations.ingredientId, ingredientId) : undefined)
    .groupBy(reservations.ingredientId)
    .all()
  const found = new Map<string, Holding>()
  const groups = new Map<string, HeldLot[]>()
  for (const lot of held) groups.set(lot.ingredientId, [...(groups.get(lot.ingredientId) ?? []), lot])
  for (const [id, group] of groups) found.set(id, sumOf(group, today))
  for (const row of reserved)
    found.set(row.ingredientId, {
      ...(found.get(row.ingredientId) ?? NOTHING),
      reserved: fromMilli(row.milli),
    })
  return { of: (id: string): Holding => found.get(id) ?? NOTHING }
}

type HeldLot = Pick<
  typeof lots.$inferSelect,
  'id' | 'remainingMilli' | 'quantityMilli' | 'basisMilli' | 'useBy' | 'openedOn'
>

function sumOf(group: HeldLot[], today: CalendarDay): Holding {
  const sum = (list: HeldLot[]) => fromMilli(list.reduce((total, lot) => total + lot.remainingMilli, 0))
  const good = group.filter((lot) => dateState(lot.useBy, today) !== 'past')
  const dated = group.map((lot) => ({ ...lot, remaining: fromMilli(lot.remainingMilli) }))
  return {
    remaining: sum(group),
    usable: sum(good),
    reserved: 0,
    lots: group.length,
    pastLots: group.length - good.length,
    useBy: good.find((lot) => lot.useBy !== null)?.useBy ?? null,
    jars: firstExpiringFirst(dated, today)
      .slice(0, JARS_SHOWN)
      .map((lot) => ({
        share: lot.remainingMilli / Math.max(lot.quantityMilli, lot.basisMilli),
        dateState: dateState(lot.useBy, today),
      })),
  }
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
    jars: holding.jars,
  }
}
