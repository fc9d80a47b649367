import { and, asc, eq, gt, sql, type SQL } from 'drizzle-orm'
import type { Lot, LotPatch, LotRequest } from '#shared/larder/contract'
import { EMPTY_LOT, valueLeftMinor } from '#shared/larder/cost'
import { dateState, SOON_DAYS, useByDay } from '#shared/larder/expiry'
import { fromMilli, isWholeWhereCounted, toMilli } from '#shared/larder/quantity'
import { roleCovers } from '#shared/people/vocabulary'
import type { Page } from '#shared/http/paging'
import { addDays, type CalendarDay } from '#shared/time/day'
import { ingredients, lots } from '../../db/schema/larder.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { spaceBrief } from '../space.ts'
import { ingredientRow, type IngredientRow } from './ingredients.ts'
import { recordMove } from './moves.ts'

export type LotRow = typeof lots.$inferSelect

export interface LotWithIngredient {
  lot: LotRow
  ingredient: IngredientRow
  addedByName: string
}

interface ListQuery {
  ingredientId?: string | undefined
  shelf?: string | undefined
  state?: 'soon' | 'past' | undefined
  empty: boolean
  sort: 'use-by' | 'shelf'
  limit: number
  cursor?: string | undefined
}

const selectLots = (db: Db | Tx) =>
  db
    .select({ lot: lots, ingredient: ingredients, addedByName: members.name })
    .from(lots)
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .innerJoin(members, eq(members.id, lots.addedBy))

/** @throws AppError `not-found` */
export function lotRow(db: Db | Tx, lotId: string): LotWithIngredient {
  const row = selectLots(db).where(eq(lots.id, lotId)).get()
  if (!row) throw notFound('That lot')
  return row
}

export function lotReply({ lot, ingredient, addedByName }: LotWithIngredient, today: CalendarDay): Lot {
  return {
    ...lot,
    ingredientName: ingredient.name,
    kind: ingredient.kind,
    unit: ingredient.unit,
    allergens: ingredient.allergens,
    quantity: fromMilli(lot.quantityMilli),
    remaining: fromMilli(lot.remainingMilli),
    valueMinor: valueLeftMinor(lot),
    dateState: dateState(lot.useBy, today),
    addedBy: { id: lot.addedBy, name: addedByName },
  }
}

/** Keys by which lots are walked; undated ones and those without a shelf come last. */
const SORT_KEY: Record<ListQuery['sort'], SQL<string>> = {
  'use-by': sql<string>`coalesce(${lots.useBy}, '9999-12-31')`,
  shelf: sql<string>`coalesce(${lots.shelf}, '~') || char(9) || ${ingredients.name} || char(9) || coalesce(${lots.useBy}, '9')`,
}

export function listLots(deps: Deps, query: ListQuery): Page<Lot> {
  const today = deps.clock.today()
  const key = SORT_KEY[query.sort]
  const after = query.cursor ? decodeCursor(query.cursor, 2) : undefined
  const rows = deps.db
    .select({ lot: lots, ingredient: ingredients, addedByName: members.name, key })
    .from(lots)
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .innerJoin(members, eq(members.id, lots.addedBy))
    .where(
      and(
        query.empty ? undefined : gt(lots.remainingMilli, 0),
        query.ingredientId ? eq(lots.ingredientId, query.ingredientId) : undefined,
        query.shelf ? eq(lots.shelf, query.shelf) : undefined,
        query.state && within(query.state, today),
        after && sql`(${key}, ${lots.id}) > (${after[0]}, ${after[1]})`,
      ),
    )
    .orderBy(asc(key), asc(lots.id))
    .limit(query.limit + 1)
    .all()
  const page = pageFrom(rows, query.limit, (row) => [row.key, row.lot.id])
  return { ...page, items: page.items.map((row) => lotReply(row, today)) }
}

const within = (state: 'soon' | 'past', today: CalendarDay) =>
  state === 'past'
    ? sql`${lots.useBy} < ${today}`
    : sql`${lots.useBy} BETWEEN ${today} AND ${addDays(today, SOON_DAYS)}`

export const readLot = (deps: Deps, lotId: string, db: Db | Tx = deps.db): Lot =>
  lotReply(lotRow(db, lotId), deps.clock.today())

/** Puts a lot on the shelf: the lot, and the move that fills it. */
export function addLot(deps: Deps, memberId: string, request: LotRequest, within?: Tx): Lot {
  const { quantity, currency = spaceBrief(deps).currency, ...facts } = request
  const today = deps.clock.today()
  const now = deps.clock.now()
  const add = (tx: Tx) => {
    const ingredient = existingIngredient(tx, request.ingredientId)
    if (!isWholeWhereCounted(quantity, ingredient.unit))
      throw invalidField('quantity', `${ingredient.name} is counted in whole pieces.`)
    if (currency !== spaceBrief(deps).currency)
      throw invalidField('currency', `This space counts in ${spaceBrief(deps).currency}.`)
    refuseOpenedLater(facts.openedOn ?? null, today)
    const id = newId()
    const dates = { bestBefore: facts.bestBefore ?? null, openedOn: facts.openedOn ?? null }
    const quantityMilli = toMilli(quantity)
    tx.insert(lots)
      .values({
        ...facts,
        id,
        quantityMilli,
        currency,
        useBy: useByDay({ ...dates, keepsOpenedDays: ingredient.keepsOpenedDays }),
        addedBy: memberId,
        createdAt: now,
        updatedAt: now,
      })
      .run()
    recordMove(tx, {
      lotId: id,
      lot: EMPTY_LOT,
      reason: 'opening',
      effect: {
        deltaMilli: quantityMilli,
        valueMinor: facts.costMinor,
        chargeMinor: 0,
        after: { basisMilli: quantityMilli, basisMinor: facts.costMinor, remainingMilli: quantityMilli },
      },
      memberId,
      at: now,
    })
    return readLot(deps, id, tx)
  }
  return within ? add(within) : write(deps.db, add)
}

function existingIngredient(tx: Tx, ingredientId: string): IngredientRow {
  try {
    return ingredientRow(tx, ingredientId)
  } catch (error) {
    if (error instanceof AppError)
      throw invalidField('ingredientId', 'There is no such ingredient. Add it first.')
    throw error
  }
}

function refuseOpenedLater(openedOn: CalendarDay | null, today: CalendarDay) {
  if (openedOn && openedOn > today) throw invalidField('openedOn', 'It cannot have been opened after today.')
}

/**
 * Corrects what is written on a lot.
 * @throws AppError `forbidden` for a lot someone else added, `wrong-state` for a cost that was already charged, `stale`
 */
export function changeLot(deps: Deps, user: SignedIn, lotId: string, version: number, patch: LotPatch): Lot {
  return write(deps.db, (tx) => {
    const { lot, ingredient, addedByName } = lotRow(tx, lotId)
    if (lot.addedBy !== user.id && !roleCovers(user.role, 'steward'))
      throw new AppError(
        'forbidden',
        `${addedByName} put this on the shelf. Ask them or a steward to change it.`,
      )
    refuseOpenedLater(patch.openedOn ?? null, deps.clock.today())
    if (patch.costMinor !== undefined && patch.costMinor !== lot.costMinor)
      correctCost(deps, tx, user.id, lot, patch.costMinor)
    const dates = { ...lot, ...patch, keepsOpenedDays: ingredient.keepsOpenedDays }
    const changed = tx
      .update(lots)
      .set({ ...patch, useBy: useByDay(dates), updatedAt: deps.clock.now(), version: version + 1 })
      .where(and(eq(lots.id, lotId), eq(lots.version, version)))
      .run()
    if (changed.changes === 0)
      throw new AppError('stale', 'This lot was changed elsewhere. Load it again, then make your change.')
    return readLot(deps, lotId, tx)
  })
}

/** A wrong price is put right in the ledger too, and only while nobody has paid it. */
function correctCost(deps: Deps, tx: Tx, memberId: string, lot: LotRow, costMinor: number) {
  if (lot.basisMilli !== lot.quantityMilli || lot.remainingMilli !== lot.quantityMilli)
    throw new AppError('wrong-state', 'Some of it has gone already, at the cost it had. That stays.')
  recordMove(tx, {
    lotId: lot.id,
    lot,
    reason: 'recount',
    effect: {
      deltaMilli: 0,
      valueMinor: costMinor - valueLeftMinor(lot),
      chargeMinor: 0,
      after: { basisMilli: lot.basisMilli, basisMinor: costMinor, remainingMilli: lot.remainingMilli },
    },
    memberId,
    note: 'Cost corrected',
    at: deps.clock.now(),
  })
}
