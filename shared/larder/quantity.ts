import { z } from 'zod'
import type { Unit } from './vocabulary.ts'

/**
 * Quantities are counted in whole thousandths of their unit (a milligram, a microlitre, a thousandth of a piece), so that
 * sums of many moves are exact. On the wire and on screens they are plain numbers with up to three decimals.
 */
export const QUANTITY_MAX = 10_000_000

/** `toMilli(70.5)` is 70500. */
export function toMilli(quantity: number): number {
  return Math.round(quantity * 1000)
}

/** `fromMilli(70500)` is 70.5. */
export function fromMilli(milli: number): number {
  return milli / 1000
}

const threeDecimals = (quantity: number) => Math.abs(quantity * 1000 - Math.round(quantity * 1000)) < 1e-5

/** Zero or more, in steps of a thousandth. */
export const Quantity = z
  .number()
  .min(0)
  .max(QUANTITY_MAX)
  .refine(threeDecimals, 'Use no more than three decimals.')

/** More than nothing, in steps of a thousandth. */
export const SomeQuantity = Quantity.refine((quantity) => quantity >= 0.001, 'More than 0.')

/** Pieces come whole: half a stopper is not a stopper. */
export function isWholeWhereCounted(quantity: number, unit: Unit): boolean {
  return unit !== 'each' || Number.isInteger(quantity)
}

const figures = (value: number, decimals: number) =>
  new Intl.NumberFormat('en-GB', { maximumFractionDigits: decimals }).format(value)

/**
 * A quantity in the words of a label: `quantityWords(1250, 'g')` is `1.25 kg`, `(40, 'g')` is `40 g`, `(750, 'ml')` is
 * `750 ml`, `(3, 'each')` is `3`. From 1,000 up in kilograms or litres; never rounds away more than a thousandth.
 */
export function quantityWords(quantity: number, unit: Unit): string {
  if (unit === 'each') return figures(quantity, 3)
  if (Math.abs(quantity) < 1000) return `${figures(quantity, 3)} ${unit}`
  return `${figures(quantity / 1000, 6)} ${unit === 'g' ? 'kg' : 'L'}`
}
