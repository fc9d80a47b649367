import { MUST_NOTES, PLAIN_SUGAR_SPREAD, SOLIDS_AS_SUCROSE_SG, SOLIDS_SPREAD } from './judgement.ts'
import { OutOfRange, wholeWithin, within } from './range.ts'
import { solve } from './root.ts'
import { potentialStrength } from './strength.ts'
import { densityOfSolution, gravityFromSugar, sugarGramsPerLitre } from './sucrose-density.ts'
import { WATER_AT_20, waterDensity } from './water-density.ts'

/** One thing that goes into a must. Fractions of its mass, 0 to 1. What is neither water nor soluble stays as pulp. */
export interface MustLine {
  grams: number
  waterFraction: number
  /** Dissolved solids: sugars, acids and the rest, as a refractometer would count them. */
  solubleFraction: number
  /** Share of the dissolved solids that yeast can eat. */
  fermentableFraction?: number
  /** Nitrogen that yeast can use, mg N per kg of the thing. */
  yanMgPerKg?: number
}

export interface MustTotals {
  og: number
  brix: number
  volumeLitres: number
  potentialAbv: number
  /** What yeast can eat, all told. */
  sugarGrams: number
  /** All that dissolves. */
  solubleGrams: number
  yanMgPerLitre: number
  /** Band of og. */
  low: number
  high: number
  /** Where the gravity would end if all fermentable sugar went. */
  dryFg: number
  /** Water to pour on: given, or what makes up the volume. */
  waterLitres: number
  reasons: string[]
}

interface MustInput {
  lines: readonly MustLine[]
  volumeLitres?: number
  waterLitres?: number
}

function checkLine(line: MustLine, index: number): void {
  const name = `lines[${index}]`
  within(`${name}.grams`, line.grams, 0, 1_000_000)
  within(`${name}.waterFraction`, line.waterFraction, 0, 1)
  within(`${name}.solubleFraction`, line.solubleFraction, 0, 1)
  within(`${name}.fermentableFraction`, line.fermentableFraction ?? 1, 0, 1)
  within(`${name}.yanMgPerKg`, line.yanMgPerKg ?? 0, 0, 250_000)
  if (line.waterFraction + line.solubleFraction > 1 + 1e-6) {
    const most = 1 - line.waterFraction
    throw new OutOfRange(
      `${name}.solubleFraction`,
      line.solubleFraction,
      0,
      most,
      'water and solids pass the whole',
    )
  }
}

/** Sums of mass over the lines. */
function weigh(lines: readonly MustLine[]) {
  const sum = { waterGrams: 0, solubleGrams: 0, sugarGrams: 0, yanMg: 0, spreadGrams: 0 }
  for (const line of lines) {
    const soluble = line.grams * line.solubleFraction
    sum.waterGrams += line.grams * line.waterFraction
    sum.solubleGrams += soluble
    sum.sugarGrams += soluble * (line.fermentableFraction ?? 1)
    sum.yanMg += ((line.yanMgPerKg ?? 0) * line.grams) / 1000
    sum.spreadGrams += soluble * (line.waterFraction < 0.01 ? PLAIN_SUGAR_SPREAD : SOLIDS_SPREAD)
  }
  return sum
}

const litresOf = (waterGrams: number, solubleGrams: number): number => {
  const grams = waterGrams + solubleGrams
  return grams / densityOfSolution((100 * solubleGrams) / grams, 20)
}

/**
 * The must that a list of ingredients makes, by mass: total solids in the total volume, then the density of that
 * solution. Adding up points per litre drifts; this does not.
 *
 * @param lines at least one; grams 0 to 1,000,000, fractions 0 to 1 with water and solids no more than 1 together
 * @param volumeLitres made up with water to this volume of liquid; or
 * @param waterLitres so much water poured on (0 unless said). Give one of the two, not both
 * @returns gravity with a band, and what follows from it; pulp is left out of the volume
 * @throws RangeError where a line is out of range, the volume is under what the ingredients alone fill, or the must
 * would pass 1.200
 * Source: mass balance with ICUMSA SPS-4, solids taken as sucrose (±0.0007).
 * 1.5 kg of honey (82.9 % solids) made up to 5 L gives 1.0953.
 */
export function mustFromIngredients({ lines, volumeLitres, waterLitres }: MustInput): MustTotals {
  if (lines.length === 0)
    throw new OutOfRange('lines', lines, undefined, undefined, 'at least one line is needed')
  lines.forEach(checkLine)
  if (volumeLitres !== undefined && waterLitres !== undefined) {
    throw new OutOfRange(
      'waterLitres',
      waterLitres,
      undefined,
      undefined,
      'give volumeLitres or waterLitres, not both',
    )
  }
  const sum = weigh(lines)
  let litres: number
  let poured: number
  if (volumeLitres !== undefined) {
    litres = within('volumeLitres', volumeLitres, 0.05, 10_000)
    const alone = sum.waterGrams + sum.solubleGrams > 0 ? leastLitres(sum.waterGrams, sum.solubleGrams) : 0
    if (litres < alone * 0.995) {
      const least = Math.ceil(alone * 1000) / 1000
      throw new OutOfRange(
        'volumeLitres',
        volumeLitres,
        least,
        10_000,
        `the ingredients alone fill ${least} L`,
      )
    }
    const grams = gravityFromSugar(sum.solubleGrams / litres) * WATER_AT_20 * litres
    poured = Math.max(0, (grams - sum.waterGrams - sum.solubleGrams) / WATER_AT_20)
  } else {
    poured = within('waterLitres', waterLitres ?? 0, 0, 10_000)
    const water = sum.waterGrams + poured * waterDensity(20)
    if (water + sum.solubleGrams <= 0 || (100 * sum.solubleGrams) / (water + sum.solubleGrams) > 70) {
      throw new OutOfRange('waterLitres', poured, 0, 10_000, 'more water is needed to dissolve the sugar')
    }
    litres = litresOf(water, sum.solubleGrams)
  }
  return totals(sum, litres, poured)
}

/** Volume of the ingredients with no water added; a dry sugar counts as its syrup at 70 °Bx at least. */
function leastLitres(waterGrams: number, solubleGrams: number): number {
  return litresOf(Math.max(waterGrams, solubleGrams * (30 / 70)), solubleGrams)
}

function totals(sum: ReturnType<typeof weigh>, litres: number, waterLitres: number): MustTotals {
  const concentration = sum.solubleGrams / litres
  const og = gravityFromSugar(concentration)
  if (og > 1.2)
    throw new OutOfRange('og', og, 1, 1.2, `the must would read ${og.toFixed(3)}, allowed up to 1.200`)
  const spread = gravityFromSugar((sum.solubleGrams + sum.spreadGrams) / litres) - og
  const band = sum.solubleGrams === 0 ? 0 : Math.hypot(spread, SOLIDS_AS_SUCROSE_SG)
  const fermentableFraction = sum.solubleGrams === 0 ? 1 : Math.min(1, sum.sugarGrams / sum.solubleGrams)
  const potential = potentialStrength({ og, fermentableFraction })
  const reasons: string[] = [MUST_NOTES.balance]
  if (spread > SOLIDS_AS_SUCROSE_SG) reasons.push(MUST_NOTES.varies)
  if (fermentableFraction < 0.95) reasons.push(MUST_NOTES.notAllSugar)
  return {
    og,
    brix: (100 * concentration) / (og * WATER_AT_20),
    volumeLitres: litres,
    potentialAbv: potential.percent,
    sugarGrams: sum.sugarGrams,
    solubleGrams: sum.solubleGrams,
    yanMgPerLitre: sum.yanMg / litres,
    low: Math.max(1, og - band),
    high: og + band,
    dryFg: potential.fg,
    waterLitres,
    reasons,
  }
}

/**
 * How much of one ingredient brings the must to a gravity, the others kept as they are.
 *
 * @param lines as for `mustFromIngredients`
 * @param target original gravity wanted, 1.000 to 1.200
 * @param adjust place in `lines` of the one to change, from 0; its own grams are not looked at
 * @param volumeLitres the must is made up to this; or
 * @param waterLitres so much water is poured on (0 unless said)
 * @returns grams of that line, and the must it makes
 * @throws RangeError when no amount from 0 up can reach the target, naming what can be reached
 * Source: the mass balance of `mustFromIngredients`, solved.
 */
export function ingredientForGravity({
  lines,
  target,
  adjust,
  volumeLitres,
  waterLitres,
}: MustInput & { target: number; adjust: number }): { grams: number; must: MustTotals } {
  within('target', target, 1, 1.2)
  wholeWithin('adjust', adjust, 0, lines.length - 1)
  const withGrams = (grams: number): MustLine[] =>
    lines.map((line, index) => (index === adjust ? { ...line, grams } : line))
  const others = withGrams(0)
  others.forEach(checkLine)
  const line = others[adjust] as MustLine
  const rest = weigh(others)
  const grams =
    volumeLitres === undefined
      ? gramsAtBrix(line, rest, within('waterLitres', waterLitres ?? 0, 0, 10_000), target)
      : (sugarGramsPerLitre(target) * within('volumeLitres', volumeLitres, 0.05, 10_000) -
          rest.solubleGrams) /
        line.solubleFraction
  if (!Number.isFinite(grams) || grams < -1e-9 || grams > 1_000_000) {
    throw new OutOfRange('target', target, undefined, undefined, 'no amount of that ingredient reaches it')
  }
  const settled = Math.max(0, grams)
  return {
    grams: settled,
    must: mustFromIngredients({ lines: withGrams(settled), volumeLitres, waterLitres }),
  }
}

/** Solids over mass must be the target's °Bx: linear in the grams of the line. */
function gramsAtBrix(
  line: MustLine,
  rest: ReturnType<typeof weigh>,
  waterLitres: number,
  target: number,
): number {
  const w = solve((x) => densityOfSolution(100 * x, 20) / WATER_AT_20, target, 0, 0.75)
  const water = rest.waterGrams + waterLitres * WATER_AT_20
  const dissolved = line.solubleFraction - w * (line.waterFraction + line.solubleFraction)
  return (w * (water + rest.solubleGrams) - rest.solubleGrams) / dissolved
}
