import {
  AMMONIUM_CEILING_GRAMS_PER_LITRE,
  FEED_GRAMS_PER_LITRE,
  LAST_FEED_SHARE,
  MOST_FEEDS,
  NITROGEN_NEED,
} from './judgement.ts'
import { oneOf, within } from './range.ts'
import { sugarGramsPerLitre } from './sucrose-density.ts'
import { NITROGEN_DEMANDS, type NitrogenDemand } from './vocabulary.ts'

/** Nitrogen in diammonium phosphate, g/g. Source: IUPAC atomic masses. Ammonium sulphate has the same, 0.212. */
export const DAP_NITROGEN = (2 * 14.007) / 132.056

export interface NitrogenFeed {
  grams: number
  /** Share of the sugar gone when it is due: 0 is at the first sign of activity. */
  sugarGone: number
  when: string
}

export interface NitrogenPlan {
  targetMgPerLitre: number
  supplyMgPerLitre: number
  shortfallMgPerLitre: number
  /** DAP for the whole batch, held to the ceiling. */
  grams: number
  gramsPerLitre: number
  feeds: NitrogenFeed[]
  ceilingGrams: number
  ceilingGramsPerLitre: number
  /** True where the ceiling stopped the plan short of the target. */
  capped: boolean
  warnings: string[]
}

const WHEN = [
  'once it shows activity',
  'when about a sixth of the sugar is gone',
  'when a third of the sugar is gone',
] as const

/**
 * How much diammonium phosphate (DAP) a must lacks, and when to feed it.
 *
 * @param og 1.000 to 1.200
 * @param volumeLitres 0.1 to 10,000
 * @param supplyMgPerLitre yeast-usable nitrogen that is there, 0 to 1,000 mg N/L
 * @param demand of the strain: `low`, `medium` or `high` (0.75, 0.90, 1.25 mg N per gram of sugar)
 * @returns target, shortfall, grams in one to three feeds, the legal ceiling and warnings
 * @throws RangeError outside those ranges
 * Source: needs per gram of sugar from memory; DAP 21.2 % N from atomic masses; ceiling 1 g/L, EU Regulation 606/2009
 * Annex I A. +100 mg N/L in 5 L takes 2.36 g.
 */
export function nitrogenPlan({
  og,
  volumeLitres,
  supplyMgPerLitre,
  demand,
}: {
  og: number
  volumeLitres: number
  supplyMgPerLitre: number
  demand: NitrogenDemand
}): NitrogenPlan {
  within('og', og, 1, 1.2)
  within('volumeLitres', volumeLitres, 0.1, 10_000)
  within('supplyMgPerLitre', supplyMgPerLitre, 0, 1000)
  const need = NITROGEN_NEED[oneOf('demand', demand, NITROGEN_DEMANDS)]
  const targetMgPerLitre = need * Math.max(0, sugarGramsPerLitre(og))
  const shortfallMgPerLitre = Math.max(0, targetMgPerLitre - supplyMgPerLitre)
  const wantedPerLitre = shortfallMgPerLitre / 1000 / DAP_NITROGEN
  const gramsPerLitre = Math.min(wantedPerLitre, AMMONIUM_CEILING_GRAMS_PER_LITRE)
  const capped = wantedPerLitre > AMMONIUM_CEILING_GRAMS_PER_LITRE
  const grams = gramsPerLitre * volumeLitres
  const count =
    grams === 0 ? 0 : Math.min(MOST_FEEDS, Math.max(1, Math.ceil(gramsPerLitre / FEED_GRAMS_PER_LITRE)))
  const feeds = Array.from({ length: count }, (_, index) => {
    const place = count === 1 ? 0 : count === 2 ? index * 2 : index
    return { grams: grams / count, sugarGone: (place / 2) * LAST_FEED_SHARE, when: WHEN[place] ?? WHEN[0] }
  })
  return {
    targetMgPerLitre,
    supplyMgPerLitre,
    shortfallMgPerLitre,
    grams,
    gramsPerLitre,
    feeds,
    ceilingGrams: AMMONIUM_CEILING_GRAMS_PER_LITRE * volumeLitres,
    ceilingGramsPerLitre: AMMONIUM_CEILING_GRAMS_PER_LITRE,
    capped,
    warnings: nitrogenWarnings(capped, grams),
  }
}

function nitrogenWarnings(capped: boolean, grams: number): string[] {
  if (grams === 0) return ['It has enough. More only leaves food for others.']
  const warnings = ['Add none after half the sugar is gone: yeast no longer takes it up.']
  if (capped) {
    warnings.push(
      'The ceiling for ammonium salts, 1 g/L, is reached. Make up the rest with a complete yeast food.',
    )
  }
  warnings.push('DAP alone does not carry a honey must: it also lacks potassium and vitamins.')
  return warnings
}

/**
 * Nitrogen that an amount of DAP brings.
 *
 * @param gramsPerLitre 0 to 5
 * @returns mg N/L: 212 for each g/L
 * @throws RangeError outside that range
 * Source: IUPAC atomic masses.
 */
export function nitrogenFromDap(gramsPerLitre: number): number {
  return within('gramsPerLitre', gramsPerLitre, 0, 5) * DAP_NITROGEN * 1000
}
