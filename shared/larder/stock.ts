import type { StockState } from './vocabulary.ts'

export interface Stock {
  /** In lots that are not past their date. */
  usable: number
  /** What planned batches still need. */
  reserved: number
  /** What the space likes to keep; null when it keeps none on purpose. */
  parLevel: number | null
}

/** What nobody has spoken for, never less than nothing. */
export function freeQuantity({ usable, reserved }: Stock): number {
  return Math.max(0, round(usable - reserved))
}

/** `out` when there is nothing to use, `low` when what is free is under the par level or plans need more than there is. */
export function stockState(stock: Stock): StockState {
  if (stock.usable <= 0) return stock.parLevel === null && stock.reserved === 0 ? 'enough' : 'out'
  return quantityToBuy(stock) > 0 ? 'low' : 'enough'
}

/** What brings the shelf back to its par level after every planned batch took its part. 200 kept, 60 there, 20 planned: 160. */
export function quantityToBuy({ usable, reserved, parLevel }: Stock): number {
  return Math.max(0, round((parLevel ?? 0) + reserved - usable))
}

const round = (quantity: number) => Math.round(quantity * 1000) / 1000
