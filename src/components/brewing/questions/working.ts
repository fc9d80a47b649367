import {
  abv,
  airlockSign,
  attenuation,
  correctDryGravity,
  correctGravity,
  declaredStrength,
  dilute,
  fitFermentation,
  hydrometerOffset,
  roomCo2,
  SIXTY_FAHRENHEIT_C,
  type AbvMethod,
  type FermentStatus,
} from '#shared/brewing/index'
import { dayInWords } from '#shared/time/day-words'
import { parseDay } from '#shared/time/day'
import { formatAmount, formatFigure } from '#shared/units/figure'
import type { Answer, ChoiceAsk, Question } from '../question.ts'

const MARKED: ChoiceAsk = {
  kind: 'choice',
  key: 'marked',
  label: 'Marked for',
  options: [
    { value: '20', label: '20 °C' },
    { value: '15.56', label: '15.6 °C (60 °F)' },
  ],
  start: '20',
}
const markedC = (word: string): number => (word === '20' ? 20 : SIXTY_FAHRENHEIT_C)
const day = (text: string): string => {
  const parsed = parseDay(text)
  return parsed ? dayInWords(parsed, 'short') : text
}

const reading: Question = {
  id: 'reading',
  moment: 'working',
  title: 'What does the hydrometer mean?',
  lead: 'A reading put right for warmth and for the instrument.',
  asks: [
    { kind: 'number', key: 'reading', label: 'It shows', quantity: 'gravity', start: 1.05 },
    { kind: 'number', key: 'temperatureC', label: 'In a sample at', quantity: 'temperature', start: 25 },
    MARKED,
    {
      kind: 'number',
      key: 'offset',
      label: 'Its own offset',
      unit: 'points',
      scale: 1000,
      optional: true,
      hint: 'What to add to every reading: −2 if it shows 1.002 in water.',
    },
    {
      kind: 'number',
      key: 'abvPercent',
      label: 'If it is dry, its strength',
      unit: '%',
      optional: true,
      hint: 'A dry drink expands with its alcohol.',
    },
  ],
  answer(given, show) {
    const raw = given.number('reading')
    const offset = (given.maybe('offset') ?? 0) / 1000
    const temperatureC = given.number('temperatureC')
    const calibrationTemperatureC = markedC(given.word('marked'))
    const abvPercent = given.maybe('abvPercent')
    const corrected =
      abvPercent === undefined
        ? correctGravity({ reading: raw, temperatureC, calibrationTemperatureC, offset })
        : correctDryGravity({ reading: raw + offset, temperatureC, abvPercent, calibrationTemperatureC })
    const added = (corrected - raw) * 1000
    const small = Math.abs(added) < 0.05
    return {
      figure: show.gravityFigure(corrected),
      sentence: small
        ? 'It needs no correction.'
        : `${added > 0 ? 'Add' : 'Take off'} ${formatFigure(Math.abs(added), 1)} points.`,
      facts: [{ label: 'Trust it to', value: '1–2 points' }],
      notes: ['Bubbles on the stem lift it by several points: swirl the gas out first.'],
    }
  },
  how: {
    formula: [
      'Density of the sample = reading × density of water at the mark ÷ (1 + 0.000025 × (T − mark)): the glass grows too.',
      'The sugar solution of that density at T is found, and weighed again at the mark.',
    ],
    source: 'ICUMSA SPS-4 sucrose, Tanaka et al. 2001 water, ISO 1768 glass; OIML R 22 for dry drinks.',
    range: '0.980 to 1.160 and 5 to 40 °C.',
  },
}

const offset: Question = {
  id: 'offset',
  moment: 'working',
  title: 'Is my hydrometer true?',
  lead: 'Float it in plain water and see what it shows.',
  asks: [
    { kind: 'number', key: 'waterReading', label: 'In water it shows', quantity: 'gravity', start: 1.002 },
    { kind: 'number', key: 'waterTemperatureC', label: 'Water at', quantity: 'temperature', start: 20 },
    MARKED,
  ],
  answer(given) {
    const found = hydrometerOffset({
      waterReading: given.number('waterReading'),
      waterTemperatureC: given.number('waterTemperatureC'),
      calibrationTemperatureC: markedC(given.word('marked')),
    })
    const points = found * 1000
    if (Math.abs(points) < 0.5) {
      return {
        word: { text: 'True', icon: 'pass', tone: 'sound' },
        sentence: 'It is within half a point. Read it as it stands.',
      }
    }
    return {
      figure: { text: (points > 0 ? '+' : '') + formatFigure(points, 1), unit: 'points' },
      sentence: `${points > 0 ? 'Add' : 'Take off'} ${formatFigure(Math.abs(points), 1)} points at every reading of it.`,
      notes: ['Keep it with the instrument: a steward can put it on its page.'],
    }
  },
  how: {
    formula: [
      'Offset = density of water at T × (1 + 0.000025 × (T − mark)) ÷ density of water at the mark − reading.',
    ],
    source: 'Tanaka et al. 2001 water, ISO 1768 glass.',
    range: '0.980 to 1.020 in clean water of 5 to 40 °C.',
  },
}

const strength: Question = {
  id: 'strength',
  moment: 'working',
  title: 'How strong is it?',
  lead: 'Alcohol from the gravity it fell through.',
  asks: [
    { kind: 'number', key: 'og', label: 'Gravity at the start', quantity: 'gravity', start: 1.066 },
    { kind: 'number', key: 'fg', label: 'Gravity now', quantity: 'gravity', start: 0.998 },
    {
      kind: 'choice',
      key: 'method',
      label: 'Worked out by',
      options: [
        { value: 'mixture', label: 'Density' },
        { value: 'balling', label: 'Balling' },
        { value: 'duty-table', label: 'Duty table' },
        { value: 'linear', label: '× 131.25' },
      ],
      start: 'mixture',
    },
  ],
  answer(given) {
    const [og, fg] = [given.number('og'), given.number('fg')]
    const result = abv({ og, fg, method: given.word('method') as AbvMethod })
    const gone = og > 1.001 ? attenuation({ og, fg }) : undefined
    return {
      figure: { text: formatFigure(result.percent, 1), unit: '%' },
      sentence: `About that: from ${formatFigure(result.low, 1)} to ${formatFigure(result.high, 1)} % by volume.`,
      facts: [
        ...(result.method === 'duty-table'
          ? [
              {
                label: 'As declared for duty',
                value: `${formatFigure(declaredStrength(result.percent), 1)} %`,
              },
            ]
          : []),
        ...(gone
          ? [
              {
                label: 'Sugar gone, as it reads (alcohol flatters it)',
                value: `${formatFigure(100 * gone.apparent, 0)} %`,
              },
              { label: 'Really gone', value: `${formatFigure(100 * gone.real, 0)} %` },
            ]
          : []),
      ],
      notes: [
        ...(result.extrapolated
          ? ['The duty table ends at a fall of 100.7 points. This is carried on past its end.']
          : []),
        'Holds only where nothing was added in between. After topping up, ask what that changed.',
      ],
    }
  },
  how: {
    formula: [
      'Density: the ethanol, water and sugar that together weigh what the hydrometer shows; 2.0665 g of sugar make 1 g of alcohol.',
      'Balling: (OE − RE) ÷ (2.0665 − 0.010665 OE), with RE = 0.1808 OE + 0.8192 AE.',
      'Duty table: points fallen × 0.125 to 0.135. × 131.25: a kitchen rule, 0.3 % short at 1.100.',
    ],
    source:
      'OIML R 22, ICUMSA, Nielsen et al. (Balling), HMRC Notice 226 (withdrawn 2025). The kitchen rule from memory.',
    range: 'OG to 1.200. The band holds what no method knows (±0.2 %) and two readings each off by a point.',
  },
  cautions: [
    {
      caution: 'Home-made drink is not for sale.',
      why: 'In most places selling it, swapping it or raffling it takes a licence, and so does making it stronger by freezing. Check the law where you are.',
    },
  ],
}

const STATUS_WORDS: Record<FermentStatus, NonNullable<Answer['word']>> = {
  lag: { text: 'Waking', icon: 'wait', tone: 'quiet' },
  active: { text: 'Working', icon: 'falling', tone: 'barm' },
  slowing: { text: 'Slowing', icon: 'falling', tone: 'barm' },
  finished: { text: 'Finished', icon: 'pass', tone: 'sound' },
  stuck: { text: 'Stuck', icon: 'hold', tone: 'fault' },
  unknown: { text: 'Too early', icon: 'wait', tone: 'quiet' },
}

const finish: Question = {
  id: 'finish',
  moment: 'working',
  title: 'When will it be done?',
  lead: 'From three readings or more.',
  asks: [
    { kind: 'number', key: 'og', label: 'Gravity at the start', quantity: 'gravity', start: 1.08 },
    { kind: 'number', key: 'expectedFg', label: 'Expected at the end', quantity: 'gravity', start: 1 },
    { kind: 'readings', key: 'readings', label: 'Readings' },
    { kind: 'day', key: 'on', label: 'Asked on', start: 'today' },
  ],
  answer(given, show) {
    const forecast = fitFermentation({
      readings: given.readings('readings'),
      og: given.number('og'),
      expectedFg: given.number('expectedFg'),
      on: given.day('on') ?? given.today,
    })
    const { finishOn, status } = forecast
    const word = STATUS_WORDS[status]
    const working = status === 'active' || status === 'slowing'
    return {
      word: working && finishOn ? { ...word, text: day(finishOn.likely) } : word,
      sentence:
        finishOn && working
          ? `Likely done then: from ${day(finishOn.early)} to ${day(finishOn.late)}.`
          : (forecast.reasons[0] ?? ''),
      facts: [
        {
          label: status === 'stuck' ? 'It stands at' : 'It should end at',
          value: show.gravity(forecast.finalGravity),
        },
        {
          label: 'Readings lie off the curve by',
          value: `${formatFigure(forecast.residual * 1000, 1)} points`,
        },
      ],
      notes: working && finishOn ? forecast.reasons : [],
    }
  },
  how: {
    formula: [
      'Two curves are fitted to the readings, a logistic and a Gompertz: each a fall, a rate and a delay.',
      'Done means within a point of its end. The band is where four in five such ferments end.',
    ],
    source: 'Speers, Rogers and Smith 2003 (logistic); Gompertz and usual rates from memory.',
    range: 'Three readings over a day or more. It says nothing rather than guess from less.',
  },
  cautions: [
    {
      caution: 'Never seal a vessel that still works.',
      why: 'A demijohn is thinner than it looks: keep an airlock on it until it has stopped by the hydrometer.',
    },
  ],
}

const bubbles: Question = {
  id: 'bubbles',
  moment: 'working',
  title: 'What do the bubbles say?',
  lead: 'Little, but this much.',
  asks: [
    { kind: 'number', key: 'bubblesPerMinute', label: 'Bubbles a minute', start: 1 },
    { kind: 'number', key: 'volumeLitres', label: 'Batch', quantity: 'volume', start: 4.5 },
  ],
  answer(given) {
    const sign = airlockSign({
      bubblesPerMinute: given.number('bubblesPerMinute'),
      volumeLitres: given.number('volumeLitres'),
    })
    const working = sign.sign === 'still-working'
    return {
      word: working
        ? { text: 'Still working', icon: 'falling', tone: 'barm' }
        : { text: 'Rack and clear', icon: 'rack', tone: 'sound' },
      sentence: `That is about ${formatFigure(sign.pointsPerDay, 1)} points a day.`,
      facts:
        sign.daysToOneVolume === undefined
          ? []
          : [
              {
                label: 'In a shut bottle, one volume of gas in',
                value: `${formatAmount(sign.daysToOneVolume)} days`,
              },
            ],
      notes: sign.reasons,
    }
  },
  how: {
    formula: ['Bubbles × 0.5 mL × 1440 minutes, as CO2 by weight, ÷ 0.985 g/L a point.'],
    source: 'Ideal gas at 20 °C. The one-a-minute rule is common practice.',
    range: 'A bubble is 0.3 to 1 mL, so the answer is good to a factor of two.',
  },
  cautions: [
    {
      caution: 'Never bottle by bubbles.',
      why: 'They stop when a bung leaks, and one a minute fills a bottle within days.',
    },
  ],
}

const topUp: Question = {
  id: 'top-up',
  moment: 'working',
  title: 'What does topping up change?',
  lead: 'Gravity and strength after water, juice or another drink goes in.',
  asks: [
    { kind: 'number', key: 'volumeLitres', label: 'There is', quantity: 'volume', start: 4.3 },
    { kind: 'number', key: 'sg', label: 'at', quantity: 'gravity', start: 1.01 },
    { kind: 'number', key: 'abvPercent', label: 'Its strength', unit: '%', start: 9 },
    { kind: 'number', key: 'addLitres', label: 'Goes in', quantity: 'volume', start: 0.25 },
    { kind: 'number', key: 'addSg', label: 'Gravity of that', quantity: 'gravity', start: 1 },
    { kind: 'number', key: 'addAbvPercent', label: 'Strength of that', unit: '%', start: 0 },
  ],
  answer(given, show) {
    const after = dilute({
      volumeLitres: given.number('volumeLitres'),
      sg: given.number('sg'),
      abvPercent: given.number('abvPercent'),
      addLitres: given.number('addLitres'),
      addSg: given.number('addSg'),
      addAbvPercent: given.number('addAbvPercent'),
    })
    return {
      figure: { text: formatFigure(after.abvPercent, 1), unit: '%' },
      sentence: `${show.volume(after.volumeLitres)} at ${show.gravity(after.sg)}.`,
      notes: ['From here on, count strength from this mix, not from the first gravity.'],
    }
  },
  how: {
    formula: ['Alcohol, mass and volume are added up; volumes shrink by under 0.3 % and that is left out.'],
    source: 'Balance of mass and of alcohol.',
    range: 'Up to 25 % and 1.200.',
  },
}

const room: Question = {
  id: 'room',
  moment: 'working',
  title: 'Is the air safe in there?',
  lead: 'CO2 where many batches work at once.',
  asks: [
    { kind: 'number', key: 'batches', label: '5 L batches at their peak', start: 8 },
    { kind: 'number', key: 'roomM3', label: 'Room', unit: 'm³', start: 30 },
    {
      kind: 'number',
      key: 'airChangesPerHour',
      label: 'Air changes an hour',
      start: 0.5,
      hint: '0.5 with doors shut, 3 or more with a window open.',
    },
  ],
  answer(given) {
    const air = roomCo2({
      batches: given.number('batches'),
      roomM3: given.number('roomM3'),
      airChangesPerHour: given.number('airChangesPerHour'),
    })
    const words = {
      fine: { text: 'Fine', icon: 'pass', tone: 'sound' },
      'open-a-window': { text: 'Open a window', icon: 'caution', tone: 'warn' },
      'keep-out': { text: 'Keep out', icon: 'hold', tone: 'fault' },
    } as const
    return {
      word: words[air.verdict],
      sentence: `It settles near ${formatAmount(air.ppm)} ppm: ${formatFigure(100 * air.shareOfLimit, 0)} % of the limit for a working day.`,
      notes: air.reasons,
    }
  },
  how: {
    formula: [
      'ppm = 420 outside + CO2 given off ÷ (room × air changes). A peak batch gives about 55 L a day.',
    ],
    source: 'Well-mixed balance; limits of EH40: 5,000 ppm over 8 h, 15,000 over 15 min.',
    range: 'A cellar pools it near the floor: there it is more than this.',
  },
  cautions: [
    {
      caution: 'If it smells sharp or you feel breathless, leave and open up.',
      why: 'CO2 gives little warning, and it lies deepest where you bend down.',
    },
  ],
}

export const WORKING = [reading, offset, strength, finish, bubbles, topUp, room]
