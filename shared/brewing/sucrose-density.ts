import { within } from './range.ts'
import { solve } from './root.ts'
import { WATER_AT_20, waterDensity } from './water-density.ts'

// ICUMSA SPS-4 form: excess over water as powers of the mass fraction, then of (t − 20)/100.
const B = [385.1761, 135.3705, 40.9299, -3.9643, 13.4853, -17.289]
const C1 = [-46.272, -7.172, 1.1597, 5.1126, 17.5254]
const C2 = [59.7712, 7.2491, 12.363, -35.4791]
const C3 = [-47.2207, -21.6977, 27.6301]
const C4 = [18.3184, 12.3081]

/** c₁w + c₂w² + … */
function powers(coefficients: readonly number[], w: number): number {
  let sum = 0
  for (let i = coefficients.length - 1; i >= 0; i--) sum = (sum + (coefficients[i] ?? 0)) * w
  return sum
}

/** The density polynomial without its guard; also below 0 °Bx, where it stands for "lighter than water". */
export function densityOfSolution(brix: number, temperatureC: number): number {
  const w = brix / 100
  const tau = (temperatureC - 20) / 100
  const shift =
    tau === 0
      ? 0
      : tau * (powers(C1, w) + tau * (powers(C2, w) + tau * (powers(C3, w) + tau * powers(C4, w))))
  return waterDensity(temperatureC) + powers(B, w) + shift
}

/**
 * Density of a sucrose solution.
 *
 * @param brix 0 to 70 % sucrose by mass
 * @param temperatureC 0 to 40 °C
 * @returns kg/m³
 * @throws RangeError outside those ranges
 * Source: ICUMSA SPS-4 polynomial over Tanaka's water. `sucroseDensity({ brix: 10, temperatureC: 20 })` is 1038.12.
 */
export function sucroseDensity({ brix, temperatureC }: { brix: number; temperatureC: number }): number {
  return densityOfSolution(within('brix', brix, 0, 70), within('temperatureC', temperatureC, 0, 40))
}

/** Composition (°Bx, may be negative) of the solution of a given density. kg/m³, °C. */
export function brixOfDensity(density: number, temperatureC: number): number {
  const brix = solve((b) => densityOfSolution(b, temperatureC), density, -15, 75)
  // Water is 0, not the last digit of a search.
  return Math.abs(brix) < 1e-10 ? 0 : brix
}

const SG_LOW = 0.97
const SG_HIGH = 1.3

/**
 * °Brix (= °Plato here) of a specific gravity 20/20 °C. Below 1.000 the answer is negative: "apparent extract".
 *
 * @param sg 0.970 to 1.300
 * @throws RangeError outside that range
 * Source: ICUMSA SPS-4, inverted to better than 1e-9. `brixFromGravity(1.08)` is 19.342.
 */
export function brixFromGravity(sg: number): number {
  return brixOfDensity(within('sg', sg, SG_LOW, SG_HIGH) * WATER_AT_20, 20)
}

/**
 * Specific gravity 20/20 °C of a °Brix; the inverse of `brixFromGravity`.
 *
 * @param brix -8 to 62
 * @throws RangeError outside that range
 * Source: ICUMSA SPS-4. `gravityFromBrix(10)` is 1.03998.
 */
export function gravityFromBrix(brix: number): number {
  return densityOfSolution(within('brix', brix, -8, 62), 20) / WATER_AT_20
}

/**
 * Sugar, as sucrose, in a litre of solution at 20 °C. Negative below 1.000 (apparent extract).
 *
 * @param sg 0.970 to 1.300
 * @returns g/L
 * @throws RangeError outside that range
 * Source: ICUMSA SPS-4. Juice solids are not all sugar: see `fermentableFraction` of a must.
 * `sugarGramsPerLitre(1.08292)` is 216.2.
 */
export function sugarGramsPerLitre(sg: number): number {
  return (brixFromGravity(sg) / 100) * sg * WATER_AT_20
}

/**
 * Gravity of a solution holding so many grams of sugar, as sucrose, per litre; the inverse of `sugarGramsPerLitre`.
 *
 * @param gramsPerLitre 0 to 800
 * @throws RangeError outside that range
 */
export function gravityFromSugar(gramsPerLitre: number): number {
  within('gramsPerLitre', gramsPerLitre, 0, 800)
  const brix = solve((b) => (b / 100) * densityOfSolution(b, 20), gramsPerLitre, 0, 75)
  return densityOfSolution(brix, 20) / WATER_AT_20
}
