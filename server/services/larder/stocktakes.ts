import { and, desc, eq, inArray, sql } from 'drizzle-orm'
import type { Stocktake, StocktakeRequest } from '#shared/larder/contract'
import { effectOf } from '#shared/larder/ledger'
import { fromMilli, isWholeWhereCounted, toMilli } from '#shared/larder/quantity'
import type { FieldError } from '#shared/http/problem'
import { ingredients, lots, moves, stocktakes } from '../../db/schema/larder.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import { newId } from '../../ids.ts'
import { spaceBrief } from '../space.ts'
import { recordMove } from './moves.ts'

type Line = StocktakeRequest['lines'][number]

/**
 * Recounts many lots in one go.
 * @throws AppError `wrong-state` with a line for each lot that moved since it was seen; `invalid` for lots that are not there
 */
export function commitStocktake(deps: Deps, memberId: string, request: StocktakeRequest): Stocktake {
  const at = deps.clock.now()
  return write(deps.db, (tx) => {
    const found = readLots(tx, request.lines)
    refuseMoved(request.lines, found)
    const id = newId()
    tx.insert(stocktakes)
      .values({ id, memberId, note: request.note || null, at })
      .run()
    for (const line of request.lines) {
      const { lot } = found.get(line.lotId) as Found
      const outcome = effectOf(lot, { reason: 'recount', milli: toMilli(line.counted) })
      if (!outcome.ok) throw new Error('a recount is never short')
      recordMove(tx, {
        lotId: lot.id,
        lot,
        effect: outcome.effect,
        reason: 'recount',
        memberId,
        stocktakeId: id,
        at,
      })
    }
    return readStocktake(deps, id, tx)
  })
}

interface Found {
  lot: typeof lots.$inferSelect
  ingredient: typeof ingredients.$inferSelect
}

function readLots(tx: Tx, lines: Line[]): Map<string, Found> {
  const ids = lines.map((line) => line.lotId)
  const rows = tx
    .select({ lot: lots, ingredient: ingredients })
    .from(lots)
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .where(inArray(lots.id, ids))
    .all()
  const found = new Map(rows.map((row) => [row.lot.id, row]))
  const errors: FieldError[] = []
  for (const [index, line] of lines.entries()) {
    const row = found.get(line.lotId)
    if (!row) errors.push({ path: `lines.${index}.lotId`, message: 'That lot is not here.' })
    else if (!isWholeWhereCounted(line.counted, row.ingredient.unit))
      errors.push({ path: `lines.${index}.counted`, message: 'Count whole pieces.' })
  }
  if (errors.length > 0) throw new AppError('invalid', 'Some lines need another look.', { errors })
  return found
}

function refuseMoved(lines: Line[], found: Map<string, Found>) {
  const moved = lines.flatMap((line, index) => {
    const remaining = fromMilli((found.get(line.lotId) as Found).lot.remainingMilli)
    return remaining === line.seen ? [] : [{ index, lotId: line.lotId, seen: line.seen, remaining }]
  })
  if (moved.length === 0) return
  const which = moved.length === 1 ? 'One lot has' : `${moved.length} lots have`
  throw new AppError(
    'wrong-state',
    `${which} moved since you looked. Count them again, then commit. Nothing was changed.`,
    { body: { lines: moved } },
  )
}

const selectBriefs = (db: Db | Tx) =>
  db
    .select({
      id: stocktakes.id,
      at: stocktakes.at,
      memberId: stocktakes.memberId,
      memberName: members.name,
      note: stocktakes.note,
      counted: sql<number>`count(${moves.id})`,
      different: sql<number>`coalesce(sum(${moves.deltaMilli} <> 0), 0)`,
      valueMinor: sql<number>`coalesce(sum(${moves.valueMinor}), 0)`,
    })
    .from(stocktakes)
    .innerJoin(members, eq(members.id, stocktakes.memberId))
    .leftJoin(moves, eq(moves.stocktakeId, stocktakes.id))
    .groupBy(stocktakes.id)

type BriefRow = NonNullable<ReturnType<ReturnType<typeof selectBriefs>['get']>>

const briefReply = (deps: Deps, { memberId, memberName, ...row }: BriefRow) => ({
  ...row,
  by: { id: memberId, name: memberName },
  currency: spaceBrief(deps).currency,
})

export function listStocktakes(deps: Deps, query: { limit: number; cursor?: string | undefined }) {
  const before = query.cursor ? decodeCursor(query.cursor, 2) : undefined
  const rows = selectBriefs(deps.db)
    .where(before && sql`(${stocktakes.at}, ${stocktakes.id}) < (${before[0]}, ${before[1]})`)
    .orderBy(desc(stocktakes.at), desc(stocktakes.id))
    .limit(query.limit + 1)
    .all()
  const page = pageFrom(rows, query.limit, (row) => [row.at, row.id])
  return { ...page, items: page.items.map((row) => briefReply(deps, row)) }
}

/** @throws AppError `not-found` */
export function readStocktake(deps: Deps, stocktakeId: string, db: Db | Tx = deps.db): Stocktake {
  const brief = selectBriefs(db).where(eq(stocktakes.id, stocktakeId)).get()
  if (!brief) throw notFound('That count')
  const lines = db
    .select({ move: moves, lot: lots, ingredient: ingredients })
    .from(moves)
    .innerJoin(lots, eq(lots.id, moves.lotId))
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .where(and(eq(moves.stocktakeId, stocktakeId)))
    .orderBy(moves.seq)
    .all()
    .map(({ move, lot, ingredient }) => ({
      lotId: lot.id,
      ingredientId: ingredient.id,
      ingredientName: ingredient.name,
      unit: ingredient.unit,
      shelf: lot.shelf,
      seen: fromMilli(move.afterMilli - move.deltaMilli),
      counted: fromMilli(move.afterMilli),
      difference: fromMilli(move.deltaMilli),
      valueMinor: move.valueMinor,
    }))
  return { ...briefReply(deps, brief), lines }
}
