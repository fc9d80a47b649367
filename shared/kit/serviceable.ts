import type { ItemStatus } from './vocabulary.ts'

/** What decides whether an item can be lent at all. Clean or dirty does not: that is settled at check-out. */
export interface ItemFitness {
  status: ItemStatus
  /** How many faults are open that take it out of service. */
  openBlockingFaults: number
}

/**
 * Whether an item counts towards what its kind can lend: in service, and no open fault that blocks. An item in service
 * with one minor open fault is serviceable; the same item with one blocking fault is not. The view `serviceable_items`
 * says the same in SQL.
 */
export function isServiceable(item: ItemFitness): boolean {
  return item.status === 'in-service' && item.openBlockingFaults === 0
}

/**
 * Whether an item is in the pool a kind is booked from: wild items are kept apart, so a kind for wild cultures lends only
 * wild items and every other kind only clean-culture ones.
 */
export function inPool(item: ItemFitness & { wild: boolean }, kind: { wildOnly: boolean }): boolean {
  return isServiceable(item) && item.wild === kind.wildOnly
}
