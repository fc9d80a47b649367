import { eq } from 'drizzle-orm'
import type { Lot } from '#shared/yeast/contract'
import { lotStateAfter } from '#shared/yeast/lot-evidence'
import { yeastLots } from '../../db/schema/yeast.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, notFound } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { lotHistories, lotReply, type LotRow } from './fridge.ts'

function lotOf(tx: Tx, lotId: string): LotRow {
  const lot = tx.select().from(yeastLots).where(eq(yeastLots.id, lotId)).get()
  if (!lot) throw notFound('That lot')
  return lot
}

/** Brings a lot's state in line with what was reported; true when that flagged it. */
export function settleLot(deps: Deps, tx: Tx, lotId: string): boolean {
  const lot = lotOf(tx, lotId)
  const history = lotHistories(tx, [lot], deps.clock.timeZone).get(lotId)
  const state = lotStateAfter(lot.state, history?.reports ?? [])
  if (state === lot.state) return false
  const now = deps.clock.now()
  tx.update(yeastLots)
    .set({ state, stateSince: now, updatedAt: now, version: lot.version + 1 })
    .where(eq(yeastLots.id, lotId))
    .run()
  return state === 'flagged'
}

/** A steward takes a lot out of use; nothing of it can be pitched. */
export function withdrawLot(deps: Deps, user: SignedIn, lotId: string, note: string): Lot {
  return decide(deps, user, lotId, (lot) => {
    if (lot.state === 'withdrawn') throw new AppError('wrong-state', 'This lot is withdrawn already.')
    return { state: 'withdrawn', decisionNote: note }
  })
}

/** A steward puts a lot back in use: failures reported so far are put down to another cause. */
export function clearLot(deps: Deps, user: SignedIn, lotId: string, note: string): Lot {
  return decide(deps, user, lotId, (lot) => {
    if (lot.state === 'sound') throw new AppError('wrong-state', 'Nothing stands against this lot.')
    return { state: 'sound', decisionNote: note, clearedAt: deps.clock.now() }
  })
}

type Decision = Partial<Pick<LotRow, 'state' | 'decisionNote' | 'clearedAt'>>

function decide(deps: Deps, user: SignedIn, lotId: string, rule: (lot: LotRow) => Decision): Lot {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const lot = lotOf(tx, lotId)
    tx.update(yeastLots)
      .set({
        ...rule(lot),
        stateSince: now,
        decidedBy: user.id,
        updatedAt: now,
        version: lot.version + 1,
      })
      .where(eq(yeastLots.id, lotId))
      .run()
    return lotReply(lotOf(tx, lotId))
  })
}
