import { ACTIVE_CELLS_PER_ML, GROWTH_PER_HOUR, LAG_BASE_HOURS, REHYDRATION_YIELD } from './judgement.ts'
import { within } from './range.ts'

/** The lag without guards: hours from pitching until a ferment shows. */
export function lagOf(cellsPerMl: number, viability: number): number {
  const alive = cellsPerMl * viability * REHYDRATION_YIELD
  return LAG_BASE_HOURS + Math.max(0, Math.log(ACTIVE_CELLS_PER_ML / alive)) / GROWTH_PER_HOUR
}

/**
 * Hours from pitching to the first visible sign.
 *
 * @param cellsPerMl pitched, alive and dead, 1 to 1e9
 * @param viability share alive, 1e-6 to 1
 * @returns hours near 20 °C; a tenfold loss of life adds 11.5 h
 * @throws RangeError outside those ranges
 * Source: growth from the living cells to 1e7 per mL; its constants are middles of ranges from memory.
 * 5e6 cells/mL, all alive: 8.6 h.
 */
export function hoursToActivity({
  cellsPerMl,
  viability,
}: {
  cellsPerMl: number
  viability: number
}): number {
  within('cellsPerMl', cellsPerMl, 1, 1e9)
  within('viability', viability, 1e-6, 1)
  return lagOf(cellsPerMl, viability)
}
