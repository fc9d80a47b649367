import { describe, expect, test } from 'vitest'
import {
  chlorineNeutraliser,
  freeSo2For,
  gravityFromSugar,
  molecularSo2,
  nitrogenFromDap,
  nitrogenPlan,
  SALT_PER_CHLORINE,
  SO2_SHARE,
  sulphite,
} from '#shared/brewing/index'
import { DAP_NITROGEN } from '#shared/brewing/nitrogen'
import { SULPHITE_CEILING_MG_PER_LITRE, SULPHITE_LABEL_MG_PER_LITRE } from '#shared/brewing/judgement'

describe('nitrogen', () => {
  test('DAP is 21.21 % N (IUPAC atomic masses); 1 g/L gives 212 mg N/L', () => {
    expect(Math.abs(DAP_NITROGEN - 0.2121)).toBeLessThanOrEqual(0.0002)
    expect(Math.abs(nitrogenFromDap(1) - 212)).toBeLessThanOrEqual(1)
  })

  test.each([
    ['low', 129],
    ['medium', 155],
    ['high', 215],
  ] as const)(
    'at 172 g/L of sugar %s demand wants %f mg N/L (0.75, 0.90, 1.25 mg/g, from memory)',
    (demand, target) => {
      const plan = nitrogenPlan({ og: gravityFromSugar(172), volumeLitres: 5, supplyMgPerLitre: 0, demand })
      expect(Math.abs(plan.targetMgPerLitre - target)).toBeLessThan(0.6)
    },
  )

  test('+100 mg N/L in 5 L takes 2.36 g (atomic masses)', () => {
    const og = 1.08
    const full = nitrogenPlan({ og, volumeLitres: 5, supplyMgPerLitre: 0, demand: 'medium' })
    const plan = nitrogenPlan({
      og,
      volumeLitres: 5,
      supplyMgPerLitre: full.targetMgPerLitre - 100,
      demand: 'medium',
    })
    expect(Math.abs(plan.grams - 2.36)).toBeLessThanOrEqual(0.01)
    expect(plan.feeds.reduce((sum, feed) => sum + feed.grams, 0)).toBeCloseTo(plan.grams, 9)
    expect(plan.capped).toBe(false)
  })

  test('never passes 1 g/L (EU Regulation 606/2009 Annex I A note b), and says so', () => {
    const plan = nitrogenPlan({ og: 1.13, volumeLitres: 5, supplyMgPerLitre: 0, demand: 'high' })
    expect(plan.gramsPerLitre).toBe(1)
    expect(plan.grams).toBe(plan.ceilingGrams)
    expect(plan.capped).toBe(true)
    expect(plan.warnings.join(' ')).toMatch(/ceiling/)
  })

  test('no feed comes after half the sugar is gone (from memory)', () => {
    for (const supplyMgPerLitre of [0, 60, 120]) {
      const plan = nitrogenPlan({ og: 1.1, volumeLitres: 5, supplyMgPerLitre, demand: 'high' })
      expect(Math.max(...plan.feeds.map((feed) => feed.sugarGone))).toBeLessThan(0.5)
    }
  })

  test('enough is enough', () => {
    const plan = nitrogenPlan({ og: 1.05, volumeLitres: 5, supplyMgPerLitre: 300, demand: 'low' })
    expect(plan).toMatchObject({ grams: 0, shortfallMgPerLitre: 0, feeds: [], capped: false })
  })
})

describe('sulphite', () => {
  test('SO2 share: potassium 0.576, sodium 0.674 (IUPAC atomic masses)', () => {
    expect(Math.abs(SO2_SHARE.potassium - 0.576)).toBeLessThanOrEqual(0.0005)
    expect(Math.abs(SO2_SHARE.sodium - 0.674)).toBeLessThanOrEqual(0.0003)
  })

  test('50 mg/L in 5 L takes 0.434 g of the potassium salt (stoichiometry)', () => {
    const { grams } = sulphite({ volumeLitres: 5, mgPerLitre: 50, salt: 'potassium' })
    expect(Math.abs(grams - 0.434)).toBeLessThanOrEqual(0.003)
  })

  test('one 0.44 g potassium tablet in a gallon gives 55.8 mg/L (tablet mass from memory)', () => {
    const { mgPerLitre } = sulphite({ volumeLitres: 4.54609, grams: 0.44, salt: 'potassium' })
    expect(Math.abs(mgPerLitre - 55.8)).toBeLessThanOrEqual(0.3)
  })

  test('grams and mg/L are each other back', () => {
    const { grams } = sulphite({ volumeLitres: 7, mgPerLitre: 33, salt: 'sodium' })
    expect(sulphite({ volumeLitres: 7, grams, salt: 'sodium' }).mgPerLitre).toBeCloseTo(33, 9)
  })

  test('over 10 mg/L must be declared (EU/UK Annex II); yeast makes some itself, so none added is not none present', () => {
    expect(SULPHITE_LABEL_MG_PER_LITRE).toBe(10)
    expect(sulphite({ volumeLitres: 5, mgPerLitre: 9, salt: 'potassium' }).mustDeclare).toBe(false)
    expect(
      sulphite({ volumeLitres: 5, mgPerLitre: 0, presentMgPerLitre: 15, salt: 'potassium' }).mustDeclare,
    ).toBe(true)
  })

  test('over 200 mg/L passes the limit of cider, mead and fruit wine (from memory)', () => {
    expect(SULPHITE_CEILING_MG_PER_LITRE).toBe(200)
    const dose = sulphite({ volumeLitres: 5, mgPerLitre: 150, presentMgPerLitre: 60, salt: 'potassium' })
    expect(dose.totalMgPerLitre).toBe(210)
    expect(dose.warnings.join(' ')).toMatch(/200 mg\/L/)
  })

  test('asks for one of mg/L and grams', () => {
    expect(() => sulphite({ volumeLitres: 5, salt: 'sodium' })).toThrow(RangeError)
    expect(() => sulphite({ volumeLitres: 5, salt: 'sodium', grams: 1, mgPerLitre: 50 })).toThrow(
      /one of the two/,
    )
  })

  test.each([
    [3.0, 0.0606],
    [3.2, 0.0391],
    [3.4, 0.0251],
    [3.6, 0.016],
    [3.8, 0.0101],
    [4.0, 0.0064],
  ])('pH %f: molecular share %f (Henderson–Hasselbalch, pKa 1.81 from memory)', (ph, fraction) => {
    expect(Math.abs(molecularSo2({ freeMgPerLitre: 30, ph }).fraction - fraction)).toBeLessThanOrEqual(0.0003)
  })

  test.each([
    [3.2, 20.4],
    [3.5, 40],
    [3.8, 79],
  ])('pH %f: 0.8 mg/L molecular wants %f mg/L free (as above)', (ph, free) => {
    expect(Math.abs(freeSo2For({ ph }).mgPerLitre - free)).toBeLessThanOrEqual(0.3)
    expect(molecularSo2({ freeMgPerLitre: free, ph }).mgPerLitre).toBeCloseTo(0.8, 1)
  })
})

describe('chlorine', () => {
  test('takes 1.568 mg potassium or 1.34 mg sodium salt per mg Cl2 (two Cl2 each)', () => {
    expect(Math.abs(SALT_PER_CHLORINE.potassium - 1.568)).toBeLessThanOrEqual(0.005)
    expect(Math.abs(SALT_PER_CHLORINE.sodium - 1.34)).toBeLessThanOrEqual(0.005)
  })

  test('a waterworks field guide doses 1.47 of the sodium salt, about 10 % more (seen)', () => {
    expect(1.47 / SALT_PER_CHLORINE.sodium).toBeGreaterThan(1.05)
    expect(1.47 / SALT_PER_CHLORINE.sodium).toBeLessThan(1.13)
  })

  test('1 mg/L in 5 L takes 8 mg, and a 0.44 g tablet is over fifty times that (stoichiometry)', () => {
    const { grams } = chlorineNeutraliser({ volumeLitres: 5, chlorineMgPerLitre: 1, salt: 'potassium' })
    expect(Math.abs(grams - 0.0078)).toBeLessThanOrEqual(0.0002)
    expect(0.44 / grams).toBeGreaterThan(50)
  })

  test('ten times too much at 1 mg/L leaves 8.1 mg/L SO2 (stoichiometry)', () => {
    const tenfold = 10 * SALT_PER_CHLORINE.potassium
    const left = (tenfold - SALT_PER_CHLORINE.potassium) * SO2_SHARE.potassium
    expect(Math.abs(left - 8.1)).toBeLessThanOrEqual(0.2)
  })
})
