import {
  fermentableFloor,
  ingredientForGravity,
  mustFromIngredients,
  nitrogenPlan,
  pitchAdvice,
  abv,
  type MustLine,
  type MustTotals,
  type NitrogenPlan,
} from '../brewing/index.ts'
import type { BatchStyle, NitrogenDemand, RecipeStage, RecipeUnit } from './vocabulary.ts'

/** What a line brings to the must, as fractions of its mass. */
export interface LineComposition {
  waterFraction: number
  solubleFraction: number
  fermentableFraction?: number | undefined
  yanMgPerKg?: number | undefined
}

export interface RecipeLine {
  name: string
  stage: RecipeStage
  unit: RecipeUnit
  quantity: number
  composition: LineComposition | null
  /** Mass of one unit; null where it is not known. Grams weigh 1. */
  gramsPerUnit: number | null
}

export interface RecipeFacts {
  style: BatchStyle
  volumeLitres: number
  lines: readonly RecipeLine[]
  nitrogenDemand: NitrogenDemand
  tolerancePercent?: number | undefined
}

export interface RecipeSums {
  must: MustTotals | undefined
  expectedFg: number | undefined
  /** Strength at the expected end. */
  abvPercent: number | undefined
  nitrogen: NitrogenPlan | undefined
  /** Sound dry yeast, grams. */
  yeastGrams: { low: number; likely: number; high: number } | undefined
  /** Lines for the must whose composition or mass nobody has written down. */
  uncounted: string[]
  /** Why there is no sum, in a sentence. */
  problem: string | undefined
}

/** Dry drinks of honey and fruit end about here (common practice); lower is met, and is a gift. */
export const DRY_FG = 0.998
/** Share of the points that all-malt beer keeps: three quarters ferment (common practice). */
const BEER_KEEPS = 0.25
/** What sound dry yeast has alive, for a first estimate; a packet of the fridge has its own. */
const SOUND_DRY = { estimate: 0.9, low: 0.75, high: 0.97 }

/** Grams of a line, or undefined where the mass of its unit is not known. */
export function lineGrams(line: Pick<RecipeLine, 'unit' | 'quantity' | 'gramsPerUnit'>): number | undefined {
  if (line.unit === 'g') return line.quantity
  return line.gramsPerUnit === null ? undefined : line.quantity * line.gramsPerUnit
}

/** What a recipe comes to: gravity, strength, nitrogen and yeast. Never throws; says what is wrong. */
export function recipeSums(recipe: RecipeFacts): RecipeSums {
  const { counted, uncounted } = sorted(recipe.lines)
  const sums: RecipeSums = {
    must: undefined,
    expectedFg: undefined,
    abvPercent: undefined,
    nitrogen: undefined,
    yeastGrams: undefined,
    uncounted,
    problem: undefined,
  }
  if (counted.length === 0) return sums
  try {
    const must = mustFromIngredients({
      lines: counted.map(({ must }) => must),
      volumeLitres: recipe.volumeLitres,
    })
    const og = Math.max(1, must.og)
    const expectedFg = expectedEnd({ ...recipe, og, dryFg: must.dryFg })
    const advice = pitchAdvice({
      form: 'dry',
      viability: SOUND_DRY,
      volumeLitres: recipe.volumeLitres,
      og,
      use: useOf(recipe.style),
    })
    return {
      ...sums,
      must,
      expectedFg,
      abvPercent: abv({ og, fg: expectedFg }).percent,
      nitrogen: nitrogenPlan({
        og,
        volumeLitres: recipe.volumeLitres,
        supplyMgPerLitre: Math.min(1000, must.yanMgPerLitre),
        demand: recipe.nitrogenDemand,
      }),
      yeastGrams: { low: advice.low, likely: advice.grams, high: advice.high },
    }
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    return { ...sums, problem: mustProblem(error.message) }
  }
}

/**
 * The gravity a drink of a style is expected to end at. Honey and fruit go dry unless something in them does not
 * ferment or the strain gives up first; malt keeps a quarter of its points. `og` 1.000 to 1.200.
 *
 * A mead of 1.080 is expected at 0.998; with yeast that bears 8 % it is expected to stay near 1.020.
 */
export function expectedEnd({
  style,
  og,
  dryFg,
  tolerancePercent,
}: {
  style: BatchStyle
  og: number
  /** Where it ends if all that can ferment does, from the recipe. */
  dryFg?: number | undefined
  tolerancePercent?: number | undefined
}): number {
  const usual = style === 'beer' ? 1 + (og - 1) * BEER_KEEPS : DRY_FG
  // Malt extracts say themselves how much of them ferments; then that counts, not the rule of thumb.
  const end = style === 'beer' && dryFg !== undefined ? Math.max(dryFg, 1) : Math.max(usual, dryFg ?? usual)
  const dry = Math.min(og, end)
  if (tolerancePercent === undefined || abv({ og, fg: dry }).percent <= tolerancePercent) return dry
  return gravityAtStrength(og, tolerancePercent)
}

/** Where a must stands once it holds so much alcohol, by halving the interval. */
function gravityAtStrength(og: number, percent: number): number {
  let low = fermentableFloor(og)
  let high = og
  for (let turn = 0; turn < 40; turn++) {
    const middle = (low + high) / 2
    if (abv({ og, fg: middle }).percent > percent) low = middle
    else high = middle
  }
  return high
}

/** The recipe for another volume: every line in proportion, pieces in whole ones. */
export function scaledLines<Line extends { unit: RecipeUnit; quantity: number; perBottle?: boolean }>(
  lines: readonly Line[],
  fromLitres: number,
  toLitres: number,
): Line[] {
  const factor = toLitres / fromLitres
  return lines.map((line) => {
    if (line.perBottle) return line
    const scaled = line.quantity * factor
    return { ...line, quantity: line.unit === 'each' ? Math.max(1, Math.ceil(scaled - 1e-9)) : tenth(scaled) }
  })
}

export type GravityScale = { ok: true; line: number; quantity: number } | { ok: false; reason: string }

/**
 * How much of the main sugar brings the recipe to a gravity, the rest kept as it is. The main sugar is the must line that
 * brings most; `line` is its place in `recipe.lines`, `quantity` in its own unit.
 */
export function lineForGravity(recipe: RecipeFacts, target: number): GravityScale {
  const { counted } = sorted(recipe.lines)
  const sugar = (line: MustLine) => line.grams * line.solubleFraction
  const main = counted.reduce<(typeof counted)[number] | undefined>(
    (best, line) => (best === undefined || sugar(line.must) > sugar(best.must) ? line : best),
    undefined,
  )
  if (!main) return { ok: false, reason: 'Add something that ferments first.' }
  try {
    const { grams } = ingredientForGravity({
      lines: counted.map(({ must }) => must),
      adjust: counted.indexOf(main),
      target,
      volumeLitres: recipe.volumeLitres,
    })
    const line = recipe.lines[main.place] as RecipeLine
    const quantity = tenth(line.unit === 'g' ? grams : grams / (line.gramsPerUnit ?? 1))
    if (quantity <= 0) return { ok: false, reason: 'The rest of the recipe already passes that gravity.' }
    return { ok: true, line: main.place, quantity }
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    return { ok: false, reason: mustProblem(error.message) }
  }
}

export function useOf(style: BatchStyle): 'mead' | 'cider' | 'wine' | 'ale' | 'other' {
  switch (style) {
    case 'mead':
    case 'cyser':
    case 'melomel':
      return 'mead'
    case 'cider':
      return 'cider'
    case 'wine':
      return 'wine'
    case 'beer':
      return 'ale'
    case 'other':
      return 'other'
  }
}

function sorted(lines: readonly RecipeLine[]) {
  const counted: { place: number; must: MustLine }[] = []
  const uncounted: string[] = []
  for (const [place, line] of lines.entries()) {
    if (line.stage !== 'must') continue
    const grams = lineGrams(line)
    if (grams === undefined || line.composition === null) uncounted.push(line.name)
    else counted.push({ place, must: { grams, ...line.composition } })
  }
  return { counted, uncounted }
}

/** The brewing sums name arguments; a member reads about their batch. */
function mustProblem(message: string): string {
  const alone = /the ingredients alone fill ([\d.]+) L/.exec(message)?.[1]
  if (alone) return `The ingredients alone fill ${alone} L. Make the batch larger, or take less of them.`
  if (/the must would read/.test(message))
    return 'That is more sugar than yeast can start in. Take less of it, or make the batch larger.'
  if (/no amount of that ingredient/.test(message)) return 'No amount of the main sugar reaches that gravity.'
  return 'These amounts cannot be added up. Look at the quantities and at what the ingredients are made of.'
}

const tenth = (value: number) => Math.round(value * 10) / 10
