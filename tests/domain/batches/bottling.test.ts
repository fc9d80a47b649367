import { describe, expect, it } from 'vitest'
import { bottlingPlan, expectedBottles, type BottlingFacts } from '#shared/batches/bottling'
import { stepCautions, type CautionFacts } from '#shared/batches/cautions'
import { gateChecks, gateOpensOn } from '#shared/batches/gate-checks'
import { keepUntil, outlastsBy } from '#shared/batches/outlast'
import { dropDone, standingOf, strengthBetween } from '#shared/batches/standing'
import { STEP_KINDS } from '#shared/batches/vocabulary'
import { day } from '#shared/time/day'

const at = (on: string) => `${on}T10:00:00.000Z`
const steady = [
  { at: at('2031-04-01'), gravity: 1.06, temperatureC: 20 },
  { at: at('2031-04-20'), gravity: 1.0, temperatureC: 20 },
  { at: at('2031-04-28'), gravity: 0.999, temperatureC: 20 },
]
const facts: BottlingFacts = {
  readings: steady,
  og: 1.06,
  expectedFg: 0.999,
  volumeLitres: 4.5,
  rackings: 0,
  fruit: false,
  on: '2031-04-29',
}
const sparkling = {
  bottleKind: 'beer' as const,
  bottleMl: 500,
  targetVolumesCo2: 2.4,
  primer: 'sucrose' as const,
  tabletGrams: 1.4,
}
const still = {
  ...sparkling,
  bottleKind: 'still-wine' as const,
  targetVolumesCo2: null,
  primer: 'none' as const,
}

describe('a bottling plan', () => {
  it('doses sugar and says how hard the bottles press, cool and hot', () => {
    const plan = bottlingPlan(facts, sparkling)
    expect(plan.gate.ready).toBe(true)
    // Worked check: 2.4 volumes in 4.5 L at 20 °C take 26.8 g of sucrose (Weiss 1974 and stoichiometry).
    expect(plan.priming?.grams).toBeCloseTo(26.8, 1)
    expect(plan.bottles).toBe(9)
    expect(plan.barInCellar).toBeGreaterThan(0.9)
    expect(plan.barInCellar).toBeLessThan(plan.barOnHotDay)
    expect(plan.barOnHotDay).toBeGreaterThan(2.3)
    expect(plan.warmestC).toBe(20)
  })

  it('counts whole tablets, and judges the gas they really give', () => {
    const plan = bottlingPlan(facts, { ...sparkling, primer: 'tablets' })
    expect(plan.priming).toMatchObject({ primer: 'tablets', tablets: 2 })
    expect(plan.priming?.gramsPerLitre).toBeCloseTo(5.6, 6)
    expect(plan.volumes).toBeCloseTo(0.85 + (5.6 * 0.514) / 1.977, 1)
  })

  it('adds nothing to a still drink', () => {
    const plan = bottlingPlan(facts, still)
    expect(plan.priming).toBeNull()
    expect(plan.gate.ready).toBe(true)
    expect(plan.barInCellar).toBe(0)
  })

  it('is not ready while the gravity still falls, whatever is planned', () => {
    const falling = { ...facts, readings: [...steady.slice(0, 2), { ...steady[2]!, gravity: 0.994 }] }
    expect(bottlingPlan(falling, still).gate.ready).toBe(false)
  })

  it('counts on less from a batch racked off fruit', () => {
    const firm = expectedBottles({ volumeLitres: 4.5, rackings: 2, fruit: false }, 750)
    const pulp = expectedBottles({ volumeLitres: 4.5, rackings: 2, fruit: true }, 750)
    expect(firm.bottles).toBe(5)
    expect(pulp.litres).toBeLessThan(firm.litres)
  })
})

describe('the gate as a list', () => {
  const on = day('2031-04-29')
  const checked = { tag: 'HY-03', offsetSg: -0.002, calibratedOn: day('2031-03-01') }

  it('puts what blocks before what is settled', () => {
    const falling = { ...facts, readings: steady.slice(0, 2) }
    const { gate } = bottlingPlan(falling, sparkling)
    const checks = gateChecks(gate, checked, on)
    expect(checks.map((check) => check.state)).toEqual([...checks.map((check) => check.state)].sort())
    expect(checks[0]).toMatchObject({
      state: 'block',
      fact: expect.stringMatching(/^It fell 60 points/) as string,
    })
    expect(checks.at(-1)).toMatchObject({ state: 'pass', why: 'HY-03 reads 2 points high.' })
  })

  it('says everything is settled when the gate is open', () => {
    const { gate } = bottlingPlan(facts, still)
    const checks = gateChecks(gate, checked, on)
    expect(checks.every((check) => check.state === 'pass')).toBe(true)
    expect(checks).toHaveLength(4)
    expect(gateOpensOn(gate, undefined, on)).toBeUndefined()
  })

  it.each([
    [null, 'look', /Float HY-03 in plain water/],
    [day('2030-05-01'), 'look', /Float it in water again/],
    [day('2031-04-20'), 'pass', /reads 2 points high/],
  ] as const)('a hydrometer checked on %s is a %s, and never blocks', (calibratedOn, state, why) => {
    const { gate } = bottlingPlan(facts, still)
    const check = gateChecks(gate, { ...checked, calibratedOn }, on).find(({ fact }) =>
      /Hydrometer/.test(fact),
    )
    expect(check).toMatchObject({ state, why: expect.stringMatching(why) as string })
  })

  it('opens a week after the likely end, or when the readings are long enough, whichever is later', () => {
    const { gate } = bottlingPlan({ ...facts, readings: steady.slice(0, 2) }, still)
    expect(gateOpensOn(gate, day('2031-05-04'), on)).toBe('2031-05-11')
    const early = { ...facts, readings: steady.slice(0, 2), on: '2031-04-20' }
    expect(gateOpensOn(bottlingPlan(early, still).gate, undefined, day('2031-04-20'))).toBe('2031-04-27')
  })
})

describe('a ferment and a loan', () => {
  it('is kept for the slowest likely end, a week of steady readings and a few days to bottle in', () => {
    expect(outlastsBy(day('2031-10-27'), day('2031-10-25'))).toBe(2)
    expect(outlastsBy(day('2031-10-25'), day('2031-10-25'))).toBeUndefined()
    const finish = { likely: day('2031-10-27'), late: day('2031-11-04') }
    expect(keepUntil(finish, undefined)).toBe('2031-11-08')
    expect(keepUntil({ ...finish, late: day('2031-10-28') }, undefined)).toBe('2031-11-07')
    expect(keepUntil(finish, day('2031-11-20'))).toBe('2031-11-20')
  })
})

describe('where a batch stands', () => {
  it('says how much of the drop is done and how strong it is', () => {
    const standing = standingOf(1.088, 0.998, [
      { at: at('2031-10-13'), gravity: 1.01 },
      { at: at('2031-09-19'), gravity: 1.088 },
    ])
    expect(standing).toMatchObject({ gravity: 1.01, readAt: at('2031-10-13'), og: 1.088 })
    expect(standing.drop).toBeCloseTo(0.867, 3)
    expect(standing.strength?.percent).toBeCloseTo(10.4, 1)
  })

  it('takes the first reading for the start where none was written down', () => {
    expect(standingOf(undefined, 0.998, steady).og).toBe(1.06)
    expect(standingOf(undefined, undefined, [])).toEqual({
      og: undefined,
      gravity: undefined,
      readAt: undefined,
      drop: undefined,
      strength: undefined,
    })
  })

  it('says nothing of gravities that do not belong together', () => {
    expect(strengthBetween(1.05, 1.06)).toBeUndefined()
    expect(strengthBetween(1.05, 0.97)).toBeUndefined()
    expect(strengthBetween(undefined, 1)).toBeUndefined()
    expect(dropDone(1.0, 1.0, 1.0)).toBeUndefined()
    expect(dropDone(1.05, 1.0, 1.06)).toBe(0)
    expect(dropDone(1.05, 1.0, 0.99)).toBe(1)
  })
})

describe('cautions stand where the act is', () => {
  const base: CautionFacts = {
    kind: 'prepare',
    vessel: { name: 'a glass demijohn', maxFillTemperatureC: 30 },
    bottleKind: 'beer',
    carbonated: true,
    allergens: [],
    sulphite: false,
  }
  const words = (facts: CautionFacts) =>
    stepCautions(facts)
      .map(({ text }) => text)
      .join(' ')

  it('names the limit of the very kind of vessel that is filled', () => {
    expect(words(base)).toContain('under 30 °C before it goes into a glass demijohn')
    expect(words({ ...base, vessel: { name: 'a bucket', maxFillTemperatureC: 60 } })).toContain('under 60 °C')
    expect(words({ ...base, vessel: { name: 'a steel keg', maxFillTemperatureC: null } })).toBe('')
    expect(words({ ...base, vessel: undefined })).toBe('')
  })

  it('names allergens and sulphite where they go in', () => {
    expect(words({ ...base, allergens: ['nuts', 'milk'] })).toContain('What goes in here contains nuts, milk')
    expect(words({ ...base, sulphite: true })).toContain('Weigh sulphite in fresh air')
  })

  it.each(STEP_KINDS.filter((kind) => kind !== 'prepare'))('says why on %s', (kind) => {
    const cautions = stepCautions({ ...base, kind })
    expect(cautions.length).toBeGreaterThan(0)
    for (const { text, why } of cautions) {
      expect(text).toMatch(/^[A-Z].*\.$/)
      expect(why).toMatch(/^[A-Z].*\.$/)
    }
  })
})
