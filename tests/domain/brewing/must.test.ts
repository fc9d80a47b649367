import { describe, expect, test } from 'vitest'
import { dilute, gravityFromBrix, ingredientForGravity, mustFromIngredients } from '#shared/brewing/index'

const BALANCE = 'mass balance + ICUMSA, solids taken as sucrose'

const line = (grams: number, solids: number) => ({
  grams,
  waterFraction: 1 - solids,
  solubleFraction: solids,
  fermentableFraction: 1,
})

describe('gravity when dissolved and made up to 5.0 L', () => {
  test.each([
    ['sucrose, 99.98 % solids', 1000, 0.9998, 1.0767],
    ['honey, 82.9 % solids', 1000, 0.829, 1.0637],
    ['honey, 82.9 % solids', 1500, 0.829, 1.0953],
    ['honey at 20 % water', 1000, 0.8, 1.0615],
    ['golden syrup, 80 % solids', 1000, 0.8, 1.0615],
    ['malt syrup, 78.9 % solids', 1000, 0.789, 1.0607],
    ['dried malt extract, 96 % solids (from memory)', 500, 0.96, 1.037],
  ])(`%s, %f g at %f: %f (${BALANCE})`, (_name, grams, solids, og) => {
    const must = mustFromIngredients({ lines: [line(grams, solids)], volumeLitres: 5 })
    expect(Math.abs(must.og - og)).toBeLessThanOrEqual(0.0007)
    expect(must.low).toBeLessThan(og)
    expect(must.high).toBeGreaterThan(og)
  })

  test('cyser: 1.0 kg honey and 3.0 L juice at 11.6 °Bx made up to 4.546 L is 1.100', () => {
    const juice = 3000 * gravityFromBrix(11.6) * 0.9982
    const must = mustFromIngredients({ lines: [line(1000, 0.829), line(juice, 0.116)], volumeLitres: 4.546 })
    expect(Math.abs(must.og - 1.1)).toBeLessThanOrEqual(0.001)
  })
})

describe('points × litres per kilogram near 1.06', () => {
  test.each([
    ['sucrose', 0.9998, 384],
    ['honey', 0.829, 318],
    ['golden syrup', 0.8, 307],
    ['dried malt extract (96 % from memory)', 0.96, 368],
  ])('%s (%f solids): %f (383.6 × solids, mean slope of ICUMSA)', (_name, solids, expected) => {
    const { og } = mustFromIngredients({ lines: [line(1000, solids)], volumeLitres: (1000 * solids) / 156 })
    const points = ((og - 1) * 1000 * (1000 * solids)) / 156
    expect(Math.abs(points - expected)).toBeLessThanOrEqual(3)
  })
})

test('trap: adding up points per litre drifts; the balance does not', () => {
  const thin = mustFromIngredients({ lines: [line(250, 1)], volumeLitres: 5 }).og - 1
  const thick = mustFromIngredients({ lines: [line(1500, 1)], volumeLitres: 5 }).og - 1
  expect((6 * thin - thick) * 1000).toBeGreaterThan(0.8)
})

test('trap: juice solids are not all sugar, so a juice is weaker than its gravity (OIV table: 82 % at 12 °Bx)', () => {
  const juice = { grams: 5000, waterFraction: 0.88, solubleFraction: 0.12 }
  const all = mustFromIngredients({ lines: [{ ...juice, fermentableFraction: 1 }] })
  const real = mustFromIngredients({ lines: [{ ...juice, fermentableFraction: 0.824 }] })
  expect(real.og).toBeCloseTo(all.og, 9)
  expect(real.potentialAbv / all.potentialAbv).toBeGreaterThan(0.8)
  expect(real.potentialAbv / all.potentialAbv).toBeLessThan(0.85)
  expect(real.reasons.join(' ')).toMatch(/weaker/)
  // French order of 14 Sept 2011, Annex IV: 103.5 g/L of sugar at 12 %, where ICUMSA has 125.57 g/L of solids.
  expect(Math.abs(real.sugarGrams / real.volumeLitres - 103.5)).toBeLessThan(1)
})

describe('volumes and nitrogen', () => {
  test('water poured on and made up agree', () => {
    const made = mustFromIngredients({ lines: [line(1500, 0.829)], volumeLitres: 5 })
    const poured = mustFromIngredients({ lines: [line(1500, 0.829)], waterLitres: made.waterLitres })
    expect(poured.volumeLitres).toBeCloseTo(5, 6)
    expect(poured.og).toBeCloseTo(made.og, 8)
  })

  test('pulp adds no sugar and no volume', () => {
    const berries = { grams: 1000, waterFraction: 0.88, solubleFraction: 0.06, fermentableFraction: 0.9 }
    const must = mustFromIngredients({ lines: [berries] })
    expect(must.volumeLitres).toBeCloseTo(0.918, 2)
    expect(must.brix).toBeCloseTo((100 * 60) / 940, 6)
  })

  test('nitrogen is summed over the volume', () => {
    const must = mustFromIngredients({ lines: [{ ...line(2000, 0.1), yanMgPerKg: 100 }], volumeLitres: 4 })
    expect(must.yanMgPerLitre).toBeCloseTo(50, 9)
  })
})

describe('how much of one ingredient', () => {
  test('made up to a volume', () => {
    const lines = [line(0, 0.829), line(3000, 0.116)]
    const { grams, must } = ingredientForGravity({ lines, adjust: 0, target: 1.1, volumeLitres: 4.546 })
    expect(must.og).toBeCloseTo(1.1, 9)
    expect(grams).toBeGreaterThan(900)
    expect(grams).toBeLessThan(1100)
  })

  test('into a measured amount of water, and from lines alone', () => {
    for (const waterLitres of [undefined, 1.5]) {
      const lines = [line(700, 0.1), line(0, 0.829), { grams: 3000, waterFraction: 1, solubleFraction: 0 }]
      const { grams } = ingredientForGravity({ lines, adjust: 1, target: 1.075, waterLitres })
      const again = lines.map((one, index) => (index === 1 ? { ...one, grams } : one))
      expect(mustFromIngredients({ lines: again, waterLitres }).og).toBeCloseTo(1.075, 8)
    }
  })

  test('refuses a target that no amount reaches', () => {
    const lines = [line(0, 0.1), line(4000, 0.12)]
    expect(() => ingredientForGravity({ lines, adjust: 0, target: 1.1 })).toThrow(/target is 1.1/)
    expect(() => ingredientForGravity({ lines, adjust: 1, target: 1.03, waterLitres: -1 })).toThrow(
      /waterLitres/,
    )
    expect(() => ingredientForGravity({ lines, adjust: 2, target: 1.03 })).toThrow(
      /adjust is 2: allowed 0 to 1/,
    )
  })
})

describe('what is refused', () => {
  test.each([
    [{ lines: [] }, /lines/],
    [{ lines: [line(-1, 0.8)] }, /lines\[0\].grams is -1/],
    [{ lines: [line(100, 1.2)] }, /lines\[0\]/],
    [{ lines: [{ ...line(100, 0.5), waterFraction: 0.6 }] }, /solubleFraction.*water and solids/],
    [{ lines: [line(1000, 0.8)], volumeLitres: 0.5 }, /volumeLitres is 0.5: the ingredients alone fill/],
    [{ lines: [line(1000, 0.8)], volumeLitres: 5, waterLitres: 4 }, /not both/],
    [{ lines: [line(3000, 0.9)], volumeLitres: 5 }, /the must would read 1\.2/],
    [{ lines: [line(3000, 0.9)] }, /more water is needed/],
    [{ lines: [line(Number.NaN, 0.9)], volumeLitres: 5 }, /grams is NaN/],
  ])('%o', (input, message) => {
    expect(() => mustFromIngredients(input)).toThrow(RangeError)
    expect(() => mustFromIngredients(input)).toThrow(message)
  })
})

describe('topping up', () => {
  test('4.3 L at 9.0 % made 4.546 L with water: 8.51 %vol, and 1.010 becomes 1.0095 (balances)', () => {
    const after = dilute({ volumeLitres: 4.3, sg: 1.01, abvPercent: 9, addLitres: 0.246, addSg: 1 })
    expect(Math.abs(after.abvPercent - 8.51)).toBeLessThanOrEqual(0.02)
    expect(Math.abs(after.sg - 1.0095)).toBeLessThanOrEqual(0.0005)
    expect(after.volumeLitres).toBeCloseTo(4.546, 9)
  })

  test('blending two drinks lands between them', () => {
    const after = dilute({
      volumeLitres: 3,
      sg: 1,
      abvPercent: 12,
      addLitres: 1,
      addSg: 1.02,
      addAbvPercent: 4,
    })
    expect(after).toEqual({ volumeLitres: 4, sg: 1.005, abvPercent: 10 })
  })
})
