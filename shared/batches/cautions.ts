import type { BottleKind, StepKind } from './vocabulary.ts'

export interface StepCaution {
  text: string
  why: string
}

/** What the caution on a step depends on. */
export interface CautionFacts {
  kind: StepKind
  /** The vessel this step fills, with its own limit, where it has one. */
  vessel?: { name: string; maxFillTemperatureC: number | null } | undefined
  bottleKind: BottleKind
  carbonated: boolean
  /** Allergens in what this step puts in, in words. */
  allergens: readonly string[]
  sulphite: boolean
}

/**
 * What to mind on a step, each with its why. Cautions defer to the label of a product, to local law and to licensed
 * practice; the limit on filling a vessel is the kind's own.
 */
export function stepCautions(facts: CautionFacts): StepCaution[] {
  switch (facts.kind) {
    case 'prepare':
      return [...hotFill(facts), ...sulphiteDust(facts), ...allergens(facts)]
    case 'pitch':
      return [
        {
          text: 'Fit an airlock, and never seal the vessel.',
          why: 'A ferment makes many times its own volume of gas, and a closed vessel bursts.',
        },
      ]
    case 'feed':
      return [
        {
          text: 'Stir the gas out before you add powder.',
          why: 'A spoonful into a lively must lets all its gas go at once, and it foams over.',
        },
      ]
    case 'rack':
      return [
        {
          text: 'Keep the airlock on after racking.',
          why: 'Racking wakes yeast up again; gas needs a way out until the gate says it has finished.',
        },
        ...sulphiteDust(facts),
      ]
    case 'fine':
      return facts.allergens.length > 0
        ? allergens(facts)
        : [
            {
              text: 'Look at what your finings are made of.',
              why: 'Some are of fish, egg or milk, and someone who drinks this may not bear them.',
            },
          ]
    case 'chill':
      return [
        {
          text: 'Do not take stillness in the cold for the end.',
          why: 'Yeast rests when chilled and starts again in the warm, bottle or not.',
        },
      ]
    case 'bottle':
      return bottling(facts)
    case 'condition':
      return [
        {
          text: 'Keep the bottles in a box with a lid, and wear goggles when you handle them.',
          why: 'If one bears less than it should, the box keeps the glass.',
        },
      ]
    case 'taste':
      return [
        {
          text: 'This is a drink with alcohol. Spit when you taste many, and do not drive after.',
          why: 'Home-made strength is an estimate. Home-made drink is normally not for sale: local law decides.',
        },
      ]
  }
}

function hotFill({ vessel }: CautionFacts): StepCaution[] {
  const limit = vessel?.maxFillTemperatureC ?? null
  if (!vessel || limit === null) return []
  return [
    {
      text: `Cool the must under ${limit.toFixed(0)} °C before it goes into ${vessel.name}.`,
      why: 'Glass cracks from a sudden difference of heat, and plastic softens. This is the limit of this kind of vessel.',
    },
  ]
}

function sulphiteDust({ sulphite }: CautionFacts): StepCaution[] {
  if (!sulphite) return []
  return [
    {
      text: 'Weigh sulphite in fresh air, as its label says.',
      why: 'Its fumes can start an asthma attack, and above 10 mg/L it has to be named on a label.',
    },
  ]
}

function allergens({ allergens: words }: CautionFacts): StepCaution[] {
  if (words.length === 0) return []
  return [
    {
      text: `What goes in here contains ${words.join(', ')}.`,
      why: 'Name it on the label, and clean what it touched before the next batch.',
    },
  ]
}

function bottling({ bottleKind, carbonated }: CautionFacts): StepCaution[] {
  const gate = {
    text: 'Bottle by the gate, not by the airlock.',
    why: 'Each point still to ferment adds half a volume of gas, and too much of it bursts glass.',
  }
  const bottle =
    bottleKind === 'pet'
      ? {
          text: 'Squeeze one bottle each day.',
          why: 'A hard one says the gas is there; a very hard one goes into the cold and is let off.',
        }
      : {
          text: 'Leave out glass that is scratched, chipped or of unknown age, and wear goggles.',
          why: carbonated
            ? 'Old glass has no known strength, and this drink will press on it.'
            : 'A still drink may not stay still, and that glass has no known strength.',
        }
  return [gate, bottle]
}
