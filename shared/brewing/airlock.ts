import { CO2_GRAMS_PER_MOL, GRAMS_PER_VOLUME } from './carbonation.ts'
import { BUBBLE_ML, QUIET_BUBBLES_PER_MINUTE } from './judgement.ts'
import { within } from './range.ts'
import { CO2_GRAMS_PER_LITRE_POINT } from './room.ts'

const ML_PER_MOL_20C = 24_055

/**
 * What the bubbles of an airlock say, which is little.
 *
 * @param bubblesPerMinute 0 to 600
 * @param volumeLitres 0.1 to 1,000
 * @param bubbleMl size of one, 0.1 to 5; 0.5 unless said
 * @returns whether it is time to rack and clear, the gravity it loses in a day, and how many days of that would put one
 * whole volume of CO2 into a shut bottle. It never says "bottle".
 * @throws RangeError outside those ranges
 * Source: ideal gas at 20 °C. One bubble a minute from 5 L: 0.27 points a day, a volume in 7.5 days. The one-a-minute
 * rule is common practice.
 */
export function airlockSign({
  bubblesPerMinute,
  volumeLitres,
  bubbleMl = BUBBLE_ML,
}: {
  bubblesPerMinute: number
  volumeLitres: number
  bubbleMl?: number
}): {
  sign: 'still-working' | 'rack-and-clear'
  pointsPerDay: number
  daysToOneVolume: number | undefined
  reasons: string[]
} {
  within('bubblesPerMinute', bubblesPerMinute, 0, 600)
  within('volumeLitres', volumeLitres, 0.1, 1000)
  within('bubbleMl', bubbleMl, 0.1, 5)
  const gramsPerLitreDay =
    (bubblesPerMinute * 1440 * bubbleMl * CO2_GRAMS_PER_MOL) / ML_PER_MOL_20C / volumeLitres
  return {
    sign: bubblesPerMinute < QUIET_BUBBLES_PER_MINUTE ? 'rack-and-clear' : 'still-working',
    pointsPerDay: gramsPerLitreDay / CO2_GRAMS_PER_LITRE_POINT,
    daysToOneVolume: gramsPerLitreDay > 0 ? GRAMS_PER_VOLUME / gramsPerLitreDay : undefined,
    reasons: [
      'Bubbles come from warming too, and stop when a bung leaks. Bottle by the hydrometer alone.',
      'Even one bubble a minute fills a shut bottle within days.',
    ],
  }
}
