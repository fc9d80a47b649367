import { describe, expect, test } from 'vitest'
import {
  bottleCount,
  co2Litres,
  honeyGravity,
  honeyWaterPercent,
  INGREDIENTS,
  mustFromIngredients,
  mustLine,
  roomCo2,
  sugarsFromEquivalents,
} from '#shared/brewing/index'
import { SUCROSE_AS_SIMPLE_SUGARS } from '#shared/brewing/ingredients'

describe('bottles', () => {
  test('4.5 L racked twice off fruit fills five of 750 mL (common practice; 5–10 % a racking, from memory)', () => {
    for (const lossFraction of [0.05, 0.07, 0.08]) {
      expect(bottleCount({ volumeLitres: 4.5, rackings: 2, lossFraction, bottleMl: 750 }).bottles).toBe(5)
    }
  })

  test('4.546 L less 0.40 L: five of 750 mL and 0.40 L over (arithmetic)', () => {
    const count = bottleCount({ volumeLitres: 4.546 - 0.4, rackings: 0, lossFraction: 0, bottleMl: 750 })
    expect(count.bottles).toBe(5)
    expect(count.leftLitres).toBeCloseTo(0.396, 3)
  })

  test('5.0 L after 0.4 L of losses: nine of 500 mL (arithmetic)', () => {
    expect(bottleCount({ volumeLitres: 4.6, rackings: 0, lossFraction: 0, bottleMl: 500 }).bottles).toBe(9)
  })

  test('no bottle is lost to rounding', () => {
    const count = bottleCount({ volumeLitres: 2.1, rackings: 0, lossFraction: 0, bottleMl: 700 })
    expect(count.bottles).toBe(3)
    expect(Object.is(count.leftLitres, -0)).toBe(false)
  })

  test('refuses part of a racking', () => {
    expect(() => bottleCount({ volumeLitres: 5, rackings: 1.5, lossFraction: 0, bottleMl: 500 })).toThrow(
      /rackings is 1.5/,
    )
  })
})

describe('CO2 in a room', () => {
  test('5 L fermenting out 68 points gives 184 L, 6100 ppm if trapped in 30 m³ (0.985 g/L a point)', () => {
    const { litres } = co2Litres({ volumeLitres: 5, points: 68 })
    expect(Math.abs(litres - 184)).toBeLessThanOrEqual(2)
    expect(Math.abs((litres / 30_000) * 1e6 - 6100)).toBeLessThanOrEqual(60)
  })

  test('one batch at its peak raises 30 m³ at 0.5 changes an hour by 153 ppm (well-mixed balance)', () => {
    const room = roomCo2({ batches: 1, roomM3: 30, airChangesPerHour: 0.5 })
    expect(Math.abs(room.risePpm - 153)).toBeLessThanOrEqual(10)
    expect(room.ppm).toBeCloseTo(420 + room.risePpm, 9)
  })

  test('about 29 of them reach the 8-hour limit of 5000 ppm (EH40)', () => {
    const at = (batches: number): number => roomCo2({ batches, roomM3: 30, airChangesPerHour: 0.5 }).ppm
    expect(at(27)).toBeLessThan(5000)
    expect(at(31)).toBeGreaterThan(5000)
    expect(roomCo2({ batches: 31, roomM3: 30, airChangesPerHour: 0.5 }).shareOfLimit).toBeGreaterThan(1)
  })

  test('takes a list of what works now', () => {
    const list = roomCo2({
      batches: [{ volumeLitres: 5, pointsPerDay: 20.4 }],
      roomM3: 30,
      airChangesPerHour: 0.5,
    })
    expect(list.risePpm).toBeCloseTo(roomCo2({ batches: 1, roomM3: 30, airChangesPerHour: 0.5 }).risePpm, 9)
  })

  test('a sealed room has no answer', () => {
    expect(() => roomCo2({ batches: 1, roomM3: 30, airChangesPerHour: 0 })).toThrow(/airChangesPerHour is 0/)
  })
})

describe('honey', () => {
  test.each([
    [1.494, 17.0],
    [1.4915, 18.0],
    [1.4865, 20.0],
  ])('refractive index %f: %f %% water (Chataway, reprinted by Bogdanov)', (index, water) => {
    expect(Math.abs(honeyWaterPercent(index) - water)).toBeLessThanOrEqual(0.06)
  })

  test('trap: with 1.73190 as printed, not read as bar notation, it is absurd', () => {
    expect((1.7319 - Math.log10(0.494)) / 0.002243).toBeGreaterThan(900)
    expect(honeyWaterPercent(1.494)).toBeLessThan(17.1)
  })

  test.each([
    [17, 1.423],
    [18, 1.417],
  ])('at %f %% water its gravity is %f ± 0.003 (trade and association notes, weak)', (water, sg) => {
    expect(Math.abs(honeyGravity(water) - sg)).toBeLessThanOrEqual(0.003)
  })
})

describe('the table of ingredients', () => {
  const all = Object.entries(INGREDIENTS)

  test('holds at least forty, each with a source and a number in it', () => {
    expect(all.length).toBeGreaterThanOrEqual(40)
    for (const [, row] of all) {
      expect(row.dataset).toMatch(/USDA SR|UK CoFID|common practice/)
      if (row.dataset === 'USDA SR') expect(row.table).toMatch(/^\d{5}$/)
      if (row.dataset === 'UK CoFID') expect(row.table).toMatch(/^\d{2}-\d{3}$/)
    }
  })

  test.each(all)('%s adds up', (_id, row) => {
    expect(row.waterFraction + row.solubleFraction).toBeLessThanOrEqual(1 + 1e-9)
    expect(row.solubleFraction).toBeGreaterThan(0)
    expect(row.fermentableFraction).toBeGreaterThan(0.2)
    expect(row.fermentableFraction).toBeLessThanOrEqual(1)
  })

  test.each([
    ['honey', 17.1],
    ['applesauce-sweet', 81.98],
    ['malt-syrup', 21.1],
    ['molasses', 21.87],
    ['strawberry', 90.95],
    ['grape', 80.54],
    ['apple', 85.56],
    ['pear', 83.96],
    ['raisin', 15.43],
  ])('%s holds %f g water in 100 g (USDA SR)', (id, water) => {
    expect(INGREDIENTS[id]?.waterFraction).toBeCloseTo(water / 100, 9)
  })

  test.each([
    ['honey-uk', 17.5],
    ['black-treacle', 28.5],
    ['stewed-apple', 87.3],
    ['stewed-apple-sweet', 77.5],
    ['blackcurrant', 77.4],
    ['elderberry', 80.3],
    ['golden-syrup', 20],
  ])('%s holds %f g water in 100 g (UK CoFID)', (id, water) => {
    expect(INGREDIENTS[id]?.waterFraction).toBeCloseTo(water / 100, 9)
  })

  test.each([
    ['applesauce', 9.39],
    ['blackberry', 4.88],
    ['raspberry', 4.42],
    ['pear', 9.75],
    ['grape', 15.48],
    ['raisin', 59.19],
    ['plum', 9.92],
    ['sour-cherry', 8.49],
    ['apple-juice', 9.62],
  ])('%s holds %f g sugars in 100 g (USDA SR)', (id, sugars) => {
    const row = INGREDIENTS[id]
    expect((row?.solubleFraction ?? 0) * (row?.fermentableFraction ?? 0)).toBeCloseTo(sugars / 100, 6)
  })

  test('trap: UK tables list white sugar as 105 g in 100 g; 100 g sucrose counts as 105.26 (molar masses)', () => {
    expect(Math.abs(100 * SUCROSE_AS_SIMPLE_SUGARS - 105.26)).toBeLessThanOrEqual(0.02)
    expect(sugarsFromEquivalents({ simple: 0, sucroseEquivalents: 105 })).toBeLessThan(100)
    const golden = sugarsFromEquivalents({ simple: 23.1 + 23, sucroseEquivalents: 32.8 })
    expect(Math.abs(golden - 77.3)).toBeLessThanOrEqual(0.2)
  })

  test('clear apple juice reads 1.0465 (11.56 % solids, ICUMSA)', () => {
    const { og } = mustFromIngredients({ lines: [mustLine('apple-juice', 1000)] })
    expect(Math.abs(og - 1.0465)).toBeLessThanOrEqual(0.001)
  })

  test('unsweetened apple purée adds about 7 points a kilogram in 5 L from its sugars', () => {
    const row = mustLine('applesauce', 1000)
    const sugars = { ...row, solubleFraction: row.solubleFraction * (row.fermentableFraction ?? 1) }
    const { og } = mustFromIngredients({ lines: [sugars], volumeLitres: 5 })
    expect(Math.abs((og - 1) * 1000 - 7.2)).toBeLessThan(0.5)
  })

  test('a name that is not in it is refused', () => {
    expect(() => mustLine('moonlight', 100)).toThrow(/"moonlight"/)
  })
})
