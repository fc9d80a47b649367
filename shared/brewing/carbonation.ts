import {
  BOTTLE_LIMIT_VOLUMES,
  HEADSPACE_FRACTION,
  PRIMING_SPREAD,
  TABLET_OVERSHOOT_VOLUMES,
} from './judgement.ts'
import { oneOf, within } from './range.ts'
import { PRIMERS, type Primer } from './vocabulary.ts'

export const CO2_GRAMS_PER_MOL = 44.0095
/** Grams of CO2 in a litre that hold "one volume": the gas at 0 °C and 1 atm. */
export const GRAMS_PER_VOLUME = 1.9769
const GAS_LITRE_ATM = 0.0820574
const BAR_PER_ATM = 1.01325

const kelvin = (temperatureC: number): number => temperatureC + 273.15

/** mol/(L atm) in fresh water. Source: Weiss 1974, the litre form. */
function weiss(temperatureC: number): number {
  const t = kelvin(temperatureC) / 100
  return Math.exp(-58.0931 + 90.5069 / t + 22.294 * Math.log(t))
}

/**
 * CO2 that water holds under 1 atm of CO2.
 *
 * @param temperatureC 0 to 40 °C
 * @returns g/L per atm, within 1 %; alcohol and sugar shift it by 5–10 %
 * @throws RangeError outside that range
 * Source: Weiss 1974. `co2SolubilityGramsPerLitre(20)` is 1.721. The usual two-parameter Henry law is 10 % low at 0 °C.
 */
export function co2SolubilityGramsPerLitre(temperatureC: number): number {
  return weiss(within('temperatureC', temperatureC, 0, 40)) * CO2_GRAMS_PER_MOL
}

/** Vapour pressure of water, atm, 0–40 °C. Source: Magnus form with the WMO constants, from memory. */
function vapourAtm(temperatureC: number): number {
  return (6.112 * Math.exp((17.62 * temperatureC) / (243.12 + temperatureC))) / 1013.25
}

/**
 * CO2 left in a drink that fermented under an airlock.
 *
 * @param temperatureC the HIGHEST it has been since it finished, 0 to 40 °C; gas lost when warm does not come back
 * @returns volumes, under 1 atm of moist CO2
 * @throws RangeError outside that range
 * Source: Weiss 1974. `residualCo2Volumes(20)` is 0.85.
 */
export function residualCo2Volumes(temperatureC: number): number {
  return (co2SolubilityGramsPerLitre(temperatureC) * (1 - vapourAtm(temperatureC))) / GRAMS_PER_VOLUME
}

// Stoichiometry: C12H22O11 + H2O -> 4 CO2; C6H12O6 -> 2 CO2.
const SUCROSE_YIELD = (4 * CO2_GRAMS_PER_MOL) / 342.2965
const GLUCOSE_YIELD = (2 * CO2_GRAMS_PER_MOL) / 180.1559
const MONOHYDRATE_YIELD = (2 * CO2_GRAMS_PER_MOL) / 198.1712
// Solids, fermentable share, then the sugar's own yield. Malt: 96 % solids, 75 % fermentable, as maltose. Honey: 76 %
// glucose and fructose with 6 % of the double sugars (Crane's averages). From memory in part.
const MALT_YIELD = 0.96 * 0.75 * SUCROSE_YIELD
const HONEY_YIELD = 0.695 * GLUCOSE_YIELD + 0.086 * SUCROSE_YIELD

/** Grams of CO2 from a gram of each priming sugar if all of it ferments. Source: stoichiometry; malt and honey from memory. */
export const CO2_YIELD: Record<Primer, number> = {
  sucrose: SUCROSE_YIELD,
  glucose: GLUCOSE_YIELD,
  'glucose-monohydrate': MONOHYDRATE_YIELD,
  'dried-malt': MALT_YIELD,
  honey: HONEY_YIELD,
}

export interface PrimingDose {
  grams: number
  low: number
  high: number
  gramsPerLitre: number
  residualVolumes: number
  reasons: string[]
}

/**
 * Sugar to carbonate a finished drink in the bottle.
 *
 * @param volumeLitres over 0 to 10,000
 * @param targetVolumes 0 to 5
 * @param temperatureC the highest since it finished, 0 to 40 °C
 * @param primer which sugar
 * @returns grams for the whole, with a band for what yield and residual gas leave open; 0 where it holds enough already
 * @throws RangeError outside those ranges
 * Source: Weiss 1974 and stoichiometry. 4.5 L at 20 °C to 2.4 volumes: 26.8 g of sucrose.
 */
export function primingGrams({
  volumeLitres,
  targetVolumes,
  temperatureC,
  primer,
}: {
  volumeLitres: number
  targetVolumes: number
  temperatureC: number
  primer: Primer
}): PrimingDose {
  within('volumeLitres', volumeLitres, 0.001, 10_000)
  within('targetVolumes', targetVolumes, 0, 5)
  const sugar = oneOf('primer', primer, PRIMERS)
  const residualVolumes = residualCo2Volumes(temperatureC)
  const missing = Math.max(0, targetVolumes - residualVolumes)
  const gramsPerLitre = (missing * GRAMS_PER_VOLUME) / CO2_YIELD[sugar]
  const grams = gramsPerLitre * volumeLitres
  const reasons = ['Counts the CO2 still in it at the warmest it has been since it finished.']
  if (missing === 0) reasons.push('It already holds as much as you ask for.')
  if (targetVolumes > BOTTLE_LIMIT_VOLUMES.beer) {
    reasons.push('More than ordinary beer bottles should hold: use bottles made for sparkling drink.')
  }
  if (sugar === 'dried-malt' || sugar === 'honey') reasons.push('Its sugar differs from lot to lot.')
  const spread = sugar === 'dried-malt' || sugar === 'honey' ? 2 * PRIMING_SPREAD : PRIMING_SPREAD
  return {
    grams,
    low: grams * (1 - spread),
    high: grams * (1 + spread),
    gramsPerLitre,
    residualVolumes,
    reasons,
  }
}

/**
 * Sugar tablets for one bottle: a whole number, with the CO2 that number really gives.
 *
 * @param bottleMl 100 to 5,000
 * @param tabletGrams of one tablet, from its pack, 0.1 to 20
 * @param targetVolumes 0 to 5
 * @param temperatureC the highest since it finished, 0 to 40 °C
 * @returns nearest count, one fewer where rounding up would pass the target by more than 0.4 volumes
 * @throws RangeError outside those ranges
 * Source: `primingGrams` with sucrose. One 1.4 g tablet for 250 mL makes three in a 750 mL bottle (common practice).
 */
export function tabletsPerBottle({
  bottleMl,
  tabletGrams,
  targetVolumes,
  temperatureC,
}: {
  bottleMl: number
  tabletGrams: number
  targetVolumes: number
  temperatureC: number
}): { count: number; volumes: number; gramsPerBottle: number; reasons: string[] } {
  within('bottleMl', bottleMl, 100, 5000)
  within('tabletGrams', tabletGrams, 0.1, 20)
  const litres = bottleMl / 1000
  const need = primingGrams({ volumeLitres: litres, targetVolumes, temperatureC, primer: 'sucrose' })
  const gives = (count: number): number =>
    need.residualVolumes + (count * tabletGrams * CO2_YIELD.sucrose) / litres / GRAMS_PER_VOLUME
  let count = Math.round(need.grams / tabletGrams)
  if (count > 0 && gives(count) > targetVolumes + TABLET_OVERSHOOT_VOLUMES) count -= 1
  const reasons = ['Tablets differ in weight: go by the pack.']
  if (Math.abs(gives(count) - targetVolumes) > 0.25)
    reasons.push('Whole tablets miss the target by a good way here.')
  return { count, volumes: gives(count), gramsPerBottle: count * tabletGrams, reasons }
}

/**
 * Pressure in a closed bottle at rest, over the air outside.
 *
 * @param co2Volumes in the drink when it was closed, or after it has conditioned, 0 to 50
 * @param temperatureC 0 to 40 °C
 * @param headspaceFraction gas space to drink, 0 to 0.5; 0.04 unless said
 * @returns bar (gauge), never under 0; trapped air can add 0.2
 * @throws RangeError outside those ranges
 * Source: Weiss 1974 with an ideal gas above it. 2.5 volumes at 30 °C give 2.7 bar.
 */
export function bottlePressureBar({
  co2Volumes,
  temperatureC,
  headspaceFraction = HEADSPACE_FRACTION,
}: {
  co2Volumes: number
  temperatureC: number
  headspaceFraction?: number
}): number {
  within('co2Volumes', co2Volumes, 0, 50)
  within('temperatureC', temperatureC, 0, 40)
  within('headspaceFraction', headspaceFraction, 0, 0.5)
  const mol = (co2Volumes * GRAMS_PER_VOLUME) / CO2_GRAMS_PER_MOL
  const atm = mol / (weiss(temperatureC) + headspaceFraction / (GAS_LITRE_ATM * kelvin(temperatureC)))
  return Math.max(0, (atm - 1) * BAR_PER_ATM)
}
