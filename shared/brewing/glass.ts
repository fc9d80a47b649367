import { GLASS_RISK_C, GLASS_WARNING_C } from './judgement.ts'
import { within } from './range.ts'

/**
 * Whether a glass vessel stands a liquid.
 *
 * @param liquidC -5 to 100
 * @param glassC -20 to 60
 * @returns the difference and what to do
 * @throws RangeError outside those ranges
 * Source: ordinary soda-lime glass is at risk from about 40 °C difference (a test laboratory on ASTM C149); thick
 * demijohns bear less, so the warning stands at 30.
 */
export function glassShock({ liquidC, glassC }: { liquidC: number; glassC: number }): {
  differenceC: number
  verdict: 'fine' | 'let-it-cool' | 'do-not-pour'
} {
  const differenceC = Math.abs(within('liquidC', liquidC, -5, 100) - within('glassC', glassC, -20, 60))
  const verdict =
    differenceC < GLASS_WARNING_C ? 'fine' : differenceC < GLASS_RISK_C ? 'let-it-cool' : 'do-not-pour'
  return { differenceC, verdict }
}
