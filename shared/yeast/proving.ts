import { amountText } from './amount.ts'
import type { Step } from './dose.ts'
import { PROVING } from './judgement.ts'
import type { AmountUnit } from './vocabulary.ts'

export interface ProvingTest {
  grams: number
  waterMl: number
  sugarGrams: number
  temperatureC: { low: number; high: number }
  minutes: { sound: number; last: number }
  steps: Step[]
}

/** How to ask a doubtful packet whether it lives. Common practice, from memory. */
export function provingTest(unit: AmountUnit): ProvingTest {
  const { yeastGrams, waterMl, sugarGrams, lowC, highC, soundMinutes, lastMinutes } = PROVING
  return {
    grams: yeastGrams,
    waterMl,
    sugarGrams,
    temperatureC: { low: lowC, high: highC },
    minutes: { sound: soundMinutes, last: lastMinutes },
    steps: [
      {
        title: `Warm ${waterMl} mL of water`,
        text: `to ${lowC}–${highC} °C and stir in ${sugarGrams} g of sugar, half a teaspoon.`,
      },
      {
        title: `Add ${amountText(yeastGrams)} ${unit === 'g' ? 'g' : 'mL'} of the yeast`,
        text: 'and leave it somewhere warm.',
      },
      {
        title: `Foam within ${soundMinutes} minutes: use it.`,
        text: `Nothing after ${lastMinutes} minutes: take another packet.`,
      },
    ],
  }
}
