import { describe, expect, test } from 'vitest'
import { shareLeft } from '#shared/brewing/ferment-grid'
import { fitFermentation, type FermentInput, type GravityReading } from '#shared/brewing/index'
import {
  dayOf,
  dayOfShare,
  instantOf,
  inventFerment,
  normal,
  trueFinish,
  trueGravity,
  type Ferment,
} from '#tests/support/ferments'
import { seeded } from '#tests/support/random'

const cider: Ferment = { shape: 'logistic', rate: 0.9, delay: 2.7, og: 1.08, fg: 1, expectedFg: 1 }

const readAt = (ferment: Ferment, days: readonly number[], random = seeded(1).next): GravityReading[] =>
  days.map((day) => ({ at: instantOf(day), gravity: trueGravity(ferment, day) + 0.001 * normal(random) }))

const asked = (ferment: Ferment, readings: GravityReading[], day: number): FermentInput => ({
  readings,
  og: ferment.og,
  expectedFg: ferment.expectedFg,
  on: dayOf(day),
  pitchedAt: instantOf(0),
})

describe('the two shapes', () => {
  test.each([
    [0, 1.075],
    [3, 1.04],
    [7, 1.0021],
  ])('logistic 1.080 to 1.000, k 0.9, M 3: day %f reads %f (Speers et al. 2003)', (day, gravity) => {
    expect(Math.abs(trueGravity(cider, day) - gravity)).toBeLessThanOrEqual(0.0001)
  })

  test('its steepest fall is (SGi − SGf) k/4: 15.3 points a day for 68 points and k 0.9', () => {
    const steep = { ...cider, og: 1.068 }
    const slope = (trueGravity(steep, 2.999) - trueGravity(steep, 3.001)) / 0.002
    expect(Math.abs(slope * 1000 - 15.3)).toBeLessThanOrEqual(0.01)
  })

  test.each([
    [1, 1.0599],
    [7, 1.0066],
  ])(
    'Gompertz from 1.066, D 68, 12 points a day, lag 0.75: day %f reads %f (Zwietering, from memory)',
    (day, gravity) => {
      const rate = (12 * Math.E) / 68
      const left = shareLeft('gompertz', rate * day - (1 + rate * 0.75))
      expect(Math.abs(0.998 + 0.068 * left - gravity)).toBeLessThanOrEqual(0.0001)
    },
  )
})

describe('one ferment', () => {
  test('in mid-course: active, with its end within the band and the curve near the readings', () => {
    const days = [0.3, 1, 2, 3, 4, 5]
    const forecast = fitFermentation(asked(cider, readAt(cider, days), 5))
    expect(forecast.status).toMatch(/active|slowing/)
    const end = dayOf(trueFinish(cider))
    expect(forecast.finishOn && forecast.finishOn.early <= end && end <= forecast.finishOn.late).toBe(true)
    expect(Math.abs(forecast.finalGravity - 1)).toBeLessThan(0.003)
    for (const day of days)
      expect(Math.abs(forecast.curve(instantOf(day)) - trueGravity(cider, day))).toBeLessThan(0.003)
    const band = forecast.band(instantOf(6))
    expect(band.low).toBeLessThanOrEqual(band.high)
    expect(forecast.residual).toBeLessThan(0.002)
  })

  test('that lies flat for longer than any ferment is compared with is stuck, and not done', () => {
    const fall = readAt(cider, [0.3, 1, 2, 3])
    const flat = [4, 7, 11, 14, 17].map((day) => ({
      at: instantOf(day),
      gravity: trueGravity(cider, 3) + 0.0003 * (day % 2),
    }))
    const forecast = fitFermentation(asked(cider, [...fall, ...flat], 17))
    expect(forecast.status).toBe('stuck')
    expect(forecast.finishOn).toBeUndefined()
  })

  test('says unknown from too little, and gives no date', () => {
    for (const days of [[], [0.5], [0.5, 2], [0.5, 0.7, 0.9]]) {
      const forecast = fitFermentation(asked(cider, readAt(cider, days), 3))
      expect(forecast.status).toBe('unknown')
      expect(forecast.finishOn).toBeUndefined()
      expect(Number.isFinite(forecast.finalGravity)).toBe(true)
      expect(Number.isFinite(forecast.residual)).toBe(true)
    }
  })

  test('lag: nothing has moved in two days', () => {
    const slow = { ...cider, delay: 5 }
    expect(fitFermentation(asked(slow, readAt(slow, [0.2, 0.8, 1.4]), 1.4)).status).toBe('lag')
  })

  test('finished: a week within a point, where it should end', () => {
    const forecast = fitFermentation(asked(cider, readAt(cider, [1, 3, 5, 12, 16, 20]), 20))
    expect(forecast.status).toBe('finished')
  })

  test('not finished on three equal readings in three days', () => {
    const flat = [9, 10, 11].map((day) => ({ at: instantOf(day), gravity: 1.001 }))
    const forecast = fitFermentation(asked(cider, [...readAt(cider, [1, 3, 5]), ...flat], 11))
    expect(forecast.status).toBe('slowing')
  })

  test('stuck at 1.030: no date, and its end is where it stands', () => {
    const days = [0.3, 1, 2, 3, 3.5, 4.5, 5.5, 6.5, 7.5]
    const random = seeded(3).next
    const readings = days.map((day) => ({
      at: instantOf(day),
      gravity: trueGravity(cider, Math.min(day, 3.5)) + 0.001 * normal(random),
    }))
    const forecast = fitFermentation(asked(cider, readings, 7.5))
    expect(forecast.status).toBe('stuck')
    expect(forecast.finishOn).toBeUndefined()
    expect(Math.abs(forecast.finalGravity - trueGravity(cider, 3.5))).toBeLessThan(0.002)
  })

  test('never started at all: stuck, not lag, after a week', () => {
    const readings = [0.2, 2, 4, 6, 8].map((day) => ({ at: instantOf(day), gravity: 1.08 }))
    expect(fitFermentation(asked(cider, readings, 8)).status).toBe('stuck')
  })

  test('one slip of the eye hardly moves the date', () => {
    const days = [0.3, 1, 2, 3, 4, 5, 6]
    const clean = readAt(cider, days)
    const slipped = clean.map((reading, index) =>
      index === 3 ? { ...reading, gravity: reading.gravity + 0.01 } : reading,
    )
    const likely = (readings: GravityReading[]): number =>
      Date.parse(fitFermentation(asked(cider, readings, 6)).finishOn?.likely ?? '') / 86_400_000
    expect(Math.abs(likely(clean) - likely(slipped))).toBeLessThanOrEqual(1)
  })

  test('readings after the day asked about change nothing', () => {
    const readings = readAt(cider, [0.3, 1, 2, 3, 4, 9, 12])
    const then = fitFermentation(asked(cider, readings, 4))
    const only = fitFermentation(asked(cider, readings.slice(0, 5), 4))
    expect(then.finishOn).toEqual(only.finishOn)
    expect(then.status).toBe(only.status)
  })

  test('order of the readings does not matter', () => {
    const readings = readAt(cider, [0.3, 1, 2, 3, 4])
    const forecast = fitFermentation(asked(cider, [...readings].reverse(), 4))
    expect(forecast.finishOn).toEqual(fitFermentation(asked(cider, readings, 4)).finishOn)
  })

  test.each([
    [{ og: 2 }, /og is 2: allowed 1 to 1.2/],
    [{ expectedFg: 1.09 }, /expectedFg is 1.09: allowed 0.97 to 1.08/],
    [{ on: '2026-13-01' }, /on is/],
    [{ readings: [{ at: 'never', gravity: 1 }] }, /readings\[0\].at is "never"/],
    [{ readings: [{ at: instantOf(1), gravity: Number.NaN }] }, /readings\[0\].gravity is NaN/],
  ])('refuses %o by name', (wrong, message) => {
    const input = { ...asked(cider, readAt(cider, [1, 2, 3]), 3), ...wrong }
    expect(() => fitFermentation(input)).toThrow(RangeError)
    expect(() => fitFermentation(input)).toThrow(message)
  })
})

/** Days on which an invented ferment is looked at: 4 to 12 readings, up to where 3–60 % is still to come. */
function lookedAt(random: () => number, ferment: Ferment): { days: number[]; until: number } {
  const until = dayOfShare(ferment, 0.03 + 0.57 * random()) + 0.5
  const count = 4 + Math.floor(random() * 9)
  return { days: Array.from({ length: count }, (_, i) => 0.3 + ((until - 0.3) * i) / (count - 1)), until }
}

describe('five hundred invented ferments, logistic and Gompertz, 15–25 °C, one point of noise', () => {
  test('the finish day lies within its 80 % band in 75–90 % of cases', { timeout: 60_000 }, () => {
    const random = seeded(2026).next
    let given = 0
    let inside = 0
    for (let i = 0; i < 500; i++) {
      const ferment = inventFerment(random)
      const { days, until } = lookedAt(random, ferment)
      const { finishOn } = fitFermentation(asked(ferment, readAt(ferment, days, random), until))
      if (!finishOn) continue
      given += 1
      const end = dayOf(trueFinish(ferment))
      if (finishOn.early <= end && end <= finishOn.late) inside += 1
    }
    expect(given).toBeGreaterThan(450)
    expect(inside / given).toBeGreaterThanOrEqual(0.75)
    expect(inside / given).toBeLessThanOrEqual(0.9)
  })

  test('a halt is found within five days in at least 90 %', { timeout: 60_000 }, () => {
    const random = seeded(90).next
    let halted = 0
    let found = 0
    for (let i = 0; i < 120; i++) {
      const ferment = inventFerment(random)
      const left = 0.1 + 0.5 * random()
      if ((ferment.og - ferment.fg) * left < 0.008) continue
      halted += 1
      const halt = dayOfShare(ferment, left)
      const days: number[] = []
      for (let day = 0.3; day <= halt + 5; day++) days.push(day)
      const readings = days.map((day) => ({
        at: instantOf(day),
        gravity: trueGravity(ferment, Math.min(day, halt)) + 0.001 * normal(random),
      }))
      const stuck = days.some(
        (day, index) =>
          day > halt && fitFermentation(asked(ferment, readings.slice(0, index + 1), day)).status === 'stuck',
      )
      if (stuck) found += 1
    }
    expect(halted).toBeGreaterThan(90)
    expect(found / halted).toBeGreaterThanOrEqual(0.9)
  })

  test(
    'of healthy ones under 5 % are ever called stuck, read every one to three days to a week past the end',
    { timeout: 120_000 },
    () => {
      const random = seeded(5).next
      let alarmed = 0
      const ferments = 100
      for (let i = 0; i < ferments; i++) {
        const ferment = inventFerment(random)
        const every = 1 + Math.floor(random() * 3)
        const readings: GravityReading[] = []
        const until = Math.min(60, trueFinish(ferment) + 7)
        let alarm = false
        for (let day = 0.3; day <= until && !alarm; day += every) {
          readings.push(...readAt(ferment, [day], random))
          alarm = fitFermentation(asked(ferment, readings, day)).status === 'stuck'
        }
        if (alarm) alarmed += 1
      }
      expect(alarmed / ferments).toBeLessThan(0.05)
    },
  )
})
