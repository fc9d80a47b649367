import { describe, expect, it } from 'vitest'
import { readDay, readLotRow, readMoney, readNumber } from '#shared/larder/lot-row'
import { day } from '#shared/time/day'

const larder = [
  { id: 'heather', name: 'Heather honey', unit: 'g' as const },
  { id: 'juice', name: 'Apple juice', unit: 'ml' as const },
  { id: 'cap', name: 'Crown cap', unit: 'each' as const },
]
const context = {
  find: (name: string) => larder.find((item) => item.name.toLowerCase() === name.toLowerCase()),
  currency: 'GBP',
  today: day('2031-05-06'),
}
const read = (cells: Record<string, string>) => readLotRow({ line: 2, cells }, context)

describe('a row of an import', () => {
  it('takes kilograms, a comma, a pound sign and a day written day first', () => {
    const row = read({
      ingredient: 'heather HONEY',
      quantity: '2,5',
      unit: 'kg',
      cost: '£31.40',
      best_before: '31/12/2032',
      shelf: 'B2',
    })
    expect(row).toMatchObject({
      outcome: 'add',
      ingredientId: 'heather',
      quantity: 2500,
      unit: 'g',
      costMinor: 3140,
      bestBefore: '2032-12-31',
      shelf: 'B2',
      messages: [],
    })
  })

  it.each<[string, Record<string, string>, string]>([
    ['an unknown ingredient', { ingredient: 'Moon dust', quantity: '1' }, 'ingredient'],
    ['no ingredient', { quantity: '1' }, 'ingredient'],
    ['no quantity', { ingredient: 'Crown cap' }, 'quantity'],
    ['half a cap', { ingredient: 'Crown cap', quantity: '0.5' }, 'quantity'],
    ['a number of two readings', { ingredient: 'Heather honey', quantity: '1,000' }, 'quantity'],
    ['nothing of it', { ingredient: 'Heather honey', quantity: '0' }, 'quantity'],
    ['a formula', { ingredient: 'Heather honey', quantity: '=1+1' }, 'quantity'],
    ['a unit it is not counted in', { ingredient: 'Apple juice', quantity: '1', unit: 'kg' }, 'unit'],
    ['another currency', { ingredient: 'Crown cap', quantity: '1', currency: 'EUR' }, 'currency'],
    [
      'a day there is not',
      { ingredient: 'Crown cap', quantity: '1', best_before: '30/02/2031' },
      'best_before',
    ],
    ['opened tomorrow', { ingredient: 'Crown cap', quantity: '1', opened_on: '2031-05-07' }, 'opened_on'],
    ['half a penny', { ingredient: 'Crown cap', quantity: '1', cost: '1.005' }, 'cost'],
    ['a shelf as long as a book', { ingredient: 'Crown cap', quantity: '1', shelf: 'x'.repeat(41) }, 'shelf'],
  ])('says what is wrong with %s', (_name, cells, column) => {
    const row = read(cells)
    expect(row.outcome).toBe('problem')
    expect(row.messages.map((message) => message.column)).toEqual([column])
  })
})

describe('what people write', () => {
  it.each([
    ['1 250,5', 1250.5],
    ['0.25', 0.25],
    ['12', 12],
  ])('%s is %d', (text, value) => expect(readNumber(text)).toEqual({ ok: true, value }))
  it('knows currencies without pennies', () => {
    expect(readMoney('1200', 'JPY')).toEqual({ ok: true, value: 1200 })
    expect(readMoney('1200.5', 'JPY')).toMatchObject({ ok: false })
    expect(readMoney('12.5', 'GBP')).toEqual({ ok: true, value: 1250 })
  })
  it.each(['2031-02-29', '31/31/2031', 'tomorrow', '2031-5-6'])('%s is no day', (text) =>
    expect(readDay(text).ok).toBe(false),
  )
})
