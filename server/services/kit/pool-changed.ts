import type { Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { offerNext } from '../loans/offers.ts'
import { refreshRiskOfKind } from '../loans/risk.ts'

/**
 * After an item left or joined what a kind can lend, in the same transaction: marks the bookings that are in danger now,
 * clears those that are safe again, and offers what came free to who waits for it.
 */
export function poolChanged(tx: Tx, deps: Deps, kindId: string) {
  refreshRiskOfKind(tx, deps, kindId)
  for (const wild of [false, true]) offerNext(tx, deps, { kindId, wild })
}
