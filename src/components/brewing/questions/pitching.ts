import {
  nitrogenPlan,
  packetViability,
  pitchAdvice,
  type DrinkUse,
  type NitrogenDemand,
  type Storage,
  type YeastForm,
} from '#shared/brewing/index'
import { formatAmount, formatFigure } from '#shared/units/figure'
import type { Answer, ChoiceAsk, Question } from '../question.ts'
import { STATES } from '@/components/base/states'

const FORM: ChoiceAsk = {
  kind: 'choice',
  key: 'form',
  label: 'Yeast',
  options: [
    { value: 'dry', label: 'Dry' },
    { value: 'liquid', label: 'Liquid' },
    { value: 'slurry', label: 'Slurry' },
  ],
  start: 'dry',
}

const verdictWord = (estimate: number): NonNullable<Answer['word']> => {
  const { verdict } = pitchAdvice({
    form: 'dry',
    viability: estimate,
    volumeLitres: 5,
    og: 1.05,
    use: 'wine',
  })
  const { word, icon, tone } = STATES[`yeast-${verdict}`]
  return { text: word, icon, tone }
}

const packet: Question = {
  id: 'packet',
  moment: 'pitching',
  title: 'Is this packet still alive?',
  lead: 'From its age and how it was kept.',
  asks: [
    FORM,
    { kind: 'day', key: 'bestBefore', label: 'Best before', start: 'today', guards: ['madeOn'] },
    { kind: 'day', key: 'openedOn', label: 'Opened on', optional: true },
    {
      kind: 'choice',
      key: 'storage',
      label: 'Kept',
      options: [
        { value: 'freezer', label: 'Freezer' },
        { value: 'fridge', label: 'Fridge' },
        { value: 'shelf', label: 'Shelf' },
      ],
      start: 'fridge',
    },
    { kind: 'day', key: 'on', label: 'Pitched on', start: 'today' },
  ],
  answer(given) {
    const packetNow = packetViability({
      form: given.word('form') as YeastForm,
      bestBefore: given.day('bestBefore'),
      openedOn: given.day('openedOn'),
      storage: given.word('storage') as Storage,
      on: given.day('on') ?? given.today,
    })
    const percent = (share: number): string => formatFigure(100 * share, 0)
    return {
      word: verdictWord(packetNow.estimate),
      sentence: `About ${percent(packetNow.estimate)} % of it is likely alive, somewhere from ${percent(packetNow.low)} to ${percent(packetNow.high)} %.`,
      facts: packetNow.factors.map((factor) => ({
        label: factor.text,
        value: { lowers: 'lowers it', raises: 'raises it', little: 'changes little' }[factor.effect],
      })),
      notes: [
        'Packets in the fridge list learn from what happened to others of their lot. This one does not.',
      ],
    }
  },
  how: {
    formula: [
      'Alive = exp(−rate × years); the rate at 20 °C is 0.22 a year and falls with cold (60 kJ/mol).',
      'An open packet loses ten times as fast. Liquid yeast loses 22.5 % a month at 4 °C.',
    ],
    source: 'A default chosen between weak sources; open and liquid rates from memory.',
    range:
      '−20 to 30 °C. Warmer than that it dies far faster than any formula. Lots differ: hence the wide band.',
  },
}

const dose: Question = {
  id: 'dose',
  moment: 'pitching',
  title: 'How much yeast?',
  lead: 'A dose with a range, for the part of it that is alive.',
  asks: [
    FORM,
    {
      kind: 'number',
      key: 'alive',
      label: 'Share alive',
      unit: '%',
      scale: 100,
      start: 90,
      guards: ['viability'],
    },
    {
      kind: 'choice',
      key: 'use',
      label: 'For',
      options: [
        { value: 'mead', label: 'Mead' },
        { value: 'cider', label: 'Cider' },
        { value: 'wine', label: 'Wine' },
        { value: 'ale', label: 'Ale' },
        { value: 'lager', label: 'Lager' },
      ],
      start: 'mead',
    },
    { kind: 'number', key: 'volumeLitres', label: 'Batch', quantity: 'volume', start: 4.5 },
    { kind: 'number', key: 'og', label: 'Gravity', quantity: 'gravity', start: 1.08 },
    { kind: 'number', key: 'availableGrams', label: 'You have', unit: 'g', optional: true },
  ],
  answer(given, show) {
    const advice = pitchAdvice({
      form: given.word('form') as YeastForm,
      viability: given.number('alive') / 100,
      use: given.word('use') as DrinkUse,
      volumeLitres: given.number('volumeLitres'),
      og: given.number('og'),
      availableGrams: given.maybe('availableGrams'),
    })
    const hours = (value: number): string => formatFigure(value, 0)
    const { rehydration } = advice
    return {
      figure: { text: formatAmount(advice.grams), unit: 'g' },
      sentence: `${formatAmount(advice.low)} to ${formatAmount(advice.high)} g would do.`,
      acts: rehydration && [
        {
          act: `Warm ${formatAmount(Math.max(20, rehydration.waterMl))} mL of water`,
          more: `to ${show.temperatures(rehydration.temperatureC.low, rehydration.temperatureC.high)}. Tap, not distilled.`,
        },
        { act: 'Sprinkle, wait 20 minutes.', more: 'Then swirl.' },
        { act: 'Cool it to within 10 °C', more: 'of the must before you pitch.' },
      ],
      notes: [
        `First bubbles in ${hours(advice.activityHours.early)} to ${hours(advice.activityHours.late)} hours. If nothing by ${hours(advice.worryAfterHours)} hours, pitch again.`,
        ...advice.reasons.slice(1),
      ],
    }
  },
  how: {
    formula: [
      'Grams = cells wanted × volume ÷ (cells a gram × share alive).',
      'Wine, mead, cider: 5 million living cells/mL (2 to 10), up to double in a rich must. Beer: 0.75 million/mL for each °Bx.',
      'Hours = 4 + ln(10 million ÷ living cells) ÷ 0.20 an hour.',
    ],
    source: 'AWRI guide for wine; beer rule, 10 billion cells a gram and lag constants from memory.',
    range: 'A range of practice, not a limit: half of it has made good drink, and so has double.',
  },
}

const food: Question = {
  id: 'food',
  moment: 'pitching',
  title: 'How much yeast food?',
  lead: 'Diammonium phosphate (DAP) for a must that lacks nitrogen, in feeds.',
  asks: [
    { kind: 'number', key: 'og', label: 'Gravity', quantity: 'gravity', start: 1.09 },
    { kind: 'number', key: 'volumeLitres', label: 'Batch', quantity: 'volume', start: 4.5 },
    {
      kind: 'number',
      key: 'supplyMgPerLitre',
      label: 'Nitrogen in the must',
      unit: 'mg/L',
      start: 30,
      hint: 'Honey under 50; apple juice about 60, from 9 to 249.',
    },
    {
      kind: 'choice',
      key: 'demand',
      label: 'The strain wants',
      options: [
        { value: 'low', label: 'Little' },
        { value: 'medium', label: 'Medium' },
        { value: 'high', label: 'Much' },
      ],
      start: 'medium',
    },
  ],
  answer(given) {
    const plan = nitrogenPlan({
      og: given.number('og'),
      volumeLitres: given.number('volumeLitres'),
      supplyMgPerLitre: given.number('supplyMgPerLitre'),
      demand: given.word('demand') as NitrogenDemand,
    })
    const enough = plan.grams === 0
    return {
      ...(enough
        ? { word: { text: 'None', icon: 'pass', tone: 'sound' } as const }
        : { figure: { text: formatAmount(plan.grams), unit: 'g DAP' } }),
      sentence: `It wants about ${formatFigure(plan.targetMgPerLitre, 0)} mg/L and lacks ${formatFigure(plan.shortfallMgPerLitre, 0)}.`,
      acts: plan.feeds.map((feed) => ({ act: `${formatAmount(feed.grams)} g`, more: feed.when })),
      facts: [
        {
          label: 'Most that is allowed (EU, 1 g/L)',
          value: `${formatAmount(plan.ceilingGrams)} g`,
        },
      ],
      notes: plan.warnings,
    }
  },
  how: {
    formula: [
      'Wanted = 0.75, 0.90 or 1.25 mg N for each gram of sugar.',
      'DAP = what is lacking ÷ 0.212, never over 1 g/L, in one to three feeds before a third of the sugar is gone.',
    ],
    source: 'Needs from memory; DAP from atomic masses; ceiling EU Regulation 606/2009 Annex I A.',
    range: 'Up to 1.200. A honey must also lacks potassium and vitamins, which DAP does not bring.',
  },
}

export const PITCHING = [packet, dose, food]
