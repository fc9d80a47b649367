import { describe, expect, test } from 'vitest'
import {
  brixFromGravity,
  correctDryGravity,
  correctGravity,
  gravityFromBrix,
  hydrometerOffset,
  waterDensity,
} from '#shared/brewing/index'
import { GLASS_EXPANSION_PER_C } from '#shared/brewing/hydrometer'

const FIRST_PRINCIPLES = 'ICUMSA sucrose + Tanaka water + ISO 1768 glass'
const CELSIUS = [5, 10, 15, 18, 20, 22, 25, 28, 30, 35, 40] as const

/** Points of 0.001 to add, by reading and temperature; derived from first principles, rounded to 0.1 point. */
const MARKED_20C: Record<string, readonly number[]> = {
  '1.000': [-1.4, -1.2, -0.8, -0.3, 0, 0.4, 1.0, 1.8, 2.3, 3.9, 5.6],
  '1.020': [-1.8, -1.5, -0.9, -0.4, 0, 0.4, 1.2, 2.0, 2.5, 4.2, 6.0],
  '1.040': [-2.2, -1.8, -1.0, -0.4, 0, 0.5, 1.3, 2.1, 2.7, 4.4, 6.3],
  '1.060': [-2.6, -2.0, -1.1, -0.5, 0, 0.5, 1.4, 2.3, 2.9, 4.7, 6.7],
  '1.080': [-3.0, -2.3, -1.2, -0.5, 0, 0.6, 1.5, 2.4, 3.1, 5.0, 7.0],
  '1.100': [-3.4, -2.5, -1.4, -0.6, 0, 0.6, 1.6, 2.6, 3.3, 5.3, 7.4],
  '1.120': [-3.7, -2.7, -1.5, -0.6, 0, 0.6, 1.7, 2.7, 3.5, 5.5, 7.7],
}
const MARKED_60F: Record<string, readonly number[]> = {
  '1.000': [-0.7, -0.5, -0.1, 0.4, 0.7, 1.1, 1.8, 2.5, 3.1, 4.6, 6.4],
  '1.020': [-1.0, -0.7, -0.1, 0.4, 0.8, 1.2, 2.0, 2.8, 3.4, 5.0, 6.8],
  '1.040': [-1.3, -0.8, -0.1, 0.5, 0.9, 1.4, 2.2, 3.1, 3.7, 5.4, 7.3],
  '1.060': [-1.6, -1.0, -0.1, 0.5, 1.0, 1.5, 2.4, 3.3, 4.0, 5.8, 7.7],
  '1.080': [-1.9, -1.1, -0.1, 0.6, 1.1, 1.7, 2.6, 3.6, 4.3, 6.2, 8.2],
  '1.100': [-2.2, -1.3, -0.1, 0.7, 1.2, 1.8, 2.8, 3.8, 4.6, 6.5, 8.6],
  '1.120': [-2.4, -1.4, -0.2, 0.7, 1.3, 2.0, 3.0, 4.1, 4.9, 6.9, 9.0],
}

const cells = (
  table: Record<string, readonly number[]>,
): [reading: number, celsius: number, points: number][] =>
  Object.entries(table).flatMap(([reading, row]) =>
    row.map((points, index): [number, number, number] => [Number(reading), CELSIUS[index] ?? 20, points]),
  )

const addedPoints = (reading: number, temperatureC: number, calibrationTemperatureC?: number): number =>
  (correctGravity({ reading, temperatureC, calibrationTemperatureC }) - reading) * 1000

describe(`points to add, instrument marked 20 °C (${FIRST_PRINCIPLES})`, () => {
  test.each(cells(MARKED_20C))('%f at %i °C: %f', (reading, celsius, points) => {
    expect(Math.abs(addedPoints(reading, celsius) - points)).toBeLessThan(0.06)
  })
})

describe(`points to add, instrument marked 60 °F (${FIRST_PRINCIPLES})`, () => {
  test.each(cells(MARKED_60F))('%f at %i °C: %f', (reading, celsius, points) => {
    expect(Math.abs(addedPoints(reading, celsius, 140 / 9) - points)).toBeLessThan(0.06)
  })
})

describe('points to add, to 0.02 point', () => {
  test.each([
    [1.0, 5, 20, -1.36],
    [1.0, 25, 20, 1.04],
    [1.0, 40, 20, 5.61],
    [1.02, 15, 20, -0.89],
    [1.04, 10, 20, -1.75],
    [1.04, 25, 20, 1.26],
    [1.04, 35, 20, 4.44],
    [1.06, 10, 20, -2.0],
    [1.08, 5, 20, -2.98],
    [1.08, 15, 20, -1.25],
    [1.1, 25, 20, 1.57],
    [1.1, 40, 20, 7.35],
    [1.12, 10, 20, -2.73],
    [1.12, 30, 20, 3.5],
    [1.0, 20, 15.5556, 0.7],
    [1.0, 25, 15.5556, 1.76],
    [1.04, 20, 15.5556, 0.92],
    [1.06, 20, 15.5556, 1.03],
    [1.1, 25, 15.5556, 2.81],
  ])(`%f at %f °C, marked %f °C: %f (${FIRST_PRINCIPLES})`, (reading, celsius, marked, points) => {
    expect(Math.abs(addedPoints(reading, celsius, marked) - points)).toBeLessThan(0.02)
  })
})

describe('Brix to add on a 20 °C Brix hydrometer (NBS Circular 440, from memory)', () => {
  test.each([
    [0, 5, -0.36],
    [10, 5, -0.56],
    [20, 5, -0.73],
    [0, 10, -0.32],
    [10, 10, -0.43],
    [20, 10, -0.52],
    [0, 15, -0.2],
    [10, 15, -0.24],
    [20, 15, -0.28],
    [0, 25, 0.27],
    [10, 25, 0.3],
    [20, 25, 0.32],
    [0, 30, 0.61],
    [10, 30, 0.63],
    [20, 30, 0.68],
  ])('%f °Bx at %f °C: %f', (brix, temperatureC, added) => {
    const corrected = brixFromGravity(correctGravity({ reading: gravityFromBrix(brix), temperatureC }))
    expect(Math.abs(corrected - brix - added)).toBeLessThanOrEqual(0.08)
  })
})

describe('dry drinks', () => {
  test.each([
    [10, -1.79],
    [15, -1.0],
    [25, 1.3],
    [30, 2.84],
  ])('12 %%vol at %f °C: %f points (OIML R 22 + ISO 1768)', (temperatureC, points) => {
    const added = (correctDryGravity({ reading: 0.985, temperatureC, abvPercent: 12 }) - 0.985) * 1000
    expect(Math.abs(added - points)).toBeLessThan(0.1)
  })

  test('trap: a dry 12 % mead near 1.000 expands like a must of about 1.040, not like water', () => {
    const dry = (correctDryGravity({ reading: 1, temperatureC: 30, abvPercent: 12 }) - 1) * 1000
    expect(Math.abs(dry - addedPoints(1.04, 30))).toBeLessThan(0.25)
    expect(dry - addedPoints(1, 30)).toBeGreaterThan(0.4)
  })

  test('6 %vol is within 0.3 point of water', () => {
    for (const temperatureC of [10, 15, 25]) {
      const dry = correctDryGravity({ reading: 1, temperatureC, abvPercent: 6 }) - 1
      expect(Math.abs(dry * 1000 - addedPoints(1, temperatureC))).toBeLessThan(0.3)
    }
  })
})

test('glass expands by 25e-6 per °C (ISO 1768:1975 clause 3)', () => {
  expect(GLASS_EXPANSION_PER_C).toBe(25e-6)
})

test('below 20 °C the correction is taken off, above it is added (UC Davis laboratory note)', () => {
  expect(addedPoints(1.05, 15)).toBeLessThan(0)
  expect(addedPoints(1.05, 25)).toBeGreaterThan(0)
})

test.each([
  [1.01, 28, 1.88],
  [1.09, 8, -2.72],
])(
  'the short polynomial of our own fit gives the same at %f and %f °C: %f points',
  (reading, celsius, points) => {
    const d = celsius - 20
    const g = 1000 * (reading - 1)
    const short =
      0.181956 * d +
      0.00552027 * d ** 2 -
      2.62314e-5 * d ** 3 +
      1.116173e-3 * d * g -
      1.320117e-5 * d ** 2 * g
    expect(Math.abs(short - points)).toBeLessThan(0.02)
    expect(Math.abs(short - addedPoints(reading, celsius))).toBeLessThan(0.05)
  },
)

test("trap: water's expansion alone falls 1.3 points short at 1.100 and 40 °C, 0.4 at 25 °C", () => {
  const waterOnly = (t: number): number => {
    const glass = 1 + GLASS_EXPANSION_PER_C * (t - 20)
    return 1000 * (1.1 * (waterDensity(20) / waterDensity(t) / glass) - 1.1)
  }
  expect(addedPoints(1.1, 40) - waterOnly(40)).toBeGreaterThan(1.1)
  expect(addedPoints(1.1, 40) - waterOnly(40)).toBeLessThan(1.6)
  expect(addedPoints(1.1, 25) - waterOnly(25)).toBeGreaterThan(0.3)
})

describe("an instrument's own offset", () => {
  test('is what brings plain water to 1.000', () => {
    expect(hydrometerOffset({ waterReading: 1.002, waterTemperatureC: 20 })).toBeCloseTo(-0.002, 9)
    const offset = hydrometerOffset({ waterReading: 0.9975, waterTemperatureC: 27 })
    expect(correctGravity({ reading: 0.9975, temperatureC: 27, offset })).toBeCloseTo(1, 9)
  })

  test('of a true 60 °F instrument in water at 20 °C is 0, though it reads 0.9993', () => {
    const reads = 1 - 0.0007
    expect(
      Math.abs(
        hydrometerOffset({ waterReading: reads, waterTemperatureC: 20, calibrationTemperatureC: 140 / 9 }),
      ),
    ).toBeLessThan(0.00005)
  })

  test('is added before the correction', () => {
    const with2 = correctGravity({ reading: 1.05, temperatureC: 25, offset: 0.002 })
    expect(with2).toBeCloseTo(correctGravity({ reading: 1.052, temperatureC: 25 }), 12)
  })
})

describe('out of range', () => {
  test.each([
    [{ reading: 1.05, temperatureC: 41 }, /temperatureC is 41: allowed 5 to 40/],
    [{ reading: 1.05, temperatureC: 4.9 }, /temperatureC/],
    [{ reading: 0.979, temperatureC: 20 }, /reading is 0.979: allowed 0.98 to 1.16/],
    [{ reading: 1050, temperatureC: 20 }, /reading is 1050/],
    [{ reading: Number.NaN, temperatureC: 20 }, /reading is NaN/],
    [{ reading: 1.05, temperatureC: Number.POSITIVE_INFINITY }, /temperatureC is Infinity/],
    [{ reading: 1.05, temperatureC: 20, calibrationTemperatureC: 60 }, /calibrationTemperatureC is 60/],
    [{ reading: 1.05, temperatureC: 20, offset: 0.5 }, /offset is 0.5/],
  ])('%o is refused by name', (input, message) => {
    expect(() => correctGravity(input)).toThrow(RangeError)
    expect(() => correctGravity(input)).toThrow(message)
  })
})
