import {
  brixFromGravity,
  chlorineNeutraliser,
  ingredientForGravity,
  INGREDIENTS,
  mustFromIngredients,
  mustLine,
  sugarGramsPerLitre,
  type SulphiteSalt,
} from '#shared/brewing/index'
import { formatAmount, formatFigure } from '#shared/units/figure'
import type { Question } from '../question.ts'

export const INGREDIENT_OPTIONS = Object.entries(INGREDIENTS)
  .map(([value, row]) => ({ value, label: row.name }))
  .sort((a, b) => a.label.localeCompare(b.label, 'en'))

const MUST_HOW = {
  formula: [
    'Each ingredient is split into water, dissolved solids and pulp by its table.',
    'Solids ÷ volume gives grams per litre; the density of a sugar solution of that strength gives the gravity.',
  ],
  source: 'Composition: USDA SR and UK CoFID tables. Density: ICUMSA SPS-4.',
  range: 'Up to 1.200. Good to a point or so for sugar, three or four for honey and fruit.',
}

const must: Question = {
  id: 'must',
  moment: 'before',
  title: 'What gravity will it make?',
  lead: 'From what goes in and the volume it is made up to.',
  asks: [
    { kind: 'lines', key: 'lines', label: 'What goes in', start: 'honey:1200' },
    { kind: 'number', key: 'volumeLitres', label: 'Made up to', quantity: 'volume', start: 4.5 },
  ],
  answer(given, show) {
    const lines = given.lines('lines').map(({ ingredient, grams }) => mustLine(ingredient, grams))
    const made = mustFromIngredients({ lines, volumeLitres: given.number('volumeLitres') })
    return {
      figure: show.gravityFigure(made.og),
      sentence: `Somewhere from ${show.gravity(made.low)} to ${show.gravity(made.high)} before yeast.`,
      facts: [
        { label: 'Could reach', value: `about ${formatFigure(made.potentialAbv, 1)} %` },
        { label: 'If all of it ferments, ends at', value: show.gravity(made.dryFg) },
        { label: 'Sugar yeast can eat', value: `${formatAmount(made.sugarGrams)} g` },
        { label: 'Water to add', value: show.volume(made.waterLitres) },
        { label: 'Nitrogen it brings, where known', value: `${formatFigure(made.yanMgPerLitre, 0)} mg/L` },
      ],
      notes: made.reasons.slice(1),
    }
  },
  how: MUST_HOW,
  cautions: [
    {
      caution: 'Let hot must cool before it goes into glass.',
      why: 'A sudden difference of 30 °C can crack a demijohn. Pour into a bucket first, or add it to cold water.',
    },
  ],
}

const amount: Question = {
  id: 'amount',
  moment: 'before',
  title: 'How much honey does it take?',
  lead: 'Or sugar, malt or juice, to reach a gravity.',
  asks: [
    {
      kind: 'choice',
      key: 'ingredient',
      label: 'Ingredient',
      options: INGREDIENT_OPTIONS,
      start: 'honey',
      long: true,
    },
    {
      kind: 'number',
      key: 'target',
      label: 'Gravity wanted',
      quantity: 'gravity',
      start: 1.09,
      guards: ['og'],
    },
    { kind: 'number', key: 'volumeLitres', label: 'Made up to', quantity: 'volume', start: 4.5 },
  ],
  answer(given, show) {
    const line = mustLine(given.word('ingredient'), 0)
    const { grams, must: made } = ingredientForGravity({
      lines: [line],
      adjust: 0,
      target: given.number('target'),
      volumeLitres: given.number('volumeLitres'),
    })
    const kilos = grams >= 1000
    return {
      figure: { text: kilos ? formatFigure(grams / 1000, 2) : formatAmount(grams), unit: kilos ? 'kg' : 'g' },
      sentence: `With ${show.volume(made.waterLitres)} of water it makes ${show.volume(made.volumeLitres)}.`,
      facts: [{ label: 'Could reach', value: `about ${formatFigure(made.potentialAbv, 1)} %` }],
      notes: made.reasons.slice(1),
    }
  },
  how: MUST_HOW,
}

const convert: Question = {
  id: 'brix',
  moment: 'before',
  title: 'What is that in Brix?',
  lead: 'Gravity, °Brix and grams of sugar a litre, each from the other.',
  asks: [{ kind: 'number', key: 'sg', label: 'Gravity', quantity: 'gravity', start: 1.08, guards: ['brix'] }],
  answer(given) {
    const sg = given.number('sg')
    return {
      figure: { text: formatFigure(brixFromGravity(sg), 1), unit: '°Bx' },
      sentence: `Specific gravity ${formatFigure(sg, 3)}, at 20 °C.`,
      facts: [
        { label: 'As sugar', value: `${formatFigure(sugarGramsPerLitre(sg), 0)} g/L` },
        { label: 'Points', value: formatFigure((sg - 1) * 1000, 0) },
      ],
      notes: [
        'Juice solids are not all sugar: of a grape must at 12 °Bx about four fifths are.',
        'A refractometer reads wrong once there is alcohol. Use a hydrometer then.',
      ],
    }
  },
  how: {
    formula: [
      'SG = density of the sugar solution ÷ density of water, both at 20 °C.',
      'g/L = °Bx ÷ 100 × density.',
    ],
    source: 'ICUMSA SPS-4 sucrose density; Tanaka et al. 2001 for water.',
    range: '0.970 to 1.300, to 0.0001. Below 1.000 the °Bx is negative: apparent extract.',
  },
}

const water: Question = {
  id: 'water',
  moment: 'before',
  title: 'What clears the chlorine?',
  lead: 'A pinch of metabisulphite in tap water, before it meets the must.',
  asks: [
    { kind: 'number', key: 'volumeLitres', label: 'Water', quantity: 'volume', start: 5 },
    {
      kind: 'number',
      key: 'chlorineMgPerLitre',
      label: 'Chlorine in it',
      unit: 'mg/L',
      start: 1,
      hint: 'From the supplier’s report; 0.2–1 is usual.',
    },
    {
      kind: 'choice',
      key: 'salt',
      label: 'Metabisulphite of',
      options: [
        { value: 'potassium', label: 'Potassium' },
        { value: 'sodium', label: 'Sodium' },
      ],
      start: 'potassium',
    },
  ],
  answer(given, show) {
    const volumeLitres = given.number('volumeLitres')
    const dose = chlorineNeutraliser({
      volumeLitres,
      chlorineMgPerLitre: given.number('chlorineMgPerLitre'),
      salt: given.word('salt') as SulphiteSalt,
    })
    return {
      figure: { text: formatAmount(dose.milligrams), unit: 'mg' },
      sentence: `For ${show.volume(volumeLitres)}. Dissolve 1 g in 100 mL: it is then ${formatAmount(dose.milligrams / 10)} mL of that.`,
      notes: dose.reasons,
    }
  },
  how: {
    formula: [
      'Two molecules of chlorine to each of metabisulphite: 1.57 mg (potassium) or 1.34 mg (sodium) a mg.',
    ],
    source: 'Stoichiometry. Waterworks dose about a tenth more.',
    range: 'Up to 10 mg/L chlorine. The same for chloramine.',
  },
  cautions: [
    {
      caution: 'The dust and fumes can set off asthma.',
      why: 'Weigh it with the window open, and never add acid to it in a closed space.',
    },
  ],
}

export const BEFORE = [must, amount, convert, water]
