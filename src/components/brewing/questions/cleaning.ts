import {
  glassShock,
  sanitiserConditions,
  sanitiserDilution,
  type SanitiserAgent,
} from '#shared/brewing/index'
import { formatAmount, formatFigure } from '#shared/units/figure'
import type { Question } from '../question.ts'

const NEVER_MIX = {
  caution: 'Never mix cleaning agents.',
  why: 'Chlorine with acid gives off poison gas, and with ammonia, peroxide or sulphite it is little better. One agent a vessel, a rinse between. The label of the product goes before this page.',
}

const sanitiser: Question = {
  id: 'sanitiser',
  moment: 'cleaning',
  title: 'How much sanitiser?',
  lead: 'Stock into water, at a strength that food codes name.',
  asks: [
    {
      kind: 'choice',
      key: 'agent',
      label: 'Agent',
      options: [
        { value: 'iodophor', label: 'Iodophor' },
        { value: 'hypochlorite', label: 'Chlorine' },
      ],
      start: 'iodophor',
    },
    { kind: 'number', key: 'volumeLitres', label: 'Water', quantity: 'volume', start: 5 },
    {
      kind: 'number',
      key: 'stockPercent',
      label: 'Strength of the stock',
      unit: '%',
      start: 1.75,
      hint: 'From its label. Iodophor is often 1.75, bleach 5.',
    },
    {
      kind: 'number',
      key: 'targetMgPerLitre',
      label: 'Wanted',
      unit: 'mg/L',
      start: 12.5,
      hint: 'Iodophor 12.5–25. Chlorine 50–200.',
    },
  ],
  answer(given, show) {
    const agent = given.word('agent') as SanitiserAgent
    const target = given.number('targetMgPerLitre')
    const { millilitres } = sanitiserDilution({
      volumeLitres: given.number('volumeLitres'),
      stockPercent: given.number('stockPercent'),
      targetMgPerLitre: target,
    })
    const terms = sanitiserConditions(agent)
    const [low, high] = [terms.lowMgPerLitre ?? 0, terms.highMgPerLitre ?? Infinity]
    return {
      figure: { text: formatAmount(millilitres), unit: 'mL' },
      sentence: `Leave it wet for ${formatFigure(terms.contactSeconds / 60, 0)} minute at ${show.temperature(terms.lowestC)} or more.`,
      notes: [
        ...(target < low ? [`Under ${low} mg/L is too weak to count on.`] : []),
        ...(target > high ? [`Over ${high} mg/L it has to be rinsed off with clean water.`] : []),
        'Wash first: no sanitiser works through dirt.',
        ...(agent === 'hypochlorite'
          ? ['Rinse it off all the same: a trace of chlorine taints a drink.']
          : []),
      ],
    }
  },
  how: {
    formula: ['mL = litres × mg/L ÷ (10 × % of the stock).'],
    source: 'Food codes of Utah, California and New York (after the FDA Food Code).',
    range: 'A stock loses strength with age: go by its label and date.',
  },
  cautions: [
    NEVER_MIX,
    {
      caution: 'Goggles and gloves for lye, percarbonate and strong acid.',
      why: 'They burn skin and eyes. Add the chemical to water, never water to the chemical, and read its label first.',
    },
  ],
}

const glass: Question = {
  id: 'glass',
  moment: 'cleaning',
  title: 'Will the glass stand it?',
  lead: 'Hot liquid into a vessel, or cold onto hot glass.',
  asks: [
    { kind: 'number', key: 'liquidC', label: 'Liquid at', quantity: 'temperature', start: 60 },
    { kind: 'number', key: 'glassC', label: 'Glass at', quantity: 'temperature', start: 18 },
  ],
  answer(given) {
    const shock = glassShock({ liquidC: given.number('liquidC'), glassC: given.number('glassC') })
    const words = {
      fine: { text: 'It should', icon: 'pass', tone: 'sound' },
      'let-it-cool': { text: 'Let it cool', icon: 'caution', tone: 'warn' },
      'do-not-pour': { text: 'Don’t pour', icon: 'hold', tone: 'fault' },
    } as const
    return {
      word: words[shock.verdict],
      sentence: `The two are ${formatFigure(shock.differenceC, 0)} °C apart.`,
      notes: ['Thick demijohns bear less than thin bottles. Carry them in a crate, never by the ring.'],
    }
  },
  how: {
    formula: ['Difference under 30 °C: fine. From 40 °C ordinary glass is at risk.'],
    source: 'A test laboratory on ASTM C149 (soda-lime about 40 °C). The warning at 30 is judgement.',
    range: 'Sound glass. A scratch or a star crack halves it.',
  },
}

export const CLEANING = [sanitiser, glass]
