import { describe, expect, test } from 'vitest'
import {
  bottlePressureBar,
  CO2_YIELD,
  co2SolubilityGramsPerLitre,
  primingGrams,
  residualCo2Volumes,
  tabletsPerBottle,
} from '#shared/brewing/index'
import { GRAMS_PER_VOLUME } from '#shared/brewing/carbonation'
import { CO2_GRAMS_PER_LITRE_POINT } from '#shared/brewing/room'

const WEISS = 'Weiss 1974'
const STOICHIOMETRY = 'stoichiometry'

describe('solubility and what is left under an airlock', () => {
  test.each([
    [0, 3.41, 1.72],
    [4, 2.927, 1.47],
    [10, 2.362, 1.18],
    [15, 2.004, 1.0],
    [20, 1.721, 0.85],
    [25, 1.495, 0.73],
    [30, 1.313, 0.636],
  ])(`%f °C: %f g/L per atm, %f volumes (${WEISS})`, (celsius, grams, volumes) => {
    expect(Math.abs(co2SolubilityGramsPerLitre(celsius) - grams)).toBeLessThanOrEqual(0.02)
    expect(Math.abs(residualCo2Volumes(celsius) - volumes)).toBeLessThanOrEqual(0.015)
  })

  test('the kilogram form of the same paper agrees, and gives its test value 0.03515 at 20 °C, S = 20 (seen)', () => {
    const perKg = (celsius: number, s: number): number => {
      const t = (celsius + 273.15) / 100
      return Math.exp(
        -60.2409 + 93.4517 / t + 23.3585 * Math.log(t) + s * (0.023517 - 0.023656 * t + 0.0047036 * t * t),
      )
    }
    expect(Math.abs(perKg(20, 20) - 0.03515)).toBeLessThanOrEqual(0.00001)
    expect(co2SolubilityGramsPerLitre(20) / (perKg(20, 0) * 44.0095 * 0.9982)).toBeCloseTo(1, 2)
  })

  test('trap: the two-parameter Henry law (3.3e-4, 2400 K, Sander) is 10 % low at 0 °C', () => {
    const henry = (celsius: number): number =>
      3.3e-4 * Math.exp(2400 * (1 / (celsius + 273.15) - 1 / 298.15)) * 101_325 * 44.0095e-3
    expect(henry(25) / co2SolubilityGramsPerLitre(25)).toBeCloseTo(0.98, 1)
    expect(henry(0) / co2SolubilityGramsPerLitre(0)).toBeLessThan(0.95)
  })
})

describe('yields, g CO2 a gram', () => {
  test.each([
    ['sucrose', 0.514, 0.0005],
    ['glucose', 0.4886, 0.0005],
    ['glucose-monohydrate', 0.4442, 0.0005],
  ] as const)(`%s: %f ± %f (${STOICHIOMETRY})`, (primer, expected, tolerance) => {
    expect(Math.abs(CO2_YIELD[primer] - expected)).toBeLessThanOrEqual(tolerance)
  })

  test('1.158 g glucose monohydrate does the work of 1 g sucrose', () => {
    expect(Math.abs(CO2_YIELD.sucrose / CO2_YIELD['glucose-monohydrate'] - 1.158)).toBeLessThanOrEqual(0.002)
  })

  test('malt and honey give less than sucrose, weight for weight (from memory)', () => {
    expect(CO2_YIELD['dried-malt']).toBeLessThan(CO2_YIELD.sucrose * 0.8)
    expect(CO2_YIELD.honey).toBeLessThan(CO2_YIELD.sucrose * 0.8)
  })
})

describe('priming', () => {
  test.each([
    [2.4, 20, 4.5, 26.8],
    [2.5, 18, 5.0, 30.7],
    [2.0, 20, 4.5, 19.9],
    [3.0, 20, 4.5, 37.2],
  ])(
    `to %f volumes at %f °C, %f L: %f g sucrose (${WEISS} + ${STOICHIOMETRY})`,
    (target, celsius, litres, grams) => {
      const dose = primingGrams({
        volumeLitres: litres,
        targetVolumes: target,
        temperatureC: celsius,
        primer: 'sucrose',
      })
      expect(Math.abs(dose.grams - grams)).toBeLessThanOrEqual(0.4)
      expect(dose.low).toBeLessThan(dose.grams)
      expect(dose.high).toBeGreaterThan(dose.grams)
    },
  )

  test('a drink that holds enough takes none', () => {
    const dose = primingGrams({ volumeLitres: 5, targetVolumes: 1, temperatureC: 4, primer: 'sucrose' })
    expect(dose.grams).toBe(0)
    expect(dose.reasons.join(' ')).toMatch(/already/)
  })

  test('trap: the warmest it has been counts, not today: chilled since, it needs more sugar than it seems', () => {
    const at = (temperatureC: number): number =>
      primingGrams({ volumeLitres: 5, targetVolumes: 2.4, temperatureC, primer: 'sucrose' }).grams
    expect(at(20) - at(4)).toBeGreaterThan(10)
  })

  test('a 250 mL bottle wants about 1.1–1.6 g for 2.0–2.5 volumes at 20 °C', () => {
    const grams = (targetVolumes: number): number =>
      primingGrams({ volumeLitres: 0.25, targetVolumes, temperatureC: 20, primer: 'sucrose' }).grams
    expect(grams(2)).toBeCloseTo(1.1, 1)
    expect(grams(2.5)).toBeCloseTo(1.6, 1)
  })
})

describe('tablets', () => {
  test.each([1.2, 1.3, 1.4, 1.5])(
    'one of %f g for 250 mL makes three for 750 mL (common practice)',
    (tabletGrams) => {
      const small = {
        tabletGrams,
        targetVolumes: 0.85 + (tabletGrams * 0.514) / 0.25 / 1.977,
        temperatureC: 20,
      }
      expect(tabletsPerBottle({ bottleMl: 250, ...small }).count).toBe(1)
      expect(tabletsPerBottle({ bottleMl: 750, ...small }).count).toBe(3)
    },
  )

  test('says what a whole number really gives', () => {
    const three = tabletsPerBottle({ bottleMl: 750, tabletGrams: 1.4, targetVolumes: 2.4, temperatureC: 20 })
    expect(three.count).toBe(3)
    expect(three.volumes).toBeCloseTo(0.85 + (3 * 1.4 * 0.514) / 0.75 / 1.977, 2)
  })

  test('is one fewer where rounding up would overshoot', () => {
    const one = tabletsPerBottle({ bottleMl: 330, tabletGrams: 3, targetVolumes: 2.2, temperatureC: 20 })
    expect(one.count).toBe(0)
    expect(one.reasons.join(' ')).toMatch(/miss/)
  })
})

describe('gauge pressure at 4 % headspace, bar', () => {
  const barOf = (gramsPerLitre: number, temperatureC: number, headspaceFraction?: number): number =>
    bottlePressureBar({ co2Volumes: gramsPerLitre / GRAMS_PER_VOLUME, temperatureC, headspaceFraction })

  test.each([
    [4.5, 20, 1.55],
    [5, 10, 1.1],
    [5, 20, 1.8],
    [5, 30, 2.7],
    [6, 20, 2.4],
    [8, 10, 2.32],
    [8, 20, 3.53],
    [8, 30, 4.9],
    [10, 20, 4.7],
  ])(`%f g/L at %f °C: %f (${WEISS} + ideal gas)`, (grams, celsius, bar) => {
    expect(Math.abs(barOf(grams, celsius) - bar)).toBeLessThanOrEqual(0.08)
  })

  test.each([
    [10, 0.88],
    [15, 1.04],
    [20, 1.21],
  ])('trap: "4 g/L a bar" is right near 14 °C only: at %f °C it adds %f bar', (celsius, bar) => {
    const added = barOf(8 + 4 * CO2_YIELD.sucrose, celsius, 0) - barOf(8, celsius, 0)
    expect(Math.abs(added - bar)).toBeLessThanOrEqual(0.04)
  })

  test.each([
    [5, 20, 2.7, 0.2],
    [10, 30, 7.5, 0.3],
  ])(
    'trap: bottled %f points early, at %f °C: %f ± %f bar (0.985 g/L a point)',
    (points, celsius, bar, tolerance) => {
      const grams = residualCo2Volumes(20) * GRAMS_PER_VOLUME + points * CO2_GRAMS_PER_LITRE_POINT
      expect(Math.abs(barOf(grams, celsius) - bar)).toBeLessThanOrEqual(tolerance)
    },
  )

  test('a point still to ferment is half a volume (mixture model)', () => {
    expect(Math.abs(CO2_GRAMS_PER_LITRE_POINT / GRAMS_PER_VOLUME - 0.5)).toBeLessThanOrEqual(0.02)
  })

  test('is never below nothing', () => {
    expect(bottlePressureBar({ co2Volumes: 0, temperatureC: 20 })).toBe(0)
    expect(Object.is(bottlePressureBar({ co2Volumes: 0.1, temperatureC: 5 }), 0)).toBe(true)
  })
})
