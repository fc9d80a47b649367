import { OutOfRange, type GravityReading } from '#shared/brewing/index'
import { formatFigure } from '#shared/units/figure'
import { fromGravity } from '#shared/units/gravity'
import { fromCelsius } from '#shared/units/temperature'
import { fromLitres } from '#shared/units/volume'
import type { Typed } from './bench-state.ts'
import type {
  Answer,
  Ask,
  Given,
  NumberAsk,
  Question,
  Show,
  TypedLine,
  TypedReading,
  Units,
} from './question.ts'

export interface Outcome {
  answer: Answer | undefined
  /** By key of the field; the empty key is for what belongs to none. */
  errors: Record<string, string>
  /** Labels of fields that still want something. */
  missing: string[]
}

export function showIn(units: Units): Show {
  const bx = units.gravity === 'bx'
  const brix = (sg: number) => formatFigure(fromGravity(clampSg(sg), 'bx'), 1)
  const degrees = (celsius: number) => formatFigure(fromCelsius(celsius, units.temperature), 0)
  return {
    gravity: (sg) => (bx ? `${brix(sg)} °Bx` : formatFigure(sg, 3)),
    gravityFigure: (sg) => (bx ? { text: brix(sg), unit: '°Bx' } : { text: formatFigure(sg, 3), unit: '' }),
    volume: (litres) =>
      units.volume === 'L'
        ? `${formatFigure(litres, 2)} L`
        : `${formatFigure(fromLitres(litres, 'gal'), 2)} gal`,
    temperature: (celsius) => `${degrees(celsius)} °${units.temperature}`,
    temperatures: (low, high) => `${degrees(low)}–${degrees(high)} °${units.temperature}`,
  }
}

const clampSg = (sg: number): number => Math.min(1.3, Math.max(0.97, sg))

export const unitWord = (ask: NumberAsk, units: Units): string | undefined => {
  switch (ask.quantity) {
    case 'gravity':
      return units.gravity === 'bx' ? '°Bx' : undefined
    case 'volume':
      return units.volume
    case 'temperature':
      return `°${units.temperature}`
    case undefined:
      return ask.unit
  }
}

/** Up to so many decimals, none of them an idle nought. */
const plain = (value: number): string => formatFigure(value, 4).replace(/\.?0+$/, '')

/** An end of a range as the field shows it. */
function limit(value: number, ask: NumberAsk, units: Units): string {
  switch (ask.quantity) {
    case 'gravity':
      return showIn(units).gravity(value)
    case 'volume':
      return plain(fromLitres(value, units.volume))
    case 'temperature':
      return formatFigure(fromCelsius(value, units.temperature), 0)
    case undefined:
      return plain(value * (ask.scale ?? 1))
  }
}

const sentence = (text: string): string => {
  const begun = text.charAt(0).toUpperCase() + text.slice(1)
  return /[.?!]$/.test(begun) ? begun : `${begun}.`
}

/** What to say beside the field about an argument that was refused. */
function refusal(error: OutOfRange, ask: Ask | undefined, units: Units): string {
  if (error.note !== undefined || ask?.kind !== 'number') return sentence(error.note ?? error.message)
  const unit = unitWord(ask, units)
  const after = unit === undefined || (ask.quantity === 'gravity' && units.gravity === 'bx') ? '' : ` ${unit}`
  const { low, high } = error
  if (low !== undefined && high !== undefined) {
    return `From ${limit(low, ask, units)} to ${limit(high, ask, units)}${after} is allowed.`
  }
  if (low !== undefined) return `At least ${limit(low, ask, units)}${after} is needed.`
  if (high !== undefined) return `At most ${limit(high, ask, units)}${after} is allowed.`
  return 'A number is needed.'
}

/** The field an argument was typed in: `readings[1].gravity` belongs to `readings`. */
function fieldOf(question: Question, argument: string): Ask | undefined {
  const root = argument.split(/[.[]/)[0]
  return (
    question.asks.find((ask) => ask.key === argument || ask.guards?.includes(argument)) ??
    question.asks.find((ask) => ask.key === root || ask.guards?.includes(root ?? ''))
  )
}

const wantsMore = (ask: Ask, value: Typed[string]): boolean => {
  switch (ask.kind) {
    case 'number':
      return value === undefined
    case 'day':
      return value === ''
    case 'lines':
      return !(value as TypedLine[]).some((line) => line.grams !== undefined)
    case 'readings':
    case 'choice':
      return false
  }
}

const badNumber = (value: Typed[string]): boolean =>
  Array.isArray(value)
    ? value.some((row) => Number.isNaN('grams' in row ? row.grams : row.gravity))
    : Number.isNaN(value)

function givenBy(typed: Typed, today: string): Given {
  return {
    number: (key) => typed[key] as number,
    maybe: (key) => typed[key] as number | undefined,
    word: (key) => typed[key] as string,
    day: (key) => (typed[key] as string | undefined) || undefined,
    lines: (key) =>
      (typed[key] as TypedLine[]).flatMap(({ ingredient, grams }) =>
        grams === undefined ? [] : { ingredient, grams },
      ),
    readings: (key) =>
      (typed[key] as TypedReading[]).flatMap(({ on, gravity }): GravityReading[] =>
        on === '' || gravity === undefined ? [] : [{ at: `${on}T12:00:00Z`, gravity }],
      ),
    today,
  }
}

/** Whether a field is shown: some depend on another. */
export const isAsked = ({ unless }: Ask, typed: Typed): boolean => !unless || typed[unless.key] !== unless.is

/** Answers a question from what was typed, or says beside which field it cannot. */
export function answerTo(question: Question, typed: Typed, units: Units, today: string): Outcome {
  const errors: Record<string, string> = {}
  const missing: string[] = []
  for (const ask of question.asks.filter((one) => isAsked(one, typed))) {
    const value = typed[ask.key]
    if (badNumber(value)) errors[ask.key] = 'That is no number. Use digits, with a comma or a point.'
    else if (!ask.optional && wantsMore(ask, value)) missing.push(ask.label)
  }
  if (Object.keys(errors).length > 0 || missing.length > 0) return { answer: undefined, errors, missing }
  try {
    return { answer: question.answer(givenBy(typed, today), showIn(units)), errors, missing }
  } catch (error) {
    if (!(error instanceof OutOfRange)) throw error
    const ask = fieldOf(question, error.argument)
    return { answer: undefined, errors: { [ask?.key ?? '']: refusal(error, ask, units) }, missing }
  }
}
