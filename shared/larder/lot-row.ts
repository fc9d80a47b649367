import { parseDay, type CalendarDay } from '../time/day.ts'
import { currencyDecimals } from '../units/money.ts'
import type { ImportRow } from './contract.ts'
import { COST_MAX_MINOR } from './contract.ts'
import { QUANTITY_MAX } from './quantity.ts'
import type { Unit } from './vocabulary.ts'

/** Columns an import reads; `ingredient` and `quantity` must be there. */
export const LOT_COLUMNS = [
  'ingredient',
  'quantity',
  'unit',
  'cost',
  'currency',
  'best_before',
  'opened_on',
  'shelf',
  'donor',
  'lot_code',
] as const
export type LotColumn = (typeof LOT_COLUMNS)[number]

export interface KnownIngredient {
  id: string
  name: string
  unit: Unit
}

interface Context {
  /** An ingredient by its name, however it is cased. */
  find: (name: string) => KnownIngredient | undefined
  currency: string
  today: CalendarDay
}

type Read<T> = { ok: true; value: T } | { ok: false; message: string }
const good = <T>(value: T): Read<T> => ({ ok: true, value })
const bad = (message: string): Read<never> => ({ ok: false, message })

/** What each unit a person may write is in thousandths of the larder's own. */
const WRITTEN_UNITS: Record<string, { unit: Unit; times: number }> = {
  g: { unit: 'g', times: 1 },
  gram: { unit: 'g', times: 1 },
  grams: { unit: 'g', times: 1 },
  kg: { unit: 'g', times: 1000 },
  ml: { unit: 'ml', times: 1 },
  cl: { unit: 'ml', times: 10 },
  l: { unit: 'ml', times: 1000 },
  litre: { unit: 'ml', times: 1000 },
  litres: { unit: 'ml', times: 1000 },
  each: { unit: 'each', times: 1 },
  piece: { unit: 'each', times: 1 },
  pieces: { unit: 'each', times: 1 },
}

/**
 * A number as a person writes it: `1.5`, `1,5`, `12`. `1,000` could be one or a thousand, so it is refused rather than
 * guessed at.
 */
export function readNumber(text: string): Read<number> {
  const plain = text.replace(/[\s\u00A0\u202F]/g, '')
  if (/^\d+,\d{3}$/.test(plain)) {
    const [whole, rest] = plain.split(',')
    return bad(`${text} can be read two ways. Write ${whole}${rest} or ${whole}.${rest}.`)
  }
  if (!/^\d+(?:[.,]\d+)?$/.test(plain)) return bad(`${text} is not a number.`)
  return good(Number(plain.replace(',', '.')))
}

/** An amount in whole minor units from text: `12.50` in GBP is 1250. A currency sign before or after is let pass. */
export function readMoney(text: string, currency: string): Read<number> {
  const number = readNumber(text.replace(/^[\p{Sc}]|[\p{Sc}]$/gu, ''))
  if (!number.ok) return number
  const times = 10 ** currencyDecimals(currency)
  const minor = Math.round(number.value * times)
  if (Math.abs(number.value * times - minor) > 1e-6)
    return bad(`${text} has too many decimals for ${currency}.`)
  return minor <= COST_MAX_MINOR ? good(minor) : bad(`${text} is more than a lot can cost.`)
}

/** A day from text: `2026-12-31`, or day first as in `31/12/2026`. */
export function readDay(text: string): Read<CalendarDay> {
  const written = /^(\d{1,2})[/.](\d{1,2})[/.](\d{4})$/.exec(text)
  const iso = written ? `${written[3]}-${pad(written[2])}-${pad(written[1])}` : text
  const on = parseDay(iso)
  return on ? good(on) : bad(`${text} is not a day. Write it like 2026-12-31.`)
}

const pad = (text = '') => text.padStart(2, '0')

/** What one row of an import would add, or what is wrong with it, column by column. */
export function readLotRow(
  row: { line: number; cells: Record<string, string> },
  { find, currency, today }: Context,
): ImportRow {
  const messages: ImportRow['messages'] = []
  const take = <T>(column: LotColumn, read: (text: string) => Read<T>): T | null => {
    const text = row.cells[column] ?? ''
    if (text === '') return null
    const result = read(text)
    if (result.ok) return result.value
    messages.push({ column, message: result.message })
    return null
  }
  const words = (max: number) => (text: string) =>
    text.length <= max && !/\p{Cc}|\p{Bidi_Control}/u.test(text)
      ? good(text)
      : bad(`Keep it to one line of ${max} characters.`)

  const name = row.cells.ingredient ?? ''
  const ingredient = name === '' ? undefined : find(name)
  if (name === '') messages.push({ column: 'ingredient', message: 'Name the ingredient.' })
  else if (!ingredient)
    messages.push({ column: 'ingredient', message: `The larder has no ${name.slice(0, 80)}. Add it first.` })
  if ((row.cells.quantity ?? '') === '') messages.push({ column: 'quantity', message: 'Say how much.' })
  const written = take('unit', (text) => readUnit(text, ingredient))
  const quantity = take('quantity', (text) => readQuantity(text, written?.times ?? 1, ingredient?.unit))
  take('currency', (text) =>
    text.toUpperCase() === currency ? good(currency) : bad(`This space counts in ${currency}.`),
  )
  const openedOn = take('opened_on', (text) => {
    const on = readDay(text)
    return on.ok && on.value > today ? bad('It cannot have been opened after today.') : on
  })
  return {
    line: row.line,
    ingredient: ingredient?.name ?? name.slice(0, 80),
    ingredientId: ingredient?.id ?? null,
    quantity,
    unit: ingredient?.unit ?? null,
    costMinor: take('cost', (text) => readMoney(text, currency)) ?? 0,
    bestBefore: take('best_before', readDay),
    openedOn,
    shelf: take('shelf', words(40)),
    donor: take('donor', words(80)),
    lotCode: take('lot_code', words(60)),
    outcome: messages.length === 0 ? 'add' : 'problem',
    messages,
  }
}

function readUnit(text: string, ingredient: KnownIngredient | undefined) {
  const written = WRITTEN_UNITS[text.toLowerCase()]
  if (!written) return bad(`${text.slice(0, 20)} is not a unit here. Use g, kg, ml, L or each.`)
  if (ingredient && written.unit !== ingredient.unit)
    return bad(`${ingredient.name} is counted in ${ingredient.unit}, not in ${text}.`)
  return good(written)
}

function readQuantity(text: string, times: number, unit: Unit | undefined): Read<number> {
  const number = readNumber(text)
  if (!number.ok) return number
  const quantity = Math.round(number.value * times * 1000) / 1000
  if (quantity <= 0 || quantity > QUANTITY_MAX) return bad(`${text} is not a quantity a lot can hold.`)
  if (unit === 'each' && !Number.isInteger(quantity)) return bad('Count whole pieces.')
  return good(quantity)
}
