import { describe, expect, test } from 'vitest'
import {
  drySurvival,
  hoursToActivity,
  lotBelief,
  packetViability,
  pitchAdvice,
  type LotOutcome,
  type Viability,
} from '#shared/brewing/index'
import { DRY_ACTIVATION_J_PER_MOL, OPENED_FACTOR } from '#shared/brewing/judgement'

const MODEL = 'default storage model: 0.22 a year at 20 °C, 60 kJ/mol'

describe('sealed dry yeast', () => {
  test.each([
    [4, 1, 0.948],
    [4, 2, 0.899],
    [20, 1, 0.803],
    [20, 2, 0.644],
    [25, 1, 0.717],
    [25, 2, 0.514],
  ])(`%f °C, %f years: %f alive (${MODEL})`, (temperatureC, years, alive) => {
    expect(Math.abs(drySurvival({ years, temperatureC }) - alive)).toBeLessThanOrEqual(0.003)
  })

  test('Q10 between 15 and 25 °C is 2.32 (same model)', () => {
    const rate = (temperatureC: number): number => -Math.log(drySurvival({ years: 1, temperatureC }))
    expect(Math.abs(rate(25) / rate(15) - 2.32)).toBeLessThanOrEqual(0.02)
  })

  test('loses 5 ± 3 % a year at 4 °C and about 20 % at 20 °C (a technologist, seen, weak)', () => {
    expect(Math.abs(100 * (1 - drySurvival({ years: 1, temperatureC: 4 })) - 5)).toBeLessThanOrEqual(3)
    expect(Math.abs(100 * (1 - drySurvival({ years: 1, temperatureC: 20 })) - 20)).toBeLessThanOrEqual(3)
  })

  test.each([
    ['20 % a year at 20 °C and 5 % at 4 °C', 0.2, 293.15, 0.05, 277.15, 62.1],
    ['1.7 % a month at 20 °C and 0.6 % at 5 °C', 0.017, 293.15, 0.006, 278.15, 47.3],
  ])('activation energy from %s (two-point Arrhenius)', (_name, warm, warmK, cold, coldK, kJ) => {
    const ratio = Math.log(1 - warm) / Math.log(1 - cold)
    const energy = (8.314462e-3 * Math.log(ratio)) / (1 / coldK - 1 / warmK)
    expect(Math.abs(energy - kJ)).toBeLessThanOrEqual(1)
    // The default lies between the two.
    expect(DRY_ACTIVATION_J_PER_MOL / 1000).toBeGreaterThan(47.3)
    expect(DRY_ACTIVATION_J_PER_MOL / 1000).toBeLessThan(62.1)
  })

  test('trap: above 30 °C the model is not stretched, for the loss there is far faster (90 % a month at 40 °C)', () => {
    expect(() => drySurvival({ years: 1 / 12, temperatureC: 37 })).toThrow(
      /temperatureC is 37: allowed -20 to 30/,
    )
  })
})

describe('a packet', () => {
  const fridge = { form: 'dry', madeOn: '2024-01-01', bestBefore: '2026-01-01', storage: 'fridge' } as const

  test('two years in the fridge: 0.90, within its band', () => {
    const packet = packetViability({ ...fridge, on: '2026-01-01' })
    expect(Math.abs(packet.estimate - 0.899)).toBeLessThanOrEqual(0.002)
    expect(packet.low).toBeLessThan(packet.estimate)
    expect(packet.high).toBeGreaterThan(packet.estimate)
    expect(packet.reasons.length).toBeGreaterThan(0)
  })

  test('one year on the shelf: 0.80', () => {
    const packet = packetViability({ ...fridge, storage: 'shelf', on: '2024-12-31' })
    expect(Math.abs(packet.estimate - 0.803)).toBeLessThanOrEqual(0.002)
  })

  test('moved: half a year on the shelf, then the fridge, lies between the two', () => {
    const moved = packetViability({
      ...fridge,
      storage: [
        { from: '2024-01-01', storage: 'shelf' },
        { from: '2024-07-01', storage: 'fridge' },
      ],
      on: '2025-01-01',
    })
    const always = packetViability({ ...fridge, on: '2025-01-01' })
    const never = packetViability({ ...fridge, storage: 'shelf', on: '2025-01-01' })
    expect(moved.estimate).toBeLessThan(always.estimate)
    expect(moved.estimate).toBeGreaterThan(never.estimate)
    const half = drySurvival({ years: 182 / 365.25, temperatureC: 20 })
    expect(moved.estimate).toBeCloseTo(half * drySurvival({ years: 184 / 365.25, temperatureC: 4 }), 6)
  })

  test('opened, it loses ten times as fast from that day (5–20 times, from memory, weak)', () => {
    const open = packetViability({ ...fridge, storage: 'shelf', openedOn: '2024-07-01', on: '2025-01-01' })
    const shut = drySurvival({ years: 182 / 365.25, temperatureC: 20 })
    const after = drySurvival({ years: (OPENED_FACTOR * 184) / 365.25, temperatureC: 20 })
    expect(open.estimate).toBeCloseTo(shut * after, 6)
    expect(open.low / open.estimate).toBeLessThan(0.5)
    expect(open.reasons).toContain('Open for 184 days')
  })

  test('opened later than the day asked about, it is still sealed', () => {
    const later = packetViability({ ...fridge, openedOn: '2025-06-01', on: '2025-01-01' })
    expect(later.estimate).toBe(packetViability({ ...fridge, on: '2025-01-01' }).estimate)
  })

  test('liquid yeast loses 20–25 % a month at 4 °C (from memory)', () => {
    const month = packetViability({
      form: 'liquid',
      madeOn: '2026-01-01',
      bestBefore: '2026-07-01',
      storage: 'fridge',
      on: '2026-01-31',
    })
    expect(1 - month.estimate).toBeGreaterThan(0.2)
    expect(1 - month.estimate).toBeLessThan(0.25)
  })

  test('freezing keeps dry yeast and ruins wet', () => {
    const on = '2026-03-01'
    const dry = packetViability({
      form: 'dry',
      madeOn: '2025-03-01',
      bestBefore: null,
      storage: 'freezer',
      on,
    })
    const wet = packetViability({
      form: 'liquid',
      madeOn: '2026-02-01',
      bestBefore: null,
      storage: 'freezer',
      on,
    })
    expect(dry.estimate).toBeGreaterThan(0.98)
    expect(wet.estimate).toBeLessThan(0.1)
    expect(wet.reasons.join(' ')).toMatch(/ice/)
  })

  test('without a packing day it goes by best-before, and says so', () => {
    const packet = packetViability({
      form: 'dry',
      bestBefore: '2026-01-01',
      storage: 'fridge',
      on: '2026-01-01',
    })
    expect(Math.abs(packet.estimate - 0.899)).toBeLessThan(0.003)
    expect(packet.reasons[0]).toMatch(/best-before/)
  })

  test.each([
    [{ ...fridge, on: '2023-12-31' }, /madeOn is "2024-01-01": allowed up to 2023-12-31/],
    [{ ...fridge, on: '2026-02-30' }, /on is "2026-02-30": a day as YYYY-MM-DD/],
    [{ ...fridge, bestBefore: '2023-01-01', on: '2025-01-01' }, /bestBefore/],
    [{ ...fridge, openedOn: '2023-01-01', on: '2025-01-01' }, /openedOn/],
    [{ form: 'dry', storage: 'fridge', on: '2025-01-01' } as const, /madeOn or bestBefore is needed/],
    [{ ...fridge, storage: [], on: '2025-01-01' }, /storage/],
  ])('%o is refused by name', (input, message) => {
    expect(() => packetViability(input)).toThrow(RangeError)
    expect(() => packetViability(input)).toThrow(message)
  })

  test('an unknown word is refused with the words there are', () => {
    expect(() => packetViability({ ...fridge, storage: 'cellar' as 'shelf', on: '2025-01-01' })).toThrow(
      /storage is "cellar": allowed freezer, fridge, shelf/,
    )
  })
})

describe('hours to the first sign', () => {
  test.each([
    [1, 8.6],
    [0.5, 12],
    [0.1, 20.1],
    [0.01, 31.6],
  ])(
    '5e6 cells/mL at viability %f: %f h (lag model; t0 4 h, 0.20 /h, N* 1e7, 0.8, from memory)',
    (viability, hours) => {
      expect(Math.abs(hoursToActivity({ cellsPerMl: 5e6, viability }) - hours)).toBeLessThanOrEqual(0.1)
    },
  )

  test('a tenfold loss of life adds 11.51 h (ln 10 / 0.20)', () => {
    const more =
      hoursToActivity({ cellsPerMl: 5e6, viability: 0.05 }) -
      hoursToActivity({ cellsPerMl: 5e6, viability: 0.5 })
    expect(Math.abs(more - 11.51)).toBeLessThanOrEqual(0.01)
  })
})

describe('belief in a lot', () => {
  const below = (grid: readonly { viability: number; probability: number }[], limit: number): number =>
    grid.filter((cell) => cell.viability < limit).reduce((sum, cell) => sum + cell.probability, 0)

  test('before any pitch: mean 0.663 (grid; 0.88 Beta(6,2), 0.09 log-uniform, 0.03 dead)', () => {
    expect(Math.abs(lotBelief({}, []).mean - 0.663)).toBeLessThanOrEqual(0.01)
  })

  test.each<[string, LotOutcome, number, number | undefined, number | undefined]>([
    ['started at 8 h', { outcome: 'started', hoursToActivity: 8 }, 0.78, undefined, 0],
    ['started at 24 h', { outcome: 'started', hoursToActivity: 24 }, 0.351, undefined, 0.401],
    ['never started by 72 h', { outcome: 'none', hoursToActivity: 72 }, 0.247, 0.558, 0.67],
  ])('%s: mean %f (worked grid posterior)', (_name, outcome, mean, dead, low) => {
    const belief = lotBelief({ healthy: 0.88, degraded: 0.09, dead: 0.03, alpha: 6, beta: 2 }, [outcome])
    expect(Math.abs(belief.mean - mean)).toBeLessThanOrEqual(0.015)
    if (dead !== undefined) expect(Math.abs(belief.dead - dead)).toBeLessThanOrEqual(0.015)
    if (low !== undefined) expect(Math.abs(below(belief.grid, 0.1) - low)).toBeLessThanOrEqual(0.015)
  })

  test('trap: with a Beta alone, "never started" teaches nothing: the mean stays at 0.75', () => {
    const belief = lotBelief({ healthy: 1, degraded: 0, dead: 0 }, [{ outcome: 'none', hoursToActivity: 72 }])
    expect(Math.abs(belief.mean - 0.75)).toBeLessThanOrEqual(0.005)
  })

  test('two failures are worse than one, and a start afterwards clears it of being dead', () => {
    const failed: LotOutcome = { outcome: 'none', hoursToActivity: 72 }
    const once = lotBelief({}, [failed])
    const twice = lotBelief({}, [failed, failed])
    const revived = lotBelief({}, [failed, { outcome: 'started', hoursToActivity: 20 }])
    expect(twice.dead).toBeGreaterThan(0.85)
    expect(twice.dead).toBeGreaterThan(once.dead)
    expect(twice.mean).toBeLessThan(once.mean)
    expect(revived.dead).toBeLessThan(0.01)
  })

  test('forty failures leave numbers, not NaN', () => {
    const belief = lotBelief(
      {},
      Array.from({ length: 40 }, () => ({ outcome: 'none' as const })),
    )
    expect(belief.dead).toBeGreaterThan(0.999)
    expect(belief.mean).toBeGreaterThanOrEqual(0)
    expect(belief.low).toBe(0)
  })

  test('months since pull it back towards the prior', () => {
    const failed: LotOutcome = { outcome: 'none', hoursToActivity: 72 }
    const fresh = lotBelief({}, [failed]).dead
    const old = lotBelief({ monthsSince: 12 }, [failed]).dead
    expect(old).toBeLessThan(fresh)
    expect(old).toBeGreaterThan(0.03)
  })

  test("a packet's own estimate shapes the healthy part", () => {
    const strong = lotBelief({ estimate: 0.95, low: 0.85, high: 0.99 }, [])
    const weak = lotBelief({ estimate: 0.3, low: 0.1, high: 0.5 }, [])
    expect(strong.mean).toBeGreaterThan(0.8)
    expect(weak.mean).toBeLessThan(0.35)
  })

  test('what is refused', () => {
    expect(() => lotBelief({ dead: 2 }, [])).toThrow(/dead is 2: allowed 0 to 1/)
    expect(() => lotBelief({}, [{ outcome: 'started', hoursToActivity: -3 }])).toThrow(
      /outcomes\[0\].hoursToActivity/,
    )
    expect(() => lotBelief({ healthy: 0, degraded: 0, dead: 0 }, [])).toThrow(RangeError)
  })
})

describe('how much to pitch', () => {
  const five = { form: 'dry', volumeLitres: 5, availableGrams: 5 } as const

  test.each(['wine', 'mead', 'cider', 'ale', 'other'] as const)(
    'trap: 5 g of sound dry yeast in 5 L of %s is not called too little',
    (use) => {
      for (const og of [1.045, 1.066, 1.1]) {
        expect(pitchAdvice({ ...five, viability: 0.9, og, use }).verdict).toBe('good')
      }
    },
  )

  test('0.25 g/L at 2e10 cells/g is 5e6 cells/mL (AWRI guide); ours reckons 1e10/g, so twice that', () => {
    const { grams, cellsPerMl } = pitchAdvice({
      form: 'dry',
      viability: 1,
      volumeLitres: 5,
      og: 1.08,
      use: 'wine',
    })
    expect((0.25 * 2e10) / 1000).toBe(5e6)
    expect(grams).toBeCloseTo(2 * 0.25 * 5, 9)
    expect(cellsPerMl).toBeCloseTo(5e6, 3)
  })

  test('5 g at 1e10/g, 30 % alive, in a gallon: 3.3e6 living cells/mL (arithmetic)', () => {
    const advice = pitchAdvice({ ...five, volumeLitres: 4.54609, viability: 0.3, og: 1.05, use: 'cider' })
    expect(Math.abs(advice.cellsPerMl - 3_299_539)).toBeLessThanOrEqual(1000)
  })

  test('beer at 16.1 °P by the brewery rule: 6–12 g in 5 L at the middle and top of the range (from memory)', () => {
    const advice = pitchAdvice({ form: 'dry', viability: 1, volumeLitres: 5, og: 1.0658, use: 'ale' })
    expect(advice.grams).toBeGreaterThan(5.8)
    expect(advice.high).toBeLessThan(12.3)
  })

  test('a rich must takes up to double (AWRI)', () => {
    const plain = pitchAdvice({ form: 'dry', viability: 1, volumeLitres: 5, og: 1.09, use: 'mead' })
    const rich = pitchAdvice({ form: 'dry', viability: 1, volumeLitres: 5, og: 1.14, use: 'mead' })
    expect(rich.grams / plain.grams).toBeCloseTo(2, 9)
  })

  test.each([
    [0.9, 'good'],
    [0.65, 'pitch-more'],
    [0.35, 'prove-first'],
    [0.1, 'do-not-rely'],
  ] as const)('viability %f: %s', (viability, verdict) => {
    const advice = pitchAdvice({ form: 'dry', viability, volumeLitres: 5, og: 1.08, use: 'mead' })
    expect(advice.verdict).toBe(verdict)
    expect(advice.reasons.length).toBeGreaterThan(1)
    expect(advice.low).toBeLessThan(advice.grams)
    expect(advice.high).toBeGreaterThan(advice.grams)
  })

  test('with less than the range there is, it says pitch more', () => {
    const advice = pitchAdvice({ ...five, availableGrams: 0.5, viability: 0.95, og: 1.08, use: 'mead' })
    expect(advice.verdict).toBe('pitch-more')
    expect(advice.reasons.join(' ')).toMatch(/second packet/)
  })

  test('rehydration: ten times its weight of water at 35–40 °C, 15–30 min (from memory); none for wet yeast', () => {
    const advice = pitchAdvice({ ...five, viability: 1, og: 1.08, use: 'mead' })
    expect(advice.rehydration).toMatchObject({
      waterMl: 50,
      temperatureC: { low: 35, high: 40 },
      minutes: { low: 15, high: 30 },
    })
    expect(
      pitchAdvice({ ...five, form: 'slurry', viability: 1, og: 1.08, use: 'mead' }).rehydration,
    ).toBeUndefined()
  })

  test("takes a packet's answer as it is, and a wider band means a later worst start", () => {
    const packet: Viability = { estimate: 0.7, low: 0.2, high: 0.9, reasons: [], factors: [] }
    const wide = pitchAdvice({ ...five, viability: packet, og: 1.08, use: 'mead' })
    const sure = pitchAdvice({ ...five, viability: 0.7, og: 1.08, use: 'mead' })
    expect(wide.grams).toBe(sure.grams)
    expect(wide.activityHours.late).toBeGreaterThan(sure.activityHours.late)
    expect(wide.expectedHoursToActivity).toBe(sure.expectedHoursToActivity)
  })

  test('what is refused', () => {
    expect(() => pitchAdvice({ ...five, viability: 1.2, og: 1.08, use: 'mead' })).toThrow(/viability is 1.2/)
    expect(() => pitchAdvice({ ...five, viability: 0.5, og: 1.08, use: 'tea' as 'mead' })).toThrow(
      /use is "tea"/,
    )
  })
})
