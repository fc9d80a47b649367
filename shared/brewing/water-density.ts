import { within } from './range.ts'

/**
 * Density of pure, air-free water at 1 atm.
 *
 * @param temperatureC 0 to 40 °C
 * @returns kg/m³, good to about 0.001
 * @throws RangeError outside 0–40 °C
 * Source: Tanaka et al. 2001, Metrologia 38:301. `waterDensity(20)` is 998.2067.
 */
export function waterDensity(temperatureC: number): number {
  const t = within('temperatureC', temperatureC, 0, 40)
  return 999.97495 * (1 - ((t - 3.983035) ** 2 * (t + 301.797)) / (522528.9 * (t + 69.34881)))
}

/** Water at 20 °C, kg/m³: the reference of every specific gravity here (20/20 °C). */
export const WATER_AT_20 = waterDensity(20)
