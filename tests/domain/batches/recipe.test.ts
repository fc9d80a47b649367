import { describe, expect, it } from 'vitest'
import { abv } from '#shared/brewing/index'
import {
  DRY_FG,
  expectedEnd,
  lineForGravity,
  lineGrams,
  recipeSums,
  scaledLines,
  type RecipeFacts,
  type RecipeLine,
} from '#shared/batches/recipe'

const honey: RecipeLine = {
  name: 'Honey',
  stage: 'must',
  unit: 'g',
  quantity: 1500,
  composition: { waterFraction: 0.171, solubleFraction: 0.829, fermentableFraction: 0.98, yanMgPerKg: 20 },
  gramsPerUnit: null,
}
const juice: RecipeLine = {
  name: 'Apple juice',
  stage: 'must',
  unit: 'ml',
  quantity: 3000,
  composition: { waterFraction: 0.88, solubleFraction: 0.12, fermentableFraction: 0.9, yanMgPerKg: 80 },
  gramsPerUnit: 1.05,
}
const recipe = (lines: RecipeLine[], more: Partial<RecipeFacts> = {}): RecipeFacts => ({
  style: 'mead',
  volumeLitres: 5,
  lines,
  nitrogenDemand: 'medium',
  ...more,
})

describe('what a recipe comes to', () => {
  it('adds up the must by mass', () => {
    const sums = recipeSums(recipe([honey]))
    // 1.5 kg of honey with 82.9 % solids made up to 5 L: 1.0953, by the density of sucrose solutions (ICUMSA SPS-4).
    expect(sums.must?.og).toBeCloseTo(1.0953, 4)
    expect(sums.expectedFg).toBe(DRY_FG)
    expect(sums.abvPercent).toBeCloseTo(abv({ og: sums.must!.og, fg: DRY_FG }).percent, 6)
    // 5 million living cells a mL: about half a gram a litre of dry yeast (Australian Wine Research Institute guide).
    expect(sums.yeastGrams?.likely).toBeGreaterThan(1.5)
    expect(sums.yeastGrams?.likely).toBeLessThan(4)
    expect(sums.nitrogen?.grams).toBeGreaterThan(0)
    expect(sums.problem).toBeUndefined()
  })

  it('weighs what is measured by volume, and says what it could not count', () => {
    const mystery = { ...juice, name: 'Mystery squash', gramsPerUnit: null }
    const cap = { ...honey, name: 'Caps', stage: 'bottling' as const }
    const sums = recipeSums(recipe([juice, mystery, cap], { volumeLitres: 3 }))
    expect(sums.uncounted).toEqual(['Mystery squash'])
    expect(lineGrams(juice)).toBe(3150)
    expect(lineGrams(mystery)).toBeUndefined()
    expect(sums.must?.og).toBeGreaterThan(1.04)
  })

  it('says in words why it cannot be added up', () => {
    const over = recipeSums(recipe([{ ...honey, quantity: 9000 }], { volumeLitres: 10 }))
    expect(over.problem).toMatch(/more sugar than yeast can start in/)
    const full = recipeSums(recipe([{ ...juice, quantity: 9000 }], { volumeLitres: 5 }))
    expect(full.problem).toMatch(/The ingredients alone fill [\d.]+ L/)
    expect(recipeSums(recipe([])).must).toBeUndefined()
  })
})

describe('where a drink is expected to end', () => {
  it.each([
    ['mead', { og: 1.08 }, 0.998],
    ['beer', { og: 1.048 }, 1.012],
    ['beer', { og: 1.048, dryFg: 1.009 }, 1.009],
    ['cider', { og: 1.05, dryFg: 1.004 }, 1.004],
    ['other', { og: 0.999 }, undefined],
  ] as const)('%s from %j at %s', (style, given, fg) => {
    if (fg === undefined)
      expect(() => expectedEnd({ style, ...given, tolerancePercent: 5 })).toThrow(RangeError)
    else expect(expectedEnd({ style, ...given })).toBeCloseTo(fg, 3)
  })

  it('stops where the strain gives up', () => {
    const fg = expectedEnd({ style: 'mead', og: 1.12, tolerancePercent: 12 })
    expect(fg).toBeGreaterThan(1.02)
    expect(abv({ og: 1.12, fg }).percent).toBeCloseTo(12, 2)
    expect(expectedEnd({ style: 'mead', og: 1.07, tolerancePercent: 14 })).toBe(DRY_FG)
  })
})

describe('scaling', () => {
  it('keeps proportions to a volume, whole pieces, and what goes by the bottle', () => {
    const lines = [
      { unit: 'g' as const, quantity: 1500 },
      { unit: 'each' as const, quantity: 3 },
      { unit: 'each' as const, quantity: 1, perBottle: true },
    ]
    expect(scaledLines(lines, 5, 10).map((line) => line.quantity)).toEqual([3000, 6, 1])
    expect(scaledLines(lines, 5, 1).map((line) => line.quantity)).toEqual([300, 1, 1])
  })

  it('brings the main sugar to a gravity', () => {
    const mixed = recipe([juice, { ...honey, quantity: 800 }], { style: 'cyser', volumeLitres: 4.5 })
    const scale = lineForGravity(mixed, 1.1)
    expect(scale).toMatchObject({ ok: true, line: 1 })
    const quantity = (scale as { quantity: number }).quantity
    const sums = recipeSums({ ...mixed, lines: [juice, { ...honey, quantity }] })
    expect(sums.must?.og).toBeCloseTo(1.1, 4)
  })

  it('says when it cannot', () => {
    expect(lineForGravity(recipe([]), 1.08)).toMatchObject({ ok: false })
    const rich = recipe([
      { ...honey, quantity: 900 },
      { ...honey, quantity: 1000 },
    ])
    expect(lineForGravity(rich, 1.01)).toMatchObject({ ok: false })
  })
})
