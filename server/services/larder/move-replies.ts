import { and, desc, eq, lt } from 'drizzle-orm'
import { alias } from 'drizzle-orm/sqlite-core'
import type { Move } from '#shared/larder/contract'
import { undoRefusal, undoUntil } from '#shared/larder/ledger'
import { fromMilli } from '#shared/larder/quantity'
import type { Page } from '#shared/http/paging'
import { roleCovers } from '#shared/people/vocabulary'
import { ingredients, lots, moves } from '../../db/schema/larder.ts'
import { members } from '../../db/schema/people.ts'
import type { Db, Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { lotRow } from './lots.ts'

const undoing = alias(moves, 'undoing')

const selectMoves = (db: Db | Tx) =>
  db
    .select({
      move: moves,
      lot: lots,
      ingredient: ingredients,
      memberName: members.name,
      undoneBy: undoing.id,
    })
    .from(moves)
    .innerJoin(lots, eq(lots.id, moves.lotId))
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .innerJoin(members, eq(members.id, moves.memberId))
    .leftJoin(undoing, eq(undoing.undoesId, moves.id))

export type MoveRow = NonNullable<ReturnType<ReturnType<typeof selectMoves>['get']>>

/** @throws AppError `not-found` */
export function moveRow(db: Db | Tx, moveId: string): MoveRow {
  const row = selectMoves(db).where(eq(moves.id, moveId)).get()
  if (!row) throw notFound('That move')
  return row
}

/** A move as this person may see it: who made it is for them and for stewards; which batch, for the maker alone. */
export function moveReply(deps: Deps, user: SignedIn, row: MoveRow): Move {
  const { move, lot, ingredient } = row
  const mine = move.memberId === user.id
  const named = mine || roleCovers(user.role, 'steward')
  const facts = { ...move, undone: row.undoneBy !== null, undoes: move.undoesId !== null }
  const undoable = mine && undoRefusal(facts, deps.clock.now()) === undefined
  return {
    id: move.id,
    lotId: move.lotId,
    ingredientId: lot.ingredientId,
    ingredientName: ingredient.name,
    unit: ingredient.unit,
    allergens: ingredient.allergens,
    reason: move.reason,
    quantity: fromMilli(move.reason === 'recount' ? move.afterMilli : Math.abs(move.deltaMilli)),
    delta: fromMilli(move.deltaMilli),
    remaining: fromMilli(move.afterMilli),
    costMinor: named ? move.chargeMinor : 0,
    currency: lot.currency,
    at: move.at,
    by: named ? { id: move.memberId, name: row.memberName } : null,
    batchId: mine ? move.batchId : null,
    note: named || move.reason !== 'draw' ? move.note : null,
    undoes: move.undoesId,
    undone: facts.undone,
    undoUntil: undoable ? undoUntil(move.at) : null,
  }
}

/** What came to a lot and went from it, newest first. */
export function listMoves(
  deps: Deps,
  user: SignedIn,
  lotId: string,
  query: { limit: number; cursor?: string | undefined },
): Page<Move> {
  lotRow(deps.db, lotId)
  const before = query.cursor ? Number(decodeCursor(query.cursor, 1)[0]) : undefined
  const rows = selectMoves(deps.db)
    .where(and(eq(moves.lotId, lotId), before === undefined ? undefined : lt(moves.seq, before)))
    .orderBy(desc(moves.seq))
    .limit(query.limit + 1)
    .all()
  const page = pageFrom(rows, query.limit, (row) => [row.move.seq])
  return { ...page, items: page.items.map((row) => moveReply(deps, user, row)) }
}
