import { describe, expect, test } from 'vitest'
import { CO2_PER_ETHANOL, EXTRACT_PER_ETHANOL } from '#shared/brewing/balance'
import { ETHANOL_AT_20 } from '#shared/brewing/ethanol-density'
import {
  abv,
  attenuation,
  co2BetweenGravities,
  declaredStrength,
  dutyFactor,
  fermentableFloor,
  type AbvMethod,
} from '#shared/brewing/index'

const COMMON = 'common practice, from memory'
const HMRC = 'HMRC Excise Notice 226 para 30.3, as quoted by third parties'
const BALLING = 'Balling by Nielsen et al.; 0.8192 from memory'
const MIXTURE = 'OIML R 22 + ICUMSA + Balling yields'

describe('alcohol by volume', () => {
  test.each<[number, number, AbvMethod, number, number, string]>([
    [1.04, 1.01, 'linear', 3.938, 0.005, COMMON],
    [1.05, 1.01, 'linear', 5.25, 0.005, COMMON],
    [1.05, 1.0, 'linear', 6.563, 0.005, COMMON],
    [1.08, 1.0, 'linear', 10.5, 0.005, COMMON],
    [1.1, 1.01, 'linear', 11.813, 0.005, COMMON],
    [1.04, 1.01, 'duty-table', 3.87, 0.005, HMRC],
    [1.05, 1.01, 'duty-table', 5.2, 0.005, HMRC],
    [1.05, 1.0, 'duty-table', 6.55, 0.005, HMRC],
    [1.08, 1.0, 'duty-table', 10.72, 0.005, HMRC],
    [1.1, 1.01, 'duty-table', 12.15, 0.005, HMRC],
    [1.04, 1.01, 'balling', 3.97, 0.05, BALLING],
    [1.05, 1.01, 'balling', 5.32, 0.05, BALLING],
    [1.05, 1.0, 'balling', 6.64, 0.05, BALLING],
    [1.08, 1.0, 'balling', 10.77, 0.05, BALLING],
    [1.1, 1.01, 'balling', 12.25, 0.05, BALLING],
    [1.04, 1.01, 'mixture', 3.9, 0.05, MIXTURE],
    [1.05, 1.01, 'mixture', 5.23, 0.05, MIXTURE],
    [1.05, 1.0, 'mixture', 6.55, 0.05, MIXTURE],
    [1.08, 1.0, 'mixture', 10.64, 0.05, MIXTURE],
    [1.1, 1.01, 'mixture', 12.07, 0.05, MIXTURE],
  ])('%f to %f by %s is %f ± %f (%s)', (og, fg, method, percent, tolerance) => {
    const strength = abv({ og, fg, method })
    expect(Math.abs(strength.percent - percent)).toBeLessThanOrEqual(tolerance)
    expect(strength.method).toBe(method)
  })

  test('the linear rule turns 1.066 and 0.998 into 8.9 % (common practice)', () => {
    expect(abv({ og: 1.066, fg: 0.998, method: 'linear' }).percent.toFixed(1)).toBe('8.9')
  })

  test('the mixture is meant unless a method is named', () => {
    expect(abv({ og: 1.08, fg: 1 })).toEqual(abv({ og: 1.08, fg: 1, method: 'mixture' }))
  })

  test('the linear rule falls about 0.3 %vol behind at 1.100', () => {
    const gap = abv({ og: 1.1, fg: 1.01 }).percent - abv({ og: 1.1, fg: 1.01, method: 'linear' }).percent
    expect(gap).toBeGreaterThan(0.2)
    expect(gap).toBeLessThan(0.45)
  })

  test('two readings each off by 0.001 make 0.19 %vol, 1 sigma (error propagation)', () => {
    const one =
      abv({ og: 1.081, fg: 1, method: 'linear' }).percent - abv({ og: 1.08, fg: 1, method: 'linear' }).percent
    expect(Math.abs(one * Math.SQRT2 - 0.19)).toBeLessThanOrEqual(0.01)
    const { low, high } = abv({ og: 1.08, fg: 1 })
    expect(high - low).toBeGreaterThan(2 * 0.2)
    expect(high - low).toBeLessThan(2 * 0.45)
  })
})

describe('duty factor, %vol a point', () => {
  test.each([
    [6.9, 0.125],
    [7, 0.126],
    [10.4, 0.126],
    [10.5, 0.127],
    [17.2, 0.127],
    [17.3, 0.128],
    [26.1, 0.128],
    [26.2, 0.129],
    [36, 0.129],
    [46.5, 0.13],
    [57.1, 0.131],
    [57.2, 0.132],
    [67.9, 0.132],
    [68, 0.133],
    [78.8, 0.133],
    [89.7, 0.134],
    [100.7, 0.135],
  ])(`a drop of %f points: %f (${HMRC})`, (points, factor) => {
    expect(dutyFactor(points)).toMatchObject({ factor, extrapolated: false })
  })

  test('trap: a drop of 68.0 points lies on an edge; it is rounded to 0.1 point before the table is read', () => {
    // In binary 1.066 − 0.998 is 67.99999999999993 points: unrounded it would fall into the band below.
    expect((1.066 - 0.998) * 1000).not.toBe(68)
    expect(dutyFactor((1.066 - 0.998) * 1000)).toEqual({ factor: 0.133, points: 68, extrapolated: false })
    for (const og of [1.066, 1.07, 1.072, 1.08, 1.09, 1.1]) {
      expect(declaredStrength(abv({ og, fg: og - 0.068, method: 'duty-table' }).percent)).toBe(9)
    }
  })

  test('trap: past 100.7 points the table ends, and the answer says so', () => {
    expect(dutyFactor(100.8).extrapolated).toBe(true)
    expect(abv({ og: 1.12, fg: 1.01, method: 'duty-table' }).extrapolated).toBe(true)
    expect(abv({ og: 1.11, fg: 1.01, method: 'duty-table' }).extrapolated).toBe(false)
  })

  test.each([
    [7.59, 7.5],
    [10.72, 10.7],
    [9, 9],
    [8.9, 8.9],
    [0.3, 0.3],
    [5.1999, 5.1],
  ])(
    '%f %%vol is declared as %f (gov.uk Alcoholic Products Technical Guide section 11)',
    (percent, declared) => {
      expect(declaredStrength(percent)).toBe(declared)
    },
  )
})

describe('the floor of final gravity', () => {
  test.each([
    [1.04, 0.991],
    [1.1, 0.9794],
  ])(`%f can end no lower than %f (${MIXTURE})`, (og, floor) => {
    expect(Math.abs(fermentableFloor(og) - floor)).toBeLessThanOrEqual(0.001)
  })

  test('a reading under it is refused by name, with what is allowed', () => {
    expect(() => abv({ og: 1.04, fg: 0.98 })).toThrow(/fg is 0.98: allowed 0.986 to 1.04/)
    expect(() => abv({ og: 1.04, fg: 0.98 })).toThrow(RangeError)
  })

  test('so is one above the start', () => {
    expect(() => abv({ og: 1.04, fg: 1.05 })).toThrow(/fg is 1.05/)
  })
})

describe('Balling', () => {
  test('2.0665 g of extract gives 1 g of ethanol (Nielsen et al. quoting Balling)', () => {
    expect(EXTRACT_PER_ETHANOL).toBe(2.0665)
  })

  test('trap: only 0.9565 g of CO2 closes the balance with 0.11 g of yeast; a misprint says 0.9695', () => {
    expect(Math.abs(1 + CO2_PER_ETHANOL + 0.11 - EXTRACT_PER_ETHANOL)).toBeLessThan(0.0005)
    expect(Math.abs(1 + 0.9695 + 0.11 - EXTRACT_PER_ETHANOL)).toBeGreaterThan(0.01)
  })

  test('on a hexose basis it takes 17.17 g/L for 1 %vol; the EU reckons 16.83 (derived; order of 14 Sept 2011)', () => {
    const hexose = ((2.0665 * 2 * 180.156) / 342.297) * (ETHANOL_AT_20 / 100)
    expect(Math.abs(hexose - 17.17)).toBeLessThanOrEqual(0.1)
    expect(hexose).toBeGreaterThan(16.83)
    expect(hexose).toBeLessThan(17.5)
  })
})

describe('CO2 by gravity', () => {
  test.each([1.045, 1.06, 1.08, 1.1])('a point lost from %f gives 0.985 ± 0.03 g/L (mixture model)', (og) => {
    const grams = co2BetweenGravities({ og, from: 1.01, to: 1.005 }) / 5
    expect(Math.abs(grams - 0.985)).toBeLessThanOrEqual(0.03)
  })
})

test('attenuation: alcohol flatters the hydrometer', () => {
  const { apparent, real } = attenuation({ og: 1.05, fg: 1.01 })
  expect(apparent).toBeCloseTo(0.793, 2)
  expect(real).toBeCloseTo(0.653, 2)
  expect(attenuation({ og: 1.08, fg: fermentableFloor(1.08) }).real).toBeCloseTo(1, 9)
  expect(attenuation({ og: 1.08, fg: 0.995 }).apparent).toBeGreaterThan(1)
})

test('ethanol in 750 mL at 9.0 % is 53.3 g (OIML ethanol density)', () => {
  expect(Math.abs(750 * 0.09 * (ETHANOL_AT_20 / 1000) - 53.3)).toBeLessThanOrEqual(0.1)
})
