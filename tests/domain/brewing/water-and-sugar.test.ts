import { describe, expect, test } from 'vitest'
import {
  brixFromGravity,
  ethanolWaterDensity,
  gravityFromBrix,
  sucroseDensity,
  sugarGramsPerLitre,
  waterDensity,
} from '#shared/brewing/index'

const TANAKA = 'Tanaka et al. 2001, Metrologia 38:301, tabulated'
const TANAKA_DERIVED = 'Tanaka 2001 constants, cross-checked against Kell 1975'
const ICUMSA = 'ICUMSA SPS-4 form over Tanaka water'
const OIML = 'OIML R 22 / Directive 76/766/EEC polynomial'

describe('water density, kg/m³', () => {
  test.each([
    [10, 999.7027, 0.001, TANAKA],
    [12, 999.5005, 0.001, TANAKA],
    [15, 999.1026, 0.001, TANAKA],
    [16, 998.9459, 0.001, TANAKA],
    [20, 998.2067, 0.001, TANAKA],
    [24, 997.2988, 0.001, TANAKA],
    [25, 997.047, 0.001, TANAKA],
    [26, 996.7857, 0.001, TANAKA],
    [28, 996.2353, 0.001, TANAKA],
    [30, 995.6488, 0.001, TANAKA],
    [32, 995.0275, 0.001, TANAKA],
    [34, 994.3724, 0.001, TANAKA],
    [0, 999.8428, 0.005, TANAKA_DERIVED],
    [5, 999.9668, 0.005, TANAKA_DERIVED],
    [140 / 9, 999.017, 0.005, TANAKA_DERIVED],
    [35, 994.0326, 0.005, TANAKA_DERIVED],
    [40, 992.2152, 0.005, TANAKA_DERIVED],
  ])('%f °C is %f ± %f (%s)', (temperatureC, expected, tolerance) => {
    expect(Math.abs(waterDensity(temperatureC) - expected)).toBeLessThanOrEqual(tolerance)
  })
})

/** Kell 1975 as restated by Jones and Harris, J. Res. NIST 97:335 (1992); `last` is the constant of its denominator. */
function kell(t: number, last: number): number {
  const top =
    999.83952 +
    16.945176 * t -
    7.9870401e-3 * t ** 2 -
    46.170461e-6 * t ** 3 +
    105.56302e-9 * t ** 4 -
    280.54253e-12 * t ** 5
  return top / (1 + last * t)
}

describe('a second water formula (Kell 1975)', () => {
  test.each([0, 4, 8, 12, 16, 20, 24, 28, 32, 36, 40])('agrees within 0.005 at %i °C', (t) => {
    expect(Math.abs(waterDensity(t) - kell(t, 16.87985e-3))).toBeLessThan(0.005)
  })

  test('trap: with two digits swapped, as often printed, it is 0.27 kg/m³ low at 20 °C', () => {
    expect(Math.abs(kell(20, 16.89785e-3) - 997.936)).toBeLessThan(0.005)
    expect(waterDensity(20) - kell(20, 16.89785e-3)).toBeGreaterThan(0.25)
  })
})

describe('sucrose solutions at 20 °C', () => {
  test.each([
    [0, 998.21, 1, 0],
    [5, 1017.81, 1.01964, 50.89],
    [10, 1038.12, 1.03998, 103.81],
    [12, 1046.45, 1.04833, 125.57],
    [15, 1059.17, 1.06107, 158.88],
    [18, 1072.16, 1.07409, 192.99],
    [20, 1080.98, 1.08292, 216.2],
    [25, 1103.59, 1.10558, 275.9],
    [30, 1127.04, 1.12906, 338.11],
    [35, 1151.34, 1.1534, 402.97],
    [40, 1176.52, 1.17864, 470.61],
  ])(`%f °Bx: density %f, SG %f, %f g/L (${ICUMSA})`, (brix, density, sg, grams) => {
    expect(Math.abs(sucroseDensity({ brix, temperatureC: 20 }) - density)).toBeLessThanOrEqual(0.05)
    expect(Math.abs(gravityFromBrix(brix) - sg)).toBeLessThanOrEqual(0.00005)
    expect(Math.abs(sugarGramsPerLitre(gravityFromBrix(brix)) - grams)).toBeLessThanOrEqual(0.1)
  })

  test(`50 °Bx is SG 1.23187 (${ICUMSA})`, () => {
    expect(Math.abs(gravityFromBrix(50) - 1.23187)).toBeLessThanOrEqual(0.00005)
  })

  test.each([
    [1.01, 2.568],
    [1.02, 5.091],
    [1.04, 10.004],
    [1.05, 12.398],
    [1.08, 19.342],
    [1.12, 28.092],
    [0.997, -0.78],
  ])(`SG %f is %f °Bx (${ICUMSA})`, (sg, brix) => {
    expect(Math.abs(brixFromGravity(sg) - brix)).toBeLessThanOrEqual(0.01)
  })

  test.each([
    [1.04, 9.993],
    [1.05, 12.387],
  ])(
    'trap: the classical table, weighed in air, gives SG %f as %f °P (from memory); ours is true density',
    (sg, plato) => {
      const gap = brixFromGravity(sg) - plato
      expect(gap).toBeGreaterThan(0.005)
      expect(gap).toBeLessThan(0.02)
    },
  )

  test('the gap between weighed in air and true is 0.00005 at 10 °Bx (buoyancy at 1.2 kg/m³)', () => {
    const air = 1.2
    const inAir = (sucroseDensity({ brix: 10, temperatureC: 20 }) - air) / (waterDensity(20) - air)
    expect(Math.abs(inAir - gravityFromBrix(10) - 0.000048)).toBeLessThanOrEqual(0.00001)
    expect(Math.abs(inAir - 1.04003)).toBeLessThanOrEqual(0.00003)
  })

  test.each([
    [10, 0.00019],
    [16.144, 0.00031],
  ])('trap: %f °Bx reads %f higher on a 60/60 °F scale (ICUMSA, Tanaka)', (brix, more) => {
    const sixty = 140 / 9
    const on60 = sucroseDensity({ brix, temperatureC: sixty }) / waterDensity(sixty)
    expect(Math.abs(on60 - gravityFromBrix(brix) - more)).toBeLessThanOrEqual(0.00003)
  })

  test.each([1, 5, 10, 15, 20, 25, 30, 35, 40])(
    'our fit SG = 1 + aB + bB² + cB³ stays within 0.000003 at %i °Bx (least squares on ICUMSA)',
    (b) => {
      const fit = 1 + 3.858572e-3 * b + 1.357588e-5 * b ** 2 + 4.018982e-8 * b ** 3
      expect(Math.abs(gravityFromBrix(b) - fit)).toBeLessThanOrEqual(0.000003)
    },
  )

  test.each([1.005, 1.02, 1.04, 1.06, 1.08, 1.1, 1.12, 1.15])(
    'our fits of °Bx and g/L on SG hold at %f (least squares on ICUMSA)',
    (sg) => {
      const x = sg - 1
      expect(
        Math.abs(brixFromGravity(sg) - (258.9876 * x - 230.3161 * x ** 2 + 190.881 * x ** 3)),
      ).toBeLessThan(0.004)
      expect(Math.abs(sugarGramsPerLitre(sg) - (2584.1 * x + 278.96 * x ** 2))).toBeLessThan(0.12)
    },
  )
})

describe('ethanol and water at 20 °C, kg/m³', () => {
  test.each([
    [0, 998.20123, 1e-5],
    [5, 991.06, 0.03],
    [8, 987.16, 0.03],
    [9, 985.92, 0.03],
    [10, 984.71, 0.03],
    [12, 982.36, 0.03],
    [14, 980.08, 0.03],
    [15, 978.97, 0.03],
    [20, 973.56, 0.03],
    [40, 948.05, 0.03],
    [100, 789.24, 0.02],
  ])(`%f %%vol is %f ± %f (${OIML})`, (abvPercent, expected, tolerance) => {
    expect(Math.abs(ethanolWaterDensity({ abvPercent, temperatureC: 20 }) - expected)).toBeLessThanOrEqual(
      tolerance,
    )
  })

  test('trap: its water stands on an older scale, 0.0055 under Tanaka, so one ratio never mixes the two', () => {
    const gap = waterDensity(20) - ethanolWaterDensity({ abvPercent: 0, temperatureC: 20 })
    expect(Math.abs(gap - 0.0055)).toBeLessThan(0.0002)
  })
})
