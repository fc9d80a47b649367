import { and, desc, eq, sql } from 'drizzle-orm'
import { statementOf } from '#shared/larder/statement'
import { fromMilli } from '#shared/larder/quantity'
import type { SettlementRequest, Tab, TabBrief, TabItem } from '#shared/larder/tab-contract'
import { roleCovers } from '#shared/people/vocabulary'
import { addDays, type CalendarDay } from '#shared/time/day'
import { instantOn, type Instant } from '#shared/time/instant'
import { batches } from '../../db/schema/batches.ts'
import { ingredients, lots, moves, settlements } from '../../db/schema/larder.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { notFound } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { spaceBrief } from '../space.ts'

interface Period {
  from?: CalendarDay | undefined
  to?: CalendarDay | undefined
}

type Entry = Omit<TabItem, 'balanceMinor'> & { order: number }

/** Settlements sort after the draws of the same moment. */
const AFTER_DRAWS = 1e12

const nothing = {
  ingredientId: null,
  ingredientName: null,
  quantity: null,
  unit: null,
  lotId: null,
  batchId: null,
  batchName: null,
  method: null,
}

/**
 * What a member owes and how it came about. A batch is named to its maker only. Three statements, however long the tab.
 * @throws AppError `not-found` for anyone else's tab, unless a steward asks
 */
export function readTab(deps: Deps, user: SignedIn, memberId: string, period: Period): Tab {
  const mine = memberId === user.id
  if (!mine && !roleCovers(user.role, 'steward')) throw notFound('That tab')
  const member = memberRow(deps.db, memberId)
  const entries = [...drawEntries(deps.db, memberId, mine), ...settlementEntries(deps.db, memberId)]
  const bounds = {
    ...(period.from && { from: dayStart(deps, period.from) }),
    ...(period.to && { to: dayStart(deps, addDays(period.to, 1)) }),
  }
  const { items, ...sums } = statementOf(entries, bounds)
  return {
    memberId,
    memberName: member.name,
    currency: spaceBrief(deps).currency,
    ...sums,
    items: items.reverse(),
  }
}

const dayStart = (deps: Deps, on: CalendarDay) => instantOn(on, 0, 0, deps.clock.timeZone)

/** @throws AppError `not-found` */
function memberRow(db: Db | Tx, memberId: string) {
  const row = db.select({ name: members.name }).from(members).where(eq(members.id, memberId)).get()
  if (!row) throw notFound('That member')
  return row
}

function drawEntries(db: Db | Tx, memberId: string, mine: boolean): Entry[] {
  return db
    .select({ move: moves, ingredient: ingredients, batchName: batches.name })
    .from(moves)
    .innerJoin(lots, eq(lots.id, moves.lotId))
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .leftJoin(batches, eq(batches.id, moves.batchId))
    .where(and(eq(moves.memberId, memberId), eq(moves.reason, 'draw')))
    .all()
    .map(({ move, ingredient, batchName }) => ({
      ...nothing,
      id: move.id,
      kind: move.undoesId === null ? 'draw' : 'undo',
      at: move.at,
      order: move.seq,
      amountMinor: move.chargeMinor,
      ingredientId: ingredient.id,
      ingredientName: ingredient.name,
      quantity: fromMilli(Math.abs(move.deltaMilli)),
      unit: ingredient.unit,
      lotId: move.lotId,
      batchId: mine ? move.batchId : null,
      batchName: mine ? batchName : null,
      note: move.note,
    }))
}

function settlementEntries(db: Db | Tx, memberId: string): Entry[] {
  return db
    .select()
    .from(settlements)
    .where(eq(settlements.memberId, memberId))
    .all()
    .map((row) => ({
      ...nothing,
      id: row.id,
      kind: 'settlement',
      at: row.at,
      order: AFTER_DRAWS + row.seq,
      amountMinor: 0 - row.amountMinor,
      method: row.method,
      note: row.note,
    }))
}

/** What a member owes now, from two sums. */
export function balanceMinor(db: Db | Tx, memberId: string): number {
  const drawn = db
    .select({ sum: sql<number>`coalesce(sum(${moves.chargeMinor}), 0)` })
    .from(moves)
    .where(eq(moves.memberId, memberId))
    .get()
  const settled = db
    .select({ sum: sql<number>`coalesce(sum(${settlements.amountMinor}), 0)` })
    .from(settlements)
    .where(eq(settlements.memberId, memberId))
    .get()
  return (drawn?.sum ?? 0) - (settled?.sum ?? 0)
}

/** Members whose tab is not even, the largest first. */
export function listTabs(deps: Deps): { currency: string; items: TabBrief[]; nextCursor: null } {
  const drawn = deps.db
    .select({
      memberId: moves.memberId,
      sum: sql<number>`sum(${moves.chargeMinor})`.as('drawn_sum'),
      lastAt: sql<Instant>`max(${moves.at})`.as('drawn_last'),
    })
    .from(moves)
    .where(eq(moves.reason, 'draw'))
    .groupBy(moves.memberId)
    .as('drawn')
  const settled = deps.db
    .select({
      memberId: settlements.memberId,
      sum: sql<number>`sum(${settlements.amountMinor})`.as('settled_sum'),
    })
    .from(settlements)
    .groupBy(settlements.memberId)
    .as('settled')
  const balance = sql<number>`coalesce(${drawn.sum}, 0) - coalesce(${settled.sum}, 0)`
  const items = deps.db
    .select({ memberId: members.id, memberName: members.name, balanceMinor: balance, lastAt: drawn.lastAt })
    .from(members)
    .leftJoin(drawn, eq(drawn.memberId, members.id))
    .leftJoin(settled, eq(settled.memberId, members.id))
    .where(sql`${balance} <> 0`)
    .orderBy(desc(balance), members.name)
    .all()
  return { currency: spaceBrief(deps).currency, items, nextCursor: null }
}

/** Records that a member settled outside the app. No money moves here. */
export function settleTab(deps: Deps, stewardId: string, memberId: string, request: SettlementRequest) {
  return write(deps.db, (tx) => {
    memberRow(tx, memberId)
    const row = {
      id: newId(),
      memberId,
      amountMinor: request.amountMinor,
      currency: spaceBrief(deps).currency,
      method: request.method,
      note: request.note || null,
      recordedBy: stewardId,
      at: deps.clock.now(),
    }
    tx.insert(settlements).values(row).run()
    return { ...row, balanceMinor: balanceMinor(tx, memberId) }
  })
}
