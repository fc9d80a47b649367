import { ETHANOL_AT_20, densityOfSpirit } from './ethanol-density.ts'
import { brixFromGravity, densityOfSolution } from './sucrose-density.ts'
import { WATER_AT_20 } from './water-density.ts'

/** Balling: grams of extract that leave one gram of ethanol. Source: Nielsen et al., quoting Balling. */
export const EXTRACT_PER_ETHANOL = 2.0665
/**
 * Grams of CO2 beside each gram of ethanol. Only this figure closes with 0.11 g of yeast (1 + 0.9565 + 0.11 = 2.0665);
 * a misprint of 0.9695 circulates.
 */
export const CO2_PER_ETHANOL = 0.9565

/** What a litre of must is made of, and what is left of its sugar. Grams. */
export interface Must {
  waterGrams: number
  extractGrams: number
}

/** The must of a specific gravity, one litre at 20 °C, with its solids taken as sucrose. */
export function mustOfGravity(og: number): Must {
  const brix = brixFromGravity(og)
  const grams = og * WATER_AT_20
  return { waterGrams: grams * (1 - brix / 100), extractGrams: (grams * brix) / 100 }
}

/**
 * The drink after `fermentedGrams` of a must's extract are gone: its volume is that of the ethanol and water (OIML R 22)
 * and of the sugar left in that water (ICUMSA).
 */
export function drinkAfter(must: Must, fermentedGrams: number) {
  const ethanolGrams = fermentedGrams / EXTRACT_PER_ETHANOL
  const spiritGrams = must.waterGrams + ethanolGrams
  const leftGrams = must.extractGrams - fermentedGrams
  const syrupGrams = must.waterGrams + leftGrams
  const syrupBrix = (100 * leftGrams) / syrupGrams
  const sugarLitres = syrupGrams / densityOfSolution(syrupBrix, 20) - must.waterGrams / WATER_AT_20
  const litres = spiritGrams / densityOfSpirit(ethanolGrams / spiritGrams, 20) + sugarLitres
  return {
    litres,
    sg: (spiritGrams + leftGrams) / litres / WATER_AT_20,
    abvPercent: (100 * ethanolGrams) / ETHANOL_AT_20 / litres,
    co2Grams: CO2_PER_ETHANOL * ethanolGrams,
  }
}
