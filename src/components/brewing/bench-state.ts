import { parseFigure } from '#shared/units/figure'
import type { Ask, Question, TypedLine, TypedReading, Units } from './question.ts'

/** What stands in each field: numbers in SG, litres and °C; NaN for what is no number. */
export type Typed = Record<string, number | string | TypedLine[] | TypedReading[] | undefined>

export const PLAIN_UNITS: Units = { gravity: 'sg', volume: 'L', temperature: 'C' }

type Query = Record<string, string | undefined>

const linesOf = (text: string): TypedLine[] =>
  text
    .split('~')
    .filter((part) => part !== '')
    .map((part) => {
      const [ingredient = '', grams = ''] = part.split(':')
      return { ingredient, grams: parseFigure(grams) }
    })

const readingsOf = (text: string): TypedReading[] =>
  text
    .split('~')
    .filter((part) => part !== '')
    .map((part) => {
      const [on = '', gravity = ''] = part.split(':')
      return { on, gravity: parseFigure(gravity) }
    })

const numberText = (value: number | undefined): string =>
  value === undefined || Number.isNaN(value) ? '' : String(Number(value.toPrecision(7)))

/** A field as the question starts, or as an address says. */
function startOf(ask: Ask, text: string | undefined, today: string): Typed[string] {
  switch (ask.kind) {
    case 'number':
      return text === undefined ? ask.start : parseFigure(text)
    case 'choice':
      return ask.options.some((option) => option.value === text) ? text : ask.start
    case 'day':
      return text ?? (ask.start === 'today' ? today : '')
    case 'lines':
      return linesOf(text ?? ask.start)
    case 'readings':
      return readingsOf(text ?? '')
  }
}

function textOf(ask: Ask, value: Typed[string]): string {
  switch (ask.kind) {
    case 'number':
      return numberText(value as number | undefined)
    case 'choice':
    case 'day':
      return typeof value === 'string' ? value : ''
    case 'lines':
      return (value as TypedLine[]).map((line) => `${line.ingredient}:${numberText(line.grams)}`).join('~')
    case 'readings':
      return (value as TypedReading[]).map((one) => `${one.on}:${numberText(one.gravity)}`).join('~')
  }
}

/** The fields of a question as an address gives them; what it leaves out stands as the question starts. */
export const typedFrom = (question: Question, query: Query, today: string): Typed =>
  Object.fromEntries(question.asks.map((ask) => [ask.key, startOf(ask, query[ask.key], today)]))

export function unitsFrom(query: Query): Units {
  return {
    gravity: query.gravity === 'bx' ? 'bx' : 'sg',
    volume: query.volume === 'gal' ? 'gal' : 'L',
    temperature: query.temperature === 'F' ? 'F' : 'C',
  }
}

/** The address of a question with what was filled in: opened elsewhere it shows the same. */
export function queryOf(question: Question, typed: Typed, units: Units): Record<string, string> {
  const query: Record<string, string> = { ask: question.id }
  for (const ask of question.asks) {
    const text = textOf(ask, typed[ask.key])
    // An optional field that is empty says nothing; any other is written, so that a link outlives new defaults.
    if (text !== '' || !ask.optional) query[ask.key] = text
  }
  if (units.gravity !== PLAIN_UNITS.gravity) query.gravity = units.gravity
  if (units.volume !== PLAIN_UNITS.volume) query.volume = units.volume
  if (units.temperature !== PLAIN_UNITS.temperature) query.temperature = units.temperature
  return query
}

/** Which quantities a question speaks of, so that only their units are offered. */
export function quantitiesOf(question: Question): (keyof Units)[] {
  const named = question.asks.flatMap((ask) => {
    if (ask.kind === 'number' && ask.quantity) return [ask.quantity]
    return ask.kind === 'readings' ? (['gravity'] as const) : []
  })
  return (['gravity', 'volume', 'temperature'] as const).filter((quantity) => named.includes(quantity))
}
