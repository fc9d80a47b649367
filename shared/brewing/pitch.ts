import {
  BEER_CELLS_PER_ML_PLATO,
  CELLS_PER_GRAM,
  DOUBLE_DOSE_OG,
  HIGH_SUGAR_OG,
  LEAST_DOSED_SHARE,
  LAG_SPREAD,
  PITCH_VERDICTS,
  REHYDRATION,
  VIABILITY_GOOD,
  VIABILITY_MORE,
  VIABILITY_PROVE,
  WINE_CELLS_PER_ML,
  Z80,
} from './judgement.ts'
import { lagOf } from './lag.ts'
import { oneOf, within } from './range.ts'
import { brixFromGravity } from './sucrose-density.ts'
import { DRINK_USES, YEAST_FORMS, type DrinkUse, type YeastForm } from './vocabulary.ts'

export type PitchVerdict = (typeof PITCH_VERDICTS)[number]

export interface Rehydration {
  waterMl: number
  temperatureC: { low: number; high: number }
  minutes: { low: number; high: number }
  largestStepC: number
}

export interface PitchAdvice {
  /** What to pitch; grams (mL for slurry and liquid packs). */
  grams: number
  low: number
  high: number
  verdict: PitchVerdict
  /** Absent for yeast that is wet already. */
  rehydration: Rehydration | undefined
  expectedHoursToActivity: number
  activityHours: { early: number; late: number }
  /** When to stop waiting and ask what is wrong. */
  worryAfterHours: number
  /** Living cells per mL that `grams` gives. */
  cellsPerMl: number
  reasons: string[]
}

interface Alive {
  estimate: number
  low: number
  high: number
}

/** Living cells wanted per mL. */
function wanted(use: DrinkUse, og: number): Alive {
  switch (use) {
    case 'ale':
    case 'lager': {
      const plato = Math.max(1, brixFromGravity(og))
      const rate = BEER_CELLS_PER_ML_PLATO[use]
      return { low: rate.low * plato, estimate: rate.likely * plato, high: rate.high * plato }
    }
    case 'wine':
    case 'mead':
    case 'cider':
    case 'other': {
      const over = (og - HIGH_SUGAR_OG) / (DOUBLE_DOSE_OG - HIGH_SUGAR_OG)
      const rich = 1 + Math.min(1, Math.max(0, over))
      const { low, likely, high } = WINE_CELLS_PER_ML
      return { low: low * rich, estimate: likely * rich, high: high * rich }
    }
  }
}

function verdictOf(alive: Alive, enough: boolean): PitchVerdict {
  if (alive.estimate < VIABILITY_PROVE) return 'do-not-rely'
  if (alive.estimate < VIABILITY_MORE) return 'prove-first'
  if (alive.estimate < VIABILITY_GOOD || !enough) return 'pitch-more'
  return 'good'
}

/**
 * How much yeast to pitch, as a range, and what to expect.
 *
 * @param form `dry`, `liquid` or `slurry`
 * @param viability share alive: a number 0 to 1, or `{ estimate, low, high }` as `packetViability` gives it
 * @param volumeLitres 0.1 to 1,000
 * @param og 1.000 to 1.200
 * @param use `wine`, `mead`, `cider`, `ale`, `lager` or `other`
 * @param availableGrams what there is; the lag is then that of pitching it, up to the top of the range
 * @returns grams with a range (a band of practice, not an error), a verdict, rehydration and hours to first activity
 * @throws RangeError outside those ranges
 * Source: 5e6 living cells/mL for wine (AWRI, Australian guide: 0.25 g/L at 2e10 cells/g), 0.75–1.5 million/mL/°P for
 * beer (from memory); 1e10 cells/g of dry yeast (OIV minimum, from memory). 5 g of sound dry yeast in 5 L is within
 * range for every wine, cider and mead.
 */
export function pitchAdvice({
  form,
  viability,
  volumeLitres,
  og,
  use,
  availableGrams,
}: {
  form: YeastForm
  viability: number | Alive
  volumeLitres: number
  og: number
  use: DrinkUse
  availableGrams?: number | null
}): PitchAdvice {
  const kind = oneOf('form', form, YEAST_FORMS)
  const drink = oneOf('use', use, DRINK_USES)
  const alive =
    typeof viability === 'number' ? { estimate: viability, low: viability, high: viability } : viability
  within('viability', alive.estimate, 0, 1)
  within('viability.low', alive.low, 0, alive.estimate)
  within('viability.high', alive.high, alive.estimate, 1)
  within('volumeLitres', volumeLitres, 0.1, 1000)
  within('og', og, 1, 1.2)
  const available = availableGrams ?? undefined
  if (available !== undefined) within('availableGrams', available, 0, 100_000)

  // A fifth alive is the least that is worth dosing for: under it, no weight of packets helps.
  const share = Math.max(LEAST_DOSED_SHARE, alive.estimate)
  const want = wanted(drink, og)
  const perGram = CELLS_PER_GRAM[kind] * share
  const gramsFor = (cellsPerMl: number): number => (cellsPerMl * volumeLitres * 1000) / perGram
  const grams = gramsFor(want.estimate)
  const low = gramsFor(want.low)
  const high = gramsFor(want.high)
  const enough = available === undefined || available >= low
  const pitched = available === undefined ? grams : Math.max(1e-6, Math.min(available, high))
  const cells = (pitched * CELLS_PER_GRAM[kind]) / (volumeLitres * 1000)
  const hours = (viable: number): number => lagOf(cells, Math.max(1e-6, viable))
  const likely = hours(alive.estimate)
  const verdict = verdictOf(alive, enough)
  return {
    grams,
    low,
    high,
    verdict,
    rehydration: kind === 'dry' ? rehydrationFor(Math.min(pitched, high)) : undefined,
    expectedHoursToActivity: likely,
    activityHours: {
      early: hours(alive.high) * Math.exp(-Z80 * LAG_SPREAD),
      late: hours(alive.low) * Math.exp(Z80 * LAG_SPREAD),
    },
    worryAfterHours: Math.max(48, Math.min(120, 2 * likely)),
    cellsPerMl: cells * alive.estimate,
    reasons: pitchReasons({ verdict, alive, drink, og, available, low, kind }),
  }
}

function rehydrationFor(grams: number): Rehydration {
  return {
    waterMl: grams * REHYDRATION.waterPerGram,
    temperatureC: { low: REHYDRATION.lowC, high: REHYDRATION.highC },
    minutes: { low: REHYDRATION.lowMinutes, high: REHYDRATION.highMinutes },
    largestStepC: REHYDRATION.largestStepC,
  }
}

function pitchReasons(facts: {
  verdict: PitchVerdict
  alive: Alive
  drink: DrinkUse
  og: number
  available: number | undefined
  low: number
  kind: YeastForm
}): string[] {
  const percent = Math.round(100 * facts.alive.estimate)
  const reasons = [`About ${percent} % of it is likely to be alive, and the dose allows for that.`]
  switch (facts.verdict) {
    case 'good':
      reasons.push('That is enough life for an ordinary dose.')
      break
    case 'pitch-more':
      if (facts.available !== undefined && facts.available < facts.low) {
        reasons.push(
          'What there is falls short of the range: add a second packet, or grow it in a small must first.',
        )
      } else {
        reasons.push('Part of it has died, so it takes more of it to start on time.')
      }
      break
    case 'prove-first':
      reasons.push(
        'Much of it has died. Prove it in a glass of warm, dilute must before the batch depends on it.',
      )
      break
    case 'do-not-rely':
      reasons.push('Too little of it is likely to live. Get a fresh packet; keep this one for yeast food.')
      break
  }
  if (facts.drink === 'ale' || facts.drink === 'lager') {
    reasons.push(
      'The range is wide because the brewery rule comes from repitched slurry; dry yeast does with less.',
    )
  } else if (facts.og > HIGH_SUGAR_OG) {
    reasons.push('A rich must is hard on yeast, so the dose goes up.')
  }
  if (facts.kind !== 'dry')
    reasons.push('Read the grams as millilitres of thick yeast; counts of wet yeast vary widely.')
  return reasons
}
