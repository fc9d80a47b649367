import type { IngredientKind } from './vocabulary.ts'

export interface Caution {
  text: string
  why: string
}

/** What to mind while handling a kind of thing. The product's own label goes before any of it. */
export function cautionsFor(kind: IngredientKind): Caution[] {
  switch (kind) {
    case 'cleaning':
      return [
        {
          text: 'Never mix two cleaners, and follow the label.',
          why: 'Acid with chlorine makes a poisonous gas, and some cleaners burn skin and eyes. The label says how strong, how long and what to wear.',
        },
      ]
    case 'preservative':
      return [
        {
          text: 'Weigh sulphite in fresh air, and do not breathe the dust.',
          why: 'It gives off sulphur dioxide, which can start an asthma attack. Sulphite is an allergen too: above 10 mg per litre it has to be named on the label.',
        },
      ]
    case 'priming':
      return [
        {
          text: 'Prime only when the gate says the batch has finished.',
          why: 'Sugar left over and sugar added both turn into gas, and a bottle that bears one may burst with both.',
        },
      ]
    default:
      return []
  }
}
