import { wholeWithin, within } from './range.ts'

/**
 * Whole bottles from a batch after racking, and what is over.
 *
 * @param volumeLitres before the first racking, 0 to 10,000
 * @param rackings how many, 0 to 10
 * @param lossFraction left behind at each, 0 to 0.9: 0.02–0.05 off firm lees, 0.05–0.10 off fruit
 * @param bottleMl of one bottle, 50 to 30,000
 * @returns `bottles`, `leftLitres` over, and `litres` there is to bottle
 * @throws RangeError outside those ranges
 * Source: arithmetic; losses by common practice. 4.5 L racked twice off fruit (7 % each) fills five 750 mL bottles.
 */
export function bottleCount({
  volumeLitres,
  rackings,
  lossFraction,
  bottleMl,
}: {
  volumeLitres: number
  rackings: number
  lossFraction: number
  bottleMl: number
}): { bottles: number; leftLitres: number; litres: number } {
  within('volumeLitres', volumeLitres, 0, 10_000)
  wholeWithin('rackings', rackings, 0, 10)
  within('lossFraction', lossFraction, 0, 0.9)
  within('bottleMl', bottleMl, 50, 30_000)
  const litres = volumeLitres * (1 - lossFraction) ** rackings
  const each = bottleMl / 1000
  // A hair of rounding must not cost a bottle: 1.5 L is two of 750 mL.
  const bottles = Math.floor(litres / each + 1e-9)
  return { bottles, leftLitres: Math.max(0, litres - bottles * each), litres }
}
