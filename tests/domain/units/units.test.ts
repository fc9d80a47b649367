import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { formatAmount, formatFigure, parseFigure } from '#shared/units/figure'
import { fromGravity, gravityAsMeant, GRAVITY_UNITS, toGravity } from '#shared/units/gravity'
import { fromGrams, MASS_UNITS, toGrams } from '#shared/units/mass'
import { fromCelsius, TEMPERATURE_UNITS, toCelsius } from '#shared/units/temperature'
import {
  fromLitres,
  LITRES_PER_GALLON,
  LITRES_PER_PINT,
  LITRES_PER_US_GALLON,
  toLitres,
  VOLUME_UNITS,
} from '#shared/units/volume'

describe('reading and writing figures', () => {
  test.each([
    ['1.066', 1.066],
    ['1,066', 1.066],
    [' 4 546,09 ', 4546.09],
    ['\u22122.5', -2.5],
    ['.5', 0.5],
    ['5,', 5],
    ['', undefined],
    ['1.066.2', undefined],
    ['1,066.2', undefined],
    ['ten', undefined],
    ['1e3', undefined],
    ['NaN', undefined],
  ])('%j is %s', (text, expected) => {
    expect(parseFigure(text)).toBe(expected)
  })

  test.each([
    [1.0664, 3, '1.066'],
    [-0.0004, 3, '0.000'],
    [-0, 1, '0.0'],
    [-1.25, 1, '\u22121.3'],
    [Number.NaN, 2, '–'],
    [undefined, 2, '–'],
    [Number.POSITIVE_INFINITY, 0, '–'],
  ])('%s to %i decimals is %s', (value, decimals, expected) => {
    expect(formatFigure(value, decimals)).toBe(expected)
  })

  test.each([
    [0.00784, '0.008'],
    [2.357, '2.36'],
    [2.5, '2.5'],
    [26.805, '26.8'],
    [100, '100'],
    [1493.7, '1490'],
    [0, '0'],
    [Number.NaN, '–'],
  ])('%s is weighed out as %s', (value, expected) => {
    expect(formatAmount(value)).toBe(expected)
  })

  test('what is written can be read again', () => {
    fc.assert(
      fc.property(fc.double({ min: -5000, max: 5000, noNaN: true }), (value) => {
        const again = parseFigure(formatFigure(value, 3))
        return again !== undefined && Math.abs(again - value) <= 0.00051
      }),
      { seed: 7 },
    )
  })
})

describe('units', () => {
  test('a gallon is 4.54609 L, a pint an eighth, a US gallon 3.7854118 L (definitions, from memory)', () => {
    expect(LITRES_PER_GALLON).toBe(4.54609)
    expect(LITRES_PER_PINT).toBeCloseTo(0.56826125, 9)
    expect(LITRES_PER_US_GALLON).toBeCloseTo(3.7854118, 6)
  })

  test('200 US gallons are 757.1 L', () => {
    expect(Math.abs(200 * LITRES_PER_US_GALLON - 757.1)).toBeLessThan(0.1)
  })

  test('68 °F is 20 °C and 60 °F is 15.56 °C', () => {
    expect(toCelsius(68, 'F')).toBe(20)
    expect(toCelsius(60, 'F')).toBeCloseTo(15.556, 3)
  })

  test.each([
    [1066, 1.066],
    [66, 1.066],
    [998, 0.998],
    [1.066, 1.066],
    [5000, 5000],
  ])('gravity typed as %f means %f', (typed, meant) => {
    expect(gravityAsMeant(typed)).toBeCloseTo(meant, 9)
  })

  test('there and back', () => {
    const positive = fc.double({ min: 0.01, max: 5000, noNaN: true })
    fc.assert(
      fc.property(
        positive,
        fc.constantFrom(...VOLUME_UNITS),
        fc.constantFrom(...MASS_UNITS),
        (x, volume, mass) => {
          const litres = Math.abs(fromLitres(toLitres(x, volume), volume) / x - 1)
          return litres < 1e-12 && Math.abs(fromGrams(toGrams(x, mass), mass) / x - 1) < 1e-12
        },
      ),
      { seed: 7 },
    )
    fc.assert(
      fc.property(
        fc.double({ min: 0.98, max: 1.16, noNaN: true }),
        fc.constantFrom(...GRAVITY_UNITS),
        fc.constantFrom(...TEMPERATURE_UNITS),
        (sg, gravity, temperature) =>
          Math.abs(toGravity(fromGravity(sg, gravity), gravity) - sg) < 1e-6 &&
          Math.abs(toCelsius(fromCelsius(sg * 20, temperature), temperature) - sg * 20) < 1e-9,
      ),
      { seed: 7 },
    )
  })
})
