import { within } from './range.ts'

/**
 * What topping up with water, must or another drink makes of a batch.
 *
 * @param volumeLitres what is there, over 0 to 10,000
 * @param sg of it, 0.960 to 1.200
 * @param abvPercent of it, 0 to 25
 * @param addLitres what goes in, 0 to 10,000
 * @param addSg of that, 0.960 to 1.200; 1 (water) unless said
 * @param addAbvPercent of that, 0 to 60; 0 unless said
 * @returns volume, SG and %vol of the whole; volumes are added as they are (real ones shrink by under 0.3 %)
 * @throws RangeError outside those ranges
 * Source: balance of mass and of alcohol. 4.3 L at 9.0 % made 4.546 L with water: 8.51 %.
 */
export function dilute({
  volumeLitres,
  sg,
  abvPercent,
  addLitres,
  addSg = 1,
  addAbvPercent = 0,
}: {
  volumeLitres: number
  sg: number
  abvPercent: number
  addLitres: number
  addSg?: number
  addAbvPercent?: number
}): { volumeLitres: number; sg: number; abvPercent: number } {
  within('volumeLitres', volumeLitres, 0.001, 10_000)
  within('sg', sg, 0.96, 1.2)
  within('abvPercent', abvPercent, 0, 25)
  within('addLitres', addLitres, 0, 10_000)
  within('addSg', addSg, 0.96, 1.2)
  within('addAbvPercent', addAbvPercent, 0, 60)
  const total = volumeLitres + addLitres
  return {
    volumeLitres: total,
    sg: (volumeLitres * sg + addLitres * addSg) / total,
    abvPercent: (volumeLitres * abvPercent + addLitres * addAbvPercent) / total,
  }
}
