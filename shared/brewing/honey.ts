import { within } from './range.ts'

/**
 * Water in honey from its refractive index at 20 °C.
 *
 * @param refractiveIndex 1.470 to 1.506
 * @returns % water by mass
 * @throws RangeError outside that range
 * Source: Wedmore's formula. Its constant is often printed 1.73190, which is bar notation (−1 + 0.73190) and must be
 * entered as −0.26810. 1.4915 gives 18.0 (Chataway's table, reprinted by Bogdanov).
 */
export function honeyWaterPercent(refractiveIndex: number): number {
  within('refractiveIndex', refractiveIndex, 1.47, 1.506)
  return (-0.2681 - Math.log10(refractiveIndex - 1)) / 0.002243
}

/**
 * Specific gravity of honey at 20 °C.
 *
 * @param waterPercent 13 to 25
 * @throws RangeError outside that range
 * Source: 1.423 at 17 % and 1.417 at 18 % (trade and association notes, weak), a straight line between and beyond.
 */
export function honeyGravity(waterPercent: number): number {
  return 1.417 - 0.0063 * (within('waterPercent', waterPercent, 13, 25) - 18)
}
