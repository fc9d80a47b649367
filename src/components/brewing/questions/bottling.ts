import {
  bottleCount,
  bottlePressureBar,
  bottlingGate,
  molecularSo2,
  primingGrams,
  sulphite,
  tabletsPerBottle,
  type Bottle,
  type Primer,
  type SulphiteSalt,
} from '#shared/brewing/index'
import { dayInWords } from '#shared/time/day-words'
import { parseDay } from '#shared/time/day'
import { formatAmount, formatFigure } from '#shared/units/figure'
import type { ChoiceAsk, NumberAsk, Question } from '../question.ts'

const PRIMER_OPTIONS = [
  { value: 'sucrose', label: 'White sugar' },
  { value: 'glucose-monohydrate', label: 'Brewing sugar' },
  { value: 'glucose', label: 'Glucose, dry' },
  { value: 'dried-malt', label: 'Dried malt' },
  { value: 'honey', label: 'Honey' },
] as const

const WARMEST: NumberAsk = {
  kind: 'number',
  key: 'temperatureC',
  label: 'Warmest since it finished',
  quantity: 'temperature',
  start: 20,
  hint: 'Not today’s: gas lost when warm does not come back.',
}
const VOLUMES: NumberAsk = {
  kind: 'number',
  key: 'targetVolumes',
  label: 'Fizz wanted',
  unit: 'volumes',
  start: 2.4,
  hint: '2.0 soft, 2.5 lively, 3 and more for strong bottles only.',
}
const BOTTLE: ChoiceAsk = {
  kind: 'choice',
  key: 'bottle',
  label: 'Into',
  options: [
    { value: 'beer', label: 'Beer bottles' },
    { value: 'pet', label: 'PET' },
    { value: 'sparkling', label: 'Sparkling' },
    { value: 'still-wine', label: 'Still wine' },
    { value: 'swing-top', label: 'Swing-top' },
  ],
  start: 'beer',
  long: true,
}
const GOGGLES = {
  caution: 'Wear goggles when you move bottles that may still be working.',
  why: 'A burst bottle throws glass. Keep them in a box with a lid, and chill one before you open it.',
}

/** What is said when none of these blocks stands. */
const PASSES = [
  {
    codes: ['too-few-readings', 'not-long-enough', 'still-falling', 'readings-disagree', 'cold-rest'],
    fact: 'No more than a point of change over a week.',
  },
  { codes: ['above-expected', 'below-floor', 'too-few-readings'], fact: 'It stands where it should end.' },
  { codes: ['pressure'], fact: 'The bottle bears the worst case.' },
] as const

const gate: Question = {
  id: 'gate',
  moment: 'bottling',
  title: 'Can I bottle it?',
  lead: 'By the hydrometer, never by bubbles.',
  asks: [
    { kind: 'readings', key: 'readings', label: 'Readings, corrected' },
    { kind: 'number', key: 'expectedFg', label: 'Expected at the end', quantity: 'gravity', start: 1 },
    { kind: 'number', key: 'og', label: 'Gravity at the start', quantity: 'gravity', optional: true },
    BOTTLE,
    {
      kind: 'choice',
      key: 'primer',
      label: 'Primed with',
      options: [{ value: 'none', label: 'Nothing' }, ...PRIMER_OPTIONS],
      start: 'none',
      long: true,
      guards: ['primer.kind'],
    },
    {
      kind: 'number',
      key: 'gramsPerLitre',
      label: 'Priming',
      unit: 'g/L',
      start: 6,
      guards: ['primer.gramsPerLitre'],
      unless: { key: 'primer', is: 'none' },
    },
    { ...WARMEST, key: 'warmestC' },
    { kind: 'day', key: 'on', label: 'On', start: 'today' },
  ],
  answer(given) {
    const kind = given.word('primer')
    const result = bottlingGate({
      readings: given.readings('readings'),
      expectedFg: given.number('expectedFg'),
      og: given.maybe('og'),
      bottle: given.word('bottle') as Bottle,
      primer:
        kind === 'none'
          ? { kind: 'none' }
          : { kind: kind as Primer, gramsPerLitre: given.number('gramsPerLitre') },
      warmestC: given.number('warmestC'),
      on: given.day('on') ?? given.today,
    })
    const earliest = result.earliestOn === undefined ? undefined : parseDay(result.earliestOn)
    const held = (code: string): boolean => result.blocks.some((block) => block.code === code)
    return {
      word: result.ready
        ? { text: 'Ready', icon: 'pass', tone: 'sound' }
        : { text: 'Not yet', icon: 'hold', tone: 'fault' },
      sentence: `At worst ${formatFigure(result.worstCaseVolumes, 1)} volumes: ${formatFigure(result.worstCaseBarAt30C, 1)} bar in a warm store.`,
      checks: [
        ...result.blocks.map((block) => ({ passed: false, fact: `${block.fact}.`, why: block.why })),
        ...PASSES.filter(({ codes }) => !codes.some(held)).map(({ fact }) => ({ passed: true, fact })),
      ],
      facts: earliest
        ? [{ label: 'Earliest the readings can be enough', value: dayInWords(earliest, 'short') }]
        : [],
      notes: result.cautions,
    }
  },
  how: {
    formula: [
      'Stopped: no more than 1 point in at least 7 days, within 3 points of what was expected.',
      'Worst case = gas left in it + gas of the priming sugar + half a volume for every point still to ferment, at 30 °C.',
      'Limits: beer glass 2.5 volumes, PET 3, sparkling 4.5; still-wine and swing-top glass take no fizz at all.',
    ],
    source: 'Weiss 1974, Balling’s yield. The limits are judgement: used glass has no known strength.',
    range: 'Readings corrected for warmth and instrument.',
  },
  cautions: [GOGGLES],
}

const priming: Question = {
  id: 'priming',
  moment: 'bottling',
  title: 'How much sugar to prime?',
  lead: 'For the whole batch, once it has finished.',
  asks: [
    { kind: 'number', key: 'volumeLitres', label: 'To bottle', quantity: 'volume', start: 4.5 },
    VOLUMES,
    WARMEST,
    { kind: 'choice', key: 'primer', label: 'With', options: PRIMER_OPTIONS, start: 'sucrose', long: true },
  ],
  answer(given, show) {
    const dose = primingGrams({
      volumeLitres: given.number('volumeLitres'),
      targetVolumes: given.number('targetVolumes'),
      temperatureC: given.number('temperatureC'),
      primer: given.word('primer') as Primer,
    })
    const bar = (celsius: number): string =>
      formatFigure(bottlePressureBar({ co2Volumes: given.number('targetVolumes'), temperatureC: celsius }), 1)
    return {
      figure: { text: formatAmount(dose.grams), unit: 'g' },
      sentence: `${formatAmount(dose.gramsPerLitre)} g a litre. It still holds ${formatFigure(dose.residualVolumes, 2)} volumes.`,
      facts: [
        { label: `Pressure at ${show.temperature(20)}`, value: `${bar(20)} bar` },
        { label: `Pressure at ${show.temperature(30)}`, value: `${bar(30)} bar` },
      ],
      notes: [...dose.reasons, 'Keep the bottles warm for about two weeks, then cool.'],
    }
  },
  how: {
    formula: [
      'Grams = litres × (volumes wanted − volumes left) × 1.977 ÷ yield; white sugar yields 0.514 g CO2 a gram.',
    ],
    source: 'Weiss 1974 and stoichiometry. Malt and honey from memory.',
    range: 'Only where nothing is left to ferment: each point more adds half a volume.',
  },
  cautions: [
    GOGGLES,
    {
      caution: 'Prime only what has passed the bottling gate.',
      why: 'Sugar still in it ferments too, on top of this.',
    },
  ],
}

const tablets: Question = {
  id: 'tablets',
  moment: 'bottling',
  title: 'How many tablets a bottle?',
  lead: 'Whole sugar tablets, and what they really give.',
  asks: [
    { kind: 'number', key: 'bottleMl', label: 'Bottle', unit: 'mL', start: 750 },
    {
      kind: 'number',
      key: 'tabletGrams',
      label: 'One tablet',
      unit: 'g',
      start: 1.4,
      hint: 'From the pack.',
    },
    VOLUMES,
    WARMEST,
  ],
  answer(given) {
    const result = tabletsPerBottle({
      bottleMl: given.number('bottleMl'),
      tabletGrams: given.number('tabletGrams'),
      targetVolumes: given.number('targetVolumes'),
      temperatureC: given.number('temperatureC'),
    })
    return {
      figure: { text: String(result.count), unit: result.count === 1 ? 'tablet' : 'tablets' },
      sentence: `That gives ${formatFigure(result.volumes, 1)} volumes.`,
      notes: result.reasons,
    }
  },
  how: {
    formula: [
      'Sugar for one bottle ÷ weight of a tablet, to the nearest whole one; one fewer where that overshoots by 0.4 volumes.',
    ],
    source: 'As for priming. One to 250 mL is common practice.',
    range: 'Bottles of 100 mL to 5 L.',
  },
  cautions: [GOGGLES],
}

const pressure: Question = {
  id: 'pressure',
  moment: 'bottling',
  title: 'What pressure is in the bottle?',
  lead: 'From the gas in it and the warmth of the store.',
  asks: [
    { kind: 'number', key: 'co2Volumes', label: 'Gas in it', unit: 'volumes', start: 2.5 },
    { kind: 'number', key: 'temperatureC', label: 'Store at', quantity: 'temperature', start: 30 },
    { kind: 'number', key: 'pointsLeft', label: 'Points still to ferment', start: 0 },
  ],
  answer(given) {
    const left = Math.max(0, given.number('pointsLeft'))
    const volumes = given.number('co2Volumes') + (left * 0.985) / 1.9769
    const bar = bottlePressureBar({ co2Volumes: volumes, temperatureC: given.number('temperatureC') })
    return {
      figure: { text: formatFigure(bar, 1), unit: 'bar' },
      sentence: `With ${formatFigure(volumes, 1)} volumes in it. A car tyre holds about 2.`,
      notes: [
        'Sparkling-wine bottles are built for far more; used, scratched or still-wine glass has no known margin.',
      ],
    }
  },
  how: {
    formula: [
      'p = c ÷ 44.01 ÷ (K + h ÷ RT), less the air outside; K is the solubility, h the headspace (4 %).',
    ],
    source: 'Weiss 1974, ideal gas. Each point still to ferment is 0.985 g/L.',
    range: '0 to 40 °C. Trapped air adds up to 0.2 bar.',
  },
  cautions: [GOGGLES],
}

const bottles: Question = {
  id: 'bottles',
  moment: 'bottling',
  title: 'How many bottles?',
  lead: 'After what stays behind on the lees.',
  asks: [
    { kind: 'number', key: 'volumeLitres', label: 'In the vessel', quantity: 'volume', start: 4.5 },
    { kind: 'number', key: 'rackings', label: 'Times racked', start: 2 },
    {
      kind: 'number',
      key: 'loss',
      label: 'Left behind each time',
      unit: '%',
      scale: 100,
      start: 7,
      hint: '2–5 off firm lees, 5–10 off fruit.',
      guards: ['lossFraction'],
    },
    { kind: 'number', key: 'bottleMl', label: 'Bottle', unit: 'mL', start: 750 },
  ],
  answer(given, show) {
    const count = bottleCount({
      volumeLitres: given.number('volumeLitres'),
      rackings: given.number('rackings'),
      lossFraction: given.number('loss') / 100,
      bottleMl: given.number('bottleMl'),
    })
    return {
      figure: { text: String(count.bottles), unit: count.bottles === 1 ? 'bottle' : 'bottles' },
      sentence: `${show.volume(count.litres)} to bottle, and ${formatAmount(count.leftLitres * 1000)} mL over: a glass to taste.`,
    }
  },
  how: {
    formula: ['Litres × (1 − share left behind) for each racking, ÷ size of a bottle, whole ones only.'],
    source: 'Arithmetic; losses by common practice.',
    range: 'Up to 10 rackings.',
  },
}

const so2: Question = {
  id: 'sulphite',
  moment: 'bottling',
  title: 'How much sulphite?',
  lead: 'Metabisulphite for a dose of SO2.',
  asks: [
    { kind: 'number', key: 'volumeLitres', label: 'Batch', quantity: 'volume', start: 4.5 },
    { kind: 'number', key: 'mgPerLitre', label: 'SO2 to add', unit: 'mg/L', start: 50 },
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
    { kind: 'number', key: 'presentMgPerLitre', label: 'Already in it', unit: 'mg/L', start: 0 },
    { kind: 'number', key: 'ph', label: 'pH', optional: true },
  ],
  answer(given) {
    const dose = sulphite({
      volumeLitres: given.number('volumeLitres'),
      mgPerLitre: given.number('mgPerLitre'),
      salt: given.word('salt') as SulphiteSalt,
      presentMgPerLitre: given.number('presentMgPerLitre'),
    })
    const ph = given.maybe('ph')
    const active = ph === undefined ? undefined : molecularSo2({ freeMgPerLitre: dose.mgPerLitre, ph })
    return {
      figure: { text: formatAmount(dose.grams), unit: 'g' },
      sentence: `It adds ${formatFigure(dose.mgPerLitre, 0)} mg/L${dose.mustDeclare ? ', which has to stand on the label' : ''}.`,
      facts: active
        ? [
            {
              label: 'Of it at work, if none is bound',
              value: `${formatFigure(active.mgPerLitre, 2)} mg/L (0.8 keeps a drink)`,
            },
          ]
        : [],
      notes: dose.warnings,
    }
  },
  how: {
    formula: [
      'Grams = mg/L × litres ÷ 1000 ÷ 0.576 (potassium) or 0.674 (sodium).',
      'At work = free ÷ (1 + 10^(pH − 1.81)).',
    ],
    source: 'Stoichiometry; pKa and limits from memory.',
    range: 'Only the part that is not bound counts, and a young drink binds much.',
  },
  cautions: [
    {
      caution: 'The dust and fumes can set off asthma.',
      why: 'Open the window, keep your face away, and never add acid to it in a closed space. Sulphite is an allergen: name it.',
    },
  ],
}

export const BOTTLING = [gate, priming, tablets, pressure, bottles, so2]
