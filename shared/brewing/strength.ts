import { drinkAfter, mustOfGravity, type Must } from './balance.ts'
import { ETHANOL_AT_20 } from './ethanol-density.ts'
import { ABV_STRUCTURE_PERCENT, BELOW_FLOOR_SG, READING_ERROR_SG, Z80 } from './judgement.ts'
import { OutOfRange, oneOf, within } from './range.ts'
import { solve } from './root.ts'
import { brixFromGravity } from './sucrose-density.ts'
import { WATER_AT_20 } from './water-density.ts'

export const ABV_METHODS = ['linear', 'duty-table', 'balling', 'mixture'] as const
export type AbvMethod = (typeof ABV_METHODS)[number]

export interface Strength {
  percent: number
  low: number
  high: number
  method: AbvMethod
  /** Set where the method is used past the end of its table. */
  extrapolated: boolean
}

const OG = [1, 1.2] as const
const FG = [0.96, 1.2] as const

/**
 * The lowest final gravity that can be believed: every gram of extract fermented.
 *
 * @param og 1.000 to 1.200
 * @throws RangeError outside that range
 * Source: OIML R 22 and Balling's yields. `fermentableFloor(1.1)` is 0.979; real dry drinks stop at 0.990–1.002.
 */
export function fermentableFloor(og: number): number {
  const must = mustOfGravity(within('og', og, ...OG))
  return drinkAfter(must, must.extractGrams).sg
}

/** Checks a pair of gravities and gives them back. Throws `RangeError` when they cannot belong together. */
function checked(og: number, fg: number): void {
  within('og', og, ...OG)
  within('fg', fg, ...FG)
  const floor = fermentableFloor(og) - BELOW_FLOOR_SG
  if (fg > og) throw new OutOfRange('fg', fg, undefined, og, `allowed up to the original gravity, ${og}`)
  if (fg < floor) {
    const lowest = floor.toFixed(3)
    throw new OutOfRange('fg', fg, floor, og, `allowed ${lowest} to ${og}; no drink of this og can read less`)
  }
}

/** Grams of extract gone from a litre of must when it reads `fg`. */
function fermentedGrams(must: Must, fg: number): number {
  return solve(
    (grams) => drinkAfter(must, grams).sg,
    fg,
    -0.2 * must.extractGrams - 1,
    1.2 * must.extractGrams + 25,
  )
}

// Upper edge of each band of the drop in points, and %vol per point. HMRC Notice 226 para 30.3 (withdrawn 2025).
const DUTY_BANDS = [
  [6.9, 0.125],
  [10.4, 0.126],
  [17.2, 0.127],
  [26.1, 0.128],
  [36, 0.129],
  [46.5, 0.13],
  [57.1, 0.131],
  [67.9, 0.132],
  [78.8, 0.133],
  [89.7, 0.134],
  [100.7, 0.135],
] as const
const DUTY_TOP = 100.7
/** Past its end the table is carried on in its own steps: 0.001 for each 10.9 points. */
const DUTY_STEP = 10.9

/**
 * Factor of the excise table for a drop in gravity.
 *
 * @param dropPoints OG − FG in points of 0.001, 0 to 200; rounded to 0.1 point first, or a drop of exactly 68.0 could
 * fall into either band
 * @returns %vol per point, and whether it lies past the table's end (100.7)
 * @throws RangeError outside that range
 * Source: HMRC Excise Notice 226 paragraph 30.3, as quoted by third parties. The table was made for beer.
 */
export function dutyFactor(dropPoints: number): { factor: number; points: number; extrapolated: boolean } {
  const points = Math.round(within('dropPoints', dropPoints, 0, 200) * 10) / 10
  const band = DUTY_BANDS.find(([top]) => points <= top)
  if (band) return { factor: band[1], points, extrapolated: false }
  return { factor: 0.135 + 0.001 * Math.ceil((points - DUTY_TOP) / DUTY_STEP), points, extrapolated: true }
}

/**
 * A strength as it is declared for duty: cut, not rounded, to one decimal.
 *
 * @param percent 0 to 100 %vol
 * @throws RangeError outside that range
 * Source: gov.uk Alcoholic Products Technical Guide section 11: 7.59 becomes 7.5.
 */
export function declaredStrength(percent: number): number {
  return Math.floor(within('percent', percent, 0, 100) * 10 + 1e-9) / 10
}

function balling(og: number, fg: number): number {
  const original = brixFromGravity(og)
  const real = 0.1808 * original + 0.8192 * brixFromGravity(fg)
  const byMass = (original - real) / (2.0665 - 0.010665 * original)
  return (byMass * fg * WATER_AT_20) / ETHANOL_AT_20
}

/**
 * Alcohol by volume from two gravities.
 *
 * @param og 1.000 to 1.200, at 20 °C, corrected
 * @param fg from the floor of that og (less 5 points for error of reading) up to og
 * @param method `linear` (131.25 a unit, common practice), `duty-table` (HMRC Notice 226), `balling`, or `mixture`
 * (ethanol, water and sugar by density); `mixture` unless said
 * @returns %vol with a band of about 80 %: ±0.2 for what no method knows (glycerol, acids, yield) together with two
 * readings each off by 0.001
 * @throws RangeError outside those ranges
 * Source: Nielsen et al. (Balling), OIML R 22, ICUMSA. 1.080 to 1.000 is 10.64 by `mixture`, 10.50 by `linear`.
 * Holds only over a stretch with nothing added: after topping up, go by `dilute`.
 */
export function abv({
  og,
  fg,
  method = 'mixture',
}: {
  og: number
  fg: number
  method?: AbvMethod
}): Strength {
  checked(og, fg)
  const chosen = oneOf('method', method, ABV_METHODS)
  let percent: number
  let extrapolated = false
  switch (chosen) {
    case 'linear':
      percent = 131.25 * (og - fg)
      break
    case 'duty-table': {
      const duty = dutyFactor((og - fg) * 1000)
      percent = duty.factor * duty.points
      extrapolated = duty.extrapolated
      break
    }
    case 'balling':
      percent = balling(og, fg)
      break
    case 'mixture': {
      const must = mustOfGravity(og)
      percent = drinkAfter(must, fermentedGrams(must, fg)).abvPercent
      break
    }
  }
  percent = Math.max(0, percent)
  // Two readings of the same error: about 131 %vol a unit of gravity, each.
  const reading = Z80 * 131.25 * Math.SQRT2 * READING_ERROR_SG
  const spread = Math.hypot(ABV_STRUCTURE_PERCENT, reading)
  return { percent, low: Math.max(0, percent - spread), high: percent + spread, method: chosen, extrapolated }
}

/**
 * How far the sugar is gone, as fractions of what was there.
 *
 * @param og over 1.000 to 1.200
 * @param fg as for `abv`
 * @returns `apparent`, by the hydrometer, which alcohol flatters (it can pass 1), and `real`, by the mass of extract
 * @throws RangeError outside those ranges
 * Source: density balance as in `abv`. 1.050 to 1.010: apparent 0.79, real 0.65.
 */
export function attenuation({ og, fg }: { og: number; fg: number }): { apparent: number; real: number } {
  within('og', og, 1.001, OG[1])
  checked(og, fg)
  const original = brixFromGravity(og)
  const must = mustOfGravity(og)
  return {
    apparent: (original - brixFromGravity(fg)) / original,
    real: Math.min(1, Math.max(0, fermentedGrams(must, fg) / must.extractGrams)),
  }
}

/**
 * CO2 still to come from a must or young drink if it falls from one gravity to another.
 *
 * @param og 1.000 to 1.200, where it began
 * @param from where it stands
 * @param to where it may end
 * @returns grams per litre: about 0.985 a point
 * @throws RangeError outside the ranges of `abv`, or where `to` is above `from`
 * Source: Balling's yield over the density balance.
 */
export function co2BetweenGravities({ og, from, to }: { og: number; from: number; to: number }): number {
  checked(og, from)
  checked(og, to)
  if (to > from) throw new OutOfRange('to', to, undefined, from)
  const must = mustOfGravity(og)
  return (
    drinkAfter(must, fermentedGrams(must, to)).co2Grams -
    drinkAfter(must, fermentedGrams(must, from)).co2Grams
  )
}

/**
 * Alcohol from so much fermentable sugar in a litre of must, if it all ferments.
 *
 * @param og of the must, 1.000 to 1.200
 * @param fermentableFraction of its dissolved solids, 0 to 1
 * @returns %vol and the gravity it would end at
 * @throws RangeError outside those ranges
 * Source: density balance as in `abv`. Juice solids are not all sugar: OIV's grape-must table gives 0.82 at 12 %.
 */
export function potentialStrength({ og, fermentableFraction }: { og: number; fermentableFraction: number }): {
  percent: number
  fg: number
} {
  const must = mustOfGravity(within('og', og, ...OG))
  const drink = drinkAfter(must, must.extractGrams * within('fermentableFraction', fermentableFraction, 0, 1))
  return { percent: Math.max(0, drink.abvPercent), fg: drink.sg }
}
