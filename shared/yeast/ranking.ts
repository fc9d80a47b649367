import type { DrinkUse } from '../brewing/vocabulary.ts'
import { MOST_ALTERNATIVES } from './judgement.ts'
import { VERDICTS, type Verdict } from './vocabulary.ts'

interface Ranked {
  id: string
  verdict: Verdict
  viability: { estimate: number }
}

/** The order of the fridge: how likely each is to start, as one number; higher is likelier. */
export const likelihoodRank = ({ verdict, viability }: Omit<Ranked, 'id'>) =>
  (VERDICTS.length - VERDICTS.indexOf(verdict)) * 10 + Number(viability.estimate.toFixed(6))

/** Likeliest first; the id settles ties, so that pages do not overlap. */
export const byLikelihood = (a: Ranked, b: Ranked) =>
  likelihoodRank(b) - likelihoodRank(a) || (a.id < b.id ? -1 : a.id > b.id ? 1 : 0)

const WINE_LIKE: readonly DrinkUse[] = ['wine', 'mead', 'cider', 'other']

/** Whether yeast meant for one drink does for another: wine, mead and cider yeasts stand in for each other, beer yeasts do not. */
export const servesFor = (use: DrinkUse, wanted: DrinkUse) =>
  use === wanted || (WINE_LIKE.includes(use) && WINE_LIKE.includes(wanted))

interface Candidate extends Ranked {
  use: DrinkUse
  pitch: { enough: boolean }
}

/** Other packets that would serve: sound, enough, for the same or a kindred drink; likeliest first, the same use before a kindred one. */
export function alternativesTo<C extends Candidate>(
  packet: { id: string; use: DrinkUse },
  others: readonly C[],
): C[] {
  return others
    .filter(({ id }) => id !== packet.id)
    .filter(({ use }) => servesFor(use, packet.use))
    .filter(({ verdict, pitch }) => (verdict === 'good' || verdict === 'pitch-more') && pitch.enough)
    .sort((a, b) => Number(b.use === packet.use) - Number(a.use === packet.use) || byLikelihood(a, b))
    .slice(0, MOST_ALTERNATIVES)
}
