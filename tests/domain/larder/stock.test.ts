import { describe, expect, it } from 'vitest'
import { moneyFigures, moneyWords } from '#shared/units/money'
import { cautionsFor } from '#shared/larder/cautions'
import { Quantity, quantityWords, SomeQuantity } from '#shared/larder/quantity'
import { statementOf } from '#shared/larder/statement'
import { freeQuantity, quantityToBuy, stockState } from '#shared/larder/stock'
import {
  ALLERGENS,
  ALLERGEN_WORDS,
  INGREDIENT_KINDS,
  SHELF_OF_KIND,
  SHELVES,
} from '#shared/larder/vocabulary'

describe('stock', () => {
  it.each([
    [
      { usable: 60, reserved: 20, parLevel: 200 },
      { state: 'low', free: 40, buy: 160 },
    ],
    [
      { usable: 220, reserved: 20, parLevel: 200 },
      { state: 'enough', free: 200, buy: 0 },
    ],
    [
      { usable: 0, reserved: 0, parLevel: 200 },
      { state: 'out', free: 0, buy: 200 },
    ],
    [
      { usable: 0, reserved: 0, parLevel: null },
      { state: 'enough', free: 0, buy: 0 },
    ],
    [
      { usable: 100, reserved: 150, parLevel: null },
      { state: 'low', free: 0, buy: 50 },
    ],
    [
      { usable: 0.3, reserved: 0.1, parLevel: 0.2 },
      { state: 'enough', free: 0.2, buy: 0 },
    ],
  ])('%o is %o', (stock, expected) => {
    const found = { state: stockState(stock), free: freeQuantity(stock), buy: quantityToBuy(stock) }
    expect(found).toEqual(expected)
  })
})

describe('quantities', () => {
  it.each([
    [1250, 'g', '1.25 kg'],
    [40, 'g', '40 g'],
    [0.5, 'g', '0.5 g'],
    [1000.001, 'g', '1.000001 kg'],
    [4500, 'ml', '4.5 L'],
    [1200, 'each', '1,200'],
  ] as const)('%d %s reads %s', (quantity, unit, words) => expect(quantityWords(quantity, unit)).toBe(words))

  it('come in thousandths and never below nothing', () => {
    for (const ok of [0, 0.001, 70.125, 10_000_000]) expect(Quantity.safeParse(ok).success).toBe(true)
    for (const no of [-1, 0.0001, 1.00005, NaN, Infinity, 10_000_001])
      expect(Quantity.safeParse(no).success).toBe(false)
    expect(SomeQuantity.safeParse(0).success).toBe(false)
  })
})

describe('a statement', () => {
  const entries = [
    { at: '2031-05-02', order: 2, amountMinor: -300 },
    { at: '2031-05-01', order: 1, amountMinor: 500 },
    { at: '2031-05-03', order: 3, amountMinor: 40 },
  ]
  it('runs in order of time', () => {
    const { balanceMinor, items } = statementOf(entries)
    expect(balanceMinor).toBe(240)
    expect(items.map((item) => item.balanceMinor)).toEqual([500, 200, 240])
  })
  it('opens with what went before, and its balance is of everything', () => {
    const { openingMinor, items, balanceMinor } = statementOf(entries, {
      from: '2031-05-02',
      to: '2031-05-03',
    })
    expect([openingMinor, items.length, balanceMinor]).toEqual([500, 1, 240])
  })
})

describe('the vocabulary', () => {
  it('has the fourteen groups of allergens, each with a word', () => {
    // Regulation (EU) No 1169/2011, Annex II.
    expect(ALLERGENS).toHaveLength(14)
    expect(new Set(Object.values(ALLERGEN_WORDS)).size).toBe(14)
  })
  it('puts every kind on a shelf', () => {
    for (const kind of INGREDIENT_KINDS) expect(SHELVES).toContain(SHELF_OF_KIND[kind])
  })
  it('warns where cleaners and sulphite are handled', () => {
    expect(cautionsFor('cleaning')[0]?.text).toMatch(/never mix/i)
    expect(cautionsFor('preservative')[0]?.why).toMatch(/asthma/)
    expect(cautionsFor('honey')).toEqual([])
  })
})

describe('money', () => {
  it.each([
    [640, 'GBP', '£6.40', '6.40'],
    [-5, 'GBP', '\u2212£0.05', '-0.05'],
    [1200, 'JPY', 'JP¥1,200', '1200'],
    [123456, 'EUR', '€1,234.56', '1234.56'],
  ])('%d %s', (minor, currency, words, figures) => {
    expect([moneyWords(minor, currency), moneyFigures(minor, currency)]).toEqual([words, figures])
  })
})
