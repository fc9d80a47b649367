import { SANITISERS } from './judgement.ts'
import { oneOf, within } from './range.ts'

export const SANITISER_AGENTS = ['iodophor', 'hypochlorite', 'percarbonate', 'hot-water'] as const
export type SanitiserAgent = (typeof SANITISER_AGENTS)[number]

/**
 * How much of a stock solution makes a working solution.
 *
 * @param volumeLitres of working solution, 0.1 to 1,000
 * @param stockPercent strength of the stock, weight by volume, 0.1 to 40: from its label
 * @param targetMgPerLitre wanted, 1 to 5,000
 * @returns millilitres of stock
 * @throws RangeError outside those ranges, or where the stock is weaker than what is wanted
 * Source: dilution. 1.75 % iodophor to 12.5 mg/L: 0.71 mL/L; 5 % hypochlorite to 200 mg/L: 4 mL/L.
 */
export function sanitiserDilution({
  volumeLitres,
  stockPercent,
  targetMgPerLitre,
}: {
  volumeLitres: number
  stockPercent: number
  targetMgPerLitre: number
}): { millilitres: number } {
  within('volumeLitres', volumeLitres, 0.1, 1000)
  within('stockPercent', stockPercent, 0.1, 40)
  within('targetMgPerLitre', targetMgPerLitre, 1, Math.min(5000, stockPercent * 10_000))
  return { millilitres: (volumeLitres * 1000 * targetMgPerLitre) / (stockPercent * 10_000) }
}

/** Published conditions of an agent: strength, contact time, warmth, and their source. Throws `RangeError` for another word. */
export function sanitiserConditions(agent: SanitiserAgent): (typeof SANITISERS)[SanitiserAgent] {
  return SANITISERS[oneOf('agent', agent, SANITISER_AGENTS)]
}
