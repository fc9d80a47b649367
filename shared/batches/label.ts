import { SULPHITE_LABEL_MG_PER_LITRE } from '../brewing/judgement.ts'
import { ALLERGEN_WORDS, type Allergen } from '../larder/vocabulary.ts'
import { dayInWords } from '../time/day-words.ts'
import type { CalendarDay } from '../time/day.ts'
import type { BatchStyle } from './vocabulary.ts'

/** A stretch of a label's text; allergens are in bold (Regulation (EU) No 1169/2011, Article 21). */
export interface LabelRun {
  text: string
  bold: boolean
}

export interface LabelFacts {
  name: string
  style: BatchStyle
  maker: string
  abvPercent: number | undefined
  bottledOn: CalendarDay | undefined
  bottleMl: number
  ingredients: readonly { name: string; allergens: readonly Allergen[] }[]
  sulphiteMgPerLitre: number
  carbonated: boolean
}

export interface Label {
  title: string
  /** "Cyser, about 9 % vol". */
  what: string
  /** "750 ml, bottled 8 November 2031 by Hester Vale". */
  from: string
  ingredients: LabelRun[]
  /** Present when it has to be said. */
  sulphites: LabelRun[] | undefined
  keep: string
  notForSale: string
}

const STYLE_NAMES: Record<BatchStyle, string> = {
  mead: 'Mead',
  cyser: 'Apple and honey mead',
  melomel: 'Fruit mead',
  cider: 'Cider',
  wine: 'Fruit wine',
  beer: 'Beer',
  other: 'Fermented drink',
}

/**
 * What a home label says. The strength is an estimate from two gravities, so it is given in whole per cent: 9.04 is
 * "about 9 %". Under 1.2 % no strength need be given. Sulphites are named above 10 mg/L, yeast's own not counted.
 */
export function labelOf(facts: LabelFacts): Label {
  const strength = strengthWords(facts.abvPercent)
  const bottled = facts.bottledOn
    ? `, bottled ${dayInWords(facts.bottledOn, 'date-long')} ${facts.bottledOn.slice(0, 4)}`
    : ''
  const sulphites = facts.sulphiteMgPerLitre > SULPHITE_LABEL_MG_PER_LITRE
  return {
    title: facts.name,
    what: `${STYLE_NAMES[facts.style]}${strength ? `, ${strength}` : ''}`,
    from: `${facts.bottleMl} ml${bottled} by ${facts.maker}`,
    ingredients: ingredientRuns(facts.ingredients),
    sulphites: sulphites
      ? [
          { text: 'Contains ', bold: false },
          { text: 'sulphites', bold: true },
          { text: '.', bold: false },
        ]
      : undefined,
    keep: facts.carbonated
      ? 'Under pressure. Keep cool and upright, chill before opening, point away from faces.'
      : 'Keep cool and dark. Open with care: it may have gone on working.',
    notForSale: 'Home made. Not for sale.',
  }
}

/** "about 9 % vol", "under 1.2 % vol", or nothing where it is not known. */
export function strengthWords(abvPercent: number | undefined): string | undefined {
  if (abvPercent === undefined) return undefined
  if (abvPercent < 1.2) return 'under 1.2 % vol'
  return `about ${Math.round(abvPercent)} % vol`
}

/** "Ingredients: apple juice, honey, barley malt (cereals with gluten)." with what may harm in bold. */
function ingredientRuns(ingredients: LabelFacts['ingredients']): LabelRun[] {
  if (ingredients.length === 0) return []
  const runs: LabelRun[] = [{ text: 'Ingredients: ', bold: false }]
  ingredients.forEach(({ name, allergens }, index) => {
    if (index > 0) runs.push({ text: ', ', bold: false })
    const harmful = allergens.length > 0
    runs.push({ text: name.toLowerCase(), bold: harmful })
    const words = allergens.map((allergen) => ALLERGEN_WORDS[allergen])
    const unsaid = words.filter((word) => !name.toLowerCase().includes(word))
    if (unsaid.length > 0)
      runs.push(
        { text: ' (', bold: false },
        { text: unsaid.join(', '), bold: true },
        { text: ')', bold: false },
      )
  })
  return [...runs, { text: '.', bold: false }]
}
