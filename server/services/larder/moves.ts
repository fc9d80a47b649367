import { eq } from 'drizzle-orm'
import type { LotValue } from '#shared/larder/cost'
import type { Effect } from '#shared/larder/ledger'
import type { LedgerReason } from '#shared/larder/vocabulary'
import type { Instant } from '#shared/time/instant'
import { lots, moves } from '../../db/schema/larder.ts'
import type { Tx } from '../../db/open.ts'
import { AppError } from '../../errors.ts'
import { newId } from '../../ids.ts'

interface NewMove {
  lotId: string
  /** The lot as it was read in this transaction. */
  lot: LotValue
  effect: Effect
  reason: LedgerReason
  memberId: string
  batchId?: string | null
  stocktakeId?: string
  undoesId?: string
  note?: string | null
  at: Instant
}

/**
 * Writes a move and, where something was added, what the lot is priced from. The only place that writes moves.
 * @throws AppError `not-enough` when the database finds that the lot is short after all
 */
export function recordMove(tx: Tx, { lotId, lot, effect, ...move }: NewMove): string {
  const id = newId()
  try {
    tx.insert(moves)
      .values({
        ...move,
        id,
        lotId,
        deltaMilli: effect.deltaMilli,
        valueMinor: effect.valueMinor,
        chargeMinor: effect.chargeMinor,
        afterMilli: effect.after.remainingMilli,
      })
      .run()
  } catch (error) {
    if (isShort(error)) throw new AppError('not-enough', 'Someone was quicker: there is not that much left.')
    throw error
  }
  const { basisMilli, basisMinor } = effect.after
  if (basisMilli !== lot.basisMilli || basisMinor !== lot.basisMinor)
    tx.update(lots).set({ basisMilli, basisMinor }).where(eq(lots.id, lotId)).run()
  return id
}

function isShort(error: unknown): boolean {
  if (!(error instanceof Error)) return false
  return error.message.includes('LOT_SHORT') || isShort(error.cause)
}
