import type { ItemStatus } from './vocabulary.ts'

const MOVES: Record<ItemStatus, readonly ItemStatus[]> = {
  'in-service': ['repair', 'retired', 'lost'],
  repair: ['in-service', 'retired', 'lost'],
  // What was given up may turn up or be mended after all.
  retired: ['in-service', 'repair'],
  lost: ['in-service', 'repair', 'retired'],
}

/** Where an item may go from where it is. A retired one is not lost: nobody looks for it. */
export const nextItemStatuses = (from: ItemStatus): readonly ItemStatus[] => MOVES[from]

export function mayBecome(from: ItemStatus, to: ItemStatus): boolean {
  return from === to || MOVES[from].includes(to)
}

/** Still ours to keep: in service or in repair. Retired and lost ones stay in the history only. */
export function isKept(status: ItemStatus): boolean {
  return status === 'in-service' || status === 'repair'
}
