import { describe, expect, test } from 'vitest'
import { glassShock, sanitiserConditions, sanitiserDilution } from '#shared/brewing/index'

describe('sanitisers', () => {
  test.each([
    [1.75, 12.5, 0.71, 0.02],
    [5, 200, 4, 1e-9],
    [5, 500, 10, 1e-9],
  ])(
    '%f %% stock to %f mg/L: %f mL a litre (dilution; WHO 2014 Annex G for 1:100)',
    (stock, target, ml, tolerance) => {
      const { millilitres } = sanitiserDilution({
        volumeLitres: 1,
        stockPercent: stock,
        targetMgPerLitre: target,
      })
      expect(Math.abs(millilitres - ml)).toBeLessThanOrEqual(tolerance)
    },
  )

  test('a stock weaker than what is wanted is refused', () => {
    expect(() => sanitiserDilution({ volumeLitres: 1, stockPercent: 0.1, targetMgPerLitre: 2000 })).toThrow(
      /targetMgPerLitre is 2000: allowed 1 to 1000/,
    )
  })

  test('iodophor: 12.5–25 mg/L at 20 °C or more, a minute (Utah R392-102-10; California; NY)', () => {
    const iodophor = sanitiserConditions('iodophor')
    expect([iodophor.lowMgPerLitre, iodophor.highMgPerLitre, iodophor.lowestC]).toEqual([12.5, 25, 20])
    expect(iodophor.contactSeconds).toBeGreaterThanOrEqual(60)
  })

  test('hypochlorite: 50 mg/L wants a minute at 24 °C (NY 14-4.112); 200 mg/L is the unrinsed ceiling (from memory)', () => {
    const chlorine = sanitiserConditions('hypochlorite')
    expect([
      chlorine.lowMgPerLitre,
      chlorine.contactSeconds,
      chlorine.lowestC,
      chlorine.highMgPerLitre,
    ]).toEqual([50, 60, 24, 200])
  })

  test('hot water: 77 °C for 30 s (Utah, California: 171 °F)', () => {
    expect(Math.abs(sanitiserConditions('hot-water').lowestC - (171 - 32) / 1.8)).toBeLessThan(0.3)
    expect(sanitiserConditions('hot-water').contactSeconds).toBe(30)
  })

  test('pure sodium percarbonate is 32.5 % hydrogen peroxide (2Na2CO3·3H2O2)', () => {
    const share = (3 * 34.0147) / (2 * 105.988 + 3 * 34.0147)
    expect(Math.abs(share - 0.325)).toBeLessThanOrEqual(0.002)
  })
})

describe('hot must into glass', () => {
  test.each([
    [20, 20, 'fine'],
    [45, 20, 'fine'],
    [52, 20, 'let-it-cool'],
    [61, 20, 'do-not-pour'],
    [4, 40, 'let-it-cool'],
  ] as const)(
    '%f °C into glass at %f °C: %s (soda-lime at risk from 40 °C; warning at 30)',
    (liquidC, glassC, verdict) => {
      expect(glassShock({ liquidC, glassC }).verdict).toBe(verdict)
    },
  )
})
