import { and, asc, eq, isNotNull, sql } from 'drizzle-orm'
import type { Ingredient, IngredientPatch, IngredientRequest } from '#shared/larder/contract'
import { useByDay } from '#shared/larder/expiry'
import { toMilli } from '#shared/larder/quantity'
import { KIND_WORDS, SHELF_OF_KIND, type IngredientKind, type LarderShelf } from '#shared/larder/vocabulary'
import type { Page } from '#shared/http/paging'
import type { CalendarDay } from '#shared/time/day'
import { ingredients, lots } from '../../db/schema/larder.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import { newId } from '../../ids.ts'
import { parLevelOf, readHoldings, stockReply, type Holding } from './holdings.ts'

export type IngredientRow = typeof ingredients.$inferSelect

interface ListQuery {
  q?: string | undefined
  kind?: IngredientKind | undefined
  group?: LarderShelf | undefined
  state?: 'low' | 'soon' | 'past' | undefined
  archived: boolean
  limit: number
  cursor?: string | undefined
}

function reply(row: IngredientRow, holding: Holding, today: CalendarDay): Ingredient {
  const parLevel = parLevelOf(row)
  return { ...row, parLevel, stock: stockReply(holding, parLevel, today) }
}

/** @throws AppError `not-found` */
export function ingredientRow(db: Db | Tx, ingredientId: string): IngredientRow {
  const row = db.select().from(ingredients).where(eq(ingredients.id, ingredientId)).get()
  if (!row) throw notFound('That ingredient')
  return row
}

/** The catalogue by name, with its stock. It is read whole, since most questions are about the stock: three statements. */
export function listIngredients(deps: Deps, query: ListQuery): Page<Ingredient> {
  const today = deps.clock.today()
  const holdings = readHoldings(deps.db, today)
  const after = query.cursor ? decodeCursor(query.cursor, 2) : undefined
  const rows = deps.db
    .select()
    .from(ingredients)
    .where(
      and(
        eq(ingredients.archived, query.archived),
        query.kind && eq(ingredients.kind, query.kind),
        after && sql`(${ingredients.name}, ${ingredients.id}) > (${after[0]} COLLATE NOCASE, ${after[1]})`,
      ),
    )
    .orderBy(asc(ingredients.name), asc(ingredients.id))
    .all()
  const found = rows
    .filter((row) => !query.group || SHELF_OF_KIND[row.kind] === query.group)
    .filter((row) => !query.q || matches(row, query.q))
    .map((row) => reply(row, holdings.of(row.id), today))
    .filter((ingredient) => !query.state || isIn(ingredient, query.state))
  return pageFrom(found, query.limit, (ingredient) => [ingredient.name, ingredient.id])
}

const matches = (row: IngredientRow, q: string) =>
  `${row.name} ${KIND_WORDS[row.kind]}`.toLowerCase().includes(q.toLowerCase())

function isIn({ stock }: Ingredient, state: 'low' | 'soon' | 'past') {
  switch (state) {
    case 'low':
      return stock.state !== 'enough'
    case 'soon':
      return stock.dateState === 'soon'
    case 'past':
      return stock.pastLots > 0
  }
}

export function readIngredient(deps: Deps, ingredientId: string, db: Db | Tx = deps.db): Ingredient {
  const today = deps.clock.today()
  const row = ingredientRow(db, ingredientId)
  return reply(row, readHoldings(db, today, ingredientId).of(ingredientId), today)
}

export function addIngredient(deps: Deps, request: IngredientRequest): Ingredient {
  const { parLevel = null, ...facts } = request
  const id = newId()
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    refuseSameName(tx, facts.name)
    tx.insert(ingredients)
      .values({
        kind: 'other',
        ...facts,
        id,
        parMilli: parLevel === null ? null : toMilli(parLevel),
        createdAt: now,
        updatedAt: now,
      })
      .run()
    return readIngredient(deps, id, tx)
  })
}

/** @throws AppError `stale` when someone changed it first, `wrong-state` when it is put away with stock on the shelf */
export function changeIngredient(
  deps: Deps,
  ingredientId: string,
  version: number,
  patch: IngredientPatch,
): Ingredient {
  const { parLevel, ...facts } = patch
  return write(deps.db, (tx) => {
    const row = ingredientRow(tx, ingredientId)
    if (facts.name !== undefined && facts.name.toLowerCase() !== row.name.toLowerCase())
      refuseSameName(tx, facts.name)
    if (facts.archived && readHoldings(tx, deps.clock.today(), ingredientId).of(ingredientId).lots > 0)
      throw new AppError('wrong-state', `There is ${row.name} on the shelf. Use it up or write it off first.`)
    const changed = tx
      .update(ingredients)
      .set({
        ...facts,
        ...(parLevel !== undefined && { parMilli: parLevel === null ? null : toMilli(parLevel) }),
        updatedAt: deps.clock.now(),
        version: version + 1,
      })
      .where(and(eq(ingredients.id, ingredientId), eq(ingredients.version, version)))
      .run()
    if (changed.changes === 0)
      throw new AppError('stale', `${row.name} was changed elsewhere. Load it again, then make your change.`)
    if (facts.keepsOpenedDays !== undefined) redate(tx, ingredientId, facts.keepsOpenedDays)
    return readIngredient(deps, ingredientId, tx)
  })
}

/** Opened lots have another last day when it keeps for another time. */
function redate(tx: Tx, ingredientId: string, keepsOpenedDays: number | null) {
  const opened = tx
    .select()
    .from(lots)
    .where(and(eq(lots.ingredientId, ingredientId), isNotNull(lots.openedOn)))
    .all()
  for (const lot of opened)
    tx.update(lots)
      .set({ useBy: useByDay({ ...lot, keepsOpenedDays }) })
      .where(eq(lots.id, lot.id))
      .run()
}

function refuseSameName(tx: Tx, name: string) {
  const same = tx.select({ name: ingredients.name }).from(ingredients).where(eq(ingredients.name, name)).get()
  if (same)
    throw invalidField('name', `There is ${same.name} already. Give this one a name that tells them apart.`)
}
