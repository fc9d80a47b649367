import { describe, expect, test } from 'vitest'
import { airlockSign, bottlingGate, residualCo2Volumes, type BottlingGateInput } from '#shared/brewing/index'

const read = (day: number, gravity: number, temperatureC = 20) => ({
  at: `2026-10-${String(day).padStart(2, '0')}T18:00:00Z`,
  gravity,
  temperatureC,
})

const done: BottlingGateInput = {
  readings: [read(1, 1.0005), read(5, 1.0), read(9, 1.0)],
  expectedFg: 1,
  bottle: 'beer',
  primer: { kind: 'sucrose', gramsPerLitre: 5.9 },
  on: '2026-10-10',
}

const codes = (input: BottlingGateInput): string[] => bottlingGate(input).blocks.map((block) => block.code)

describe('the bottling gate', () => {
  test('lets a finished, gently primed beer through', () => {
    const gate = bottlingGate(done)
    expect(gate.blocks).toEqual([])
    expect(gate.ready).toBe(true)
    expect(gate.worstCaseVolumes).toBeCloseTo(2.4, 1)
    expect(gate.worstCaseBarAt30C).toBeGreaterThan(2)
    expect(gate.worstCaseBarAt30C).toBeLessThan(3)
    expect(gate.cautions.join(' ')).toMatch(/warm, about two weeks/)
  })

  test('trap: sugar still to ferment counts. Ten points early are five volumes, 7.5 bar at 30 °C', () => {
    const early = { ...done, readings: [read(1, 1.01), read(9, 1.01)], primer: { kind: 'none' } as const }
    const gate = bottlingGate(early)
    expect(gate.ready).toBe(false)
    expect(gate.pointsToCome).toBeCloseTo(10, 6)
    expect(gate.worstCaseVolumes).toBeCloseTo(residualCo2Volumes(20) + 10 * 0.498, 1)
    expect(Math.abs(gate.worstCaseBarAt30C - 7.5)).toBeLessThanOrEqual(0.3)
    expect(codes(early)).toEqual(['above-expected', 'pressure'])
  })

  test('trap: the same reading on three days running is not enough (slope error 0.45 points a day)', () => {
    const three = { ...done, readings: [read(7, 1.0), read(8, 1.0), read(9, 1.0)] }
    expect(codes(three)).toContain('not-long-enough')
    expect(bottlingGate(three).earliestOn).toBe('2026-10-14')
    const t = [0, 1, 2, 3]
    const slopeError = 1 / Math.sqrt(t.reduce((sum, day) => sum + (day - 1.5) ** 2, 0))
    expect(Math.abs(slopeError - 0.447)).toBeLessThanOrEqual(0.002)
  })

  test('two readings seven days apart are', () => {
    expect(codes({ ...done, readings: [read(2, 1.0), read(9, 1.0)] })).toEqual([])
    expect(codes({ ...done, readings: [read(3, 1.0), read(9, 1.0)] })).toContain('not-long-enough')
  })

  test('trap: bubbles never open it. Under one a minute is a sign to rack and clear', () => {
    const quiet = { ...done, readings: [read(8, 1.003), read(9, 1.002)], bubblesPerMinute: 0.5 }
    expect(bottlingGate(quiet).ready).toBe(false)
    expect(bottlingGate(quiet).cautions.join(' ')).toMatch(/rack and clear, never to bottle/)
    expect(airlockSign({ bubblesPerMinute: 0.5, volumeLitres: 5 }).sign).toBe('rack-and-clear')
    expect(airlockSign({ bubblesPerMinute: 2, volumeLitres: 5 }).sign).toBe('still-working')
  })

  test('one bubble of 0.5 mL a minute from 5 L: 0.267 points a day, a volume in 7.5 days (ideal gas)', () => {
    const sign = airlockSign({ bubblesPerMinute: 1, volumeLitres: 5 })
    expect(Math.abs(sign.pointsPerDay - 0.267)).toBeLessThanOrEqual(0.01)
    expect(Math.abs((sign.daysToOneVolume ?? 0) - 7.5)).toBeLessThanOrEqual(0.5)
    expect(airlockSign({ bubblesPerMinute: 0, volumeLitres: 5 }).daysToOneVolume).toBeUndefined()
  })

  test('still falling', () => {
    const falling = { ...done, readings: [read(1, 1.006), read(5, 1.003), read(9, 1.001)] }
    expect(codes(falling)).toContain('still-falling')
    expect(bottlingGate(falling).earliestOn).toBe('2026-10-16')
  })

  test('while it falls past what was expected, the worst case goes down to the driest drinks', () => {
    const falling = { ...done, readings: [read(1, 1.004), read(9, 0.999)], primer: { kind: 'none' } as const }
    expect(bottlingGate(falling).pointsToCome).toBeCloseTo(9, 6)
    expect(codes(falling)).toContain('pressure')
  })

  test('readings that go up again are not believed', () => {
    expect(codes({ ...done, readings: [read(1, 0.999), read(9, 1.002)] })).toContain('readings-disagree')
  })

  test('stuck: level, but well above what was expected', () => {
    expect(codes({ ...done, readings: [read(1, 1.012), read(9, 1.012)], bottle: 'sparkling' })).toContain(
      'above-expected',
    )
  })

  test('a reading no drink can give closes it', () => {
    expect(codes({ ...done, og: 1.04, readings: [read(1, 0.982), read(9, 0.982)] })).toContain('below-floor')
  })

  test('no readings, or one', () => {
    expect(codes({ ...done, readings: [] })).toContain('too-few-readings')
    expect(codes({ ...done, readings: [read(9, 1.0)] })).toContain('too-few-readings')
  })

  test('readings after the day are not used', () => {
    expect(codes({ ...done, on: '2026-10-07' })).toContain('not-long-enough')
  })

  test('cold rest is no end', () => {
    const cold = { ...done, readings: [read(1, 1.0, 4), read(9, 1.0, 4)], fermentationTemperatureC: 20 }
    expect(codes(cold)).toContain('cold-rest')
    expect(codes({ ...cold, fermentationTemperatureC: 6 })).not.toContain('cold-rest')
  })

  test.each([
    ['beer', 2.5, 2.6],
    ['pet', 3.0, 3.1],
  ] as const)('%s holds %f volumes, not %f', (bottle, fine, over) => {
    const grams = (volumes: number): number => ((volumes - residualCo2Volumes(20)) * 1.9769) / 0.5143
    const primed = (volumes: number): BottlingGateInput => ({
      ...done,
      bottle,
      readings: [read(1, 1.0), read(9, 1.0)],
      primer: { kind: 'sucrose', gramsPerLitre: grams(volumes) - 0.01 },
    })
    expect(codes(primed(fine))).toEqual([])
    expect(codes(primed(over))).toEqual(['pressure'])
  })

  test('still-wine and swing-top glass takes a finished drink and no priming at all', () => {
    for (const bottle of ['still-wine', 'swing-top'] as const) {
      const still = { ...done, bottle, readings: [read(1, 1.0), read(9, 1.0)] }
      expect(codes({ ...still, primer: { kind: 'none' } })).toEqual([])
      expect(codes({ ...still, primer: { kind: 'sucrose', gramsPerLitre: 2 } })).toEqual(['pressure'])
      expect(
        codes({ ...still, readings: [read(1, 1.002), read(9, 1.002)], primer: { kind: 'none' } }),
      ).toEqual(['pressure'])
    }
  })

  test('sparkling bottles take three and a half volumes', () => {
    expect(codes({ ...done, bottle: 'sparkling', primer: { kind: 'sucrose', gramsPerLitre: 10 } })).toEqual(
      [],
    )
  })

  test('trap: sorbate stops no ferment under way: sugar added for sweetness is counted all the same', () => {
    const sweet = {
      ...done,
      primer: { kind: 'none' } as const,
      sweeteningGramsPerLitre: 20,
      stabilised: true,
    }
    const gate = bottlingGate(sweet)
    expect(gate.worstCaseVolumes).toBeGreaterThan(5)
    expect(codes(sweet)).toEqual(['pressure'])
    expect(gate.cautions.join(' ')).toMatch(/Sorbate/)
  })

  test('every block says what is so, why, and nothing else', () => {
    for (const block of bottlingGate({ ...done, readings: [read(8, 1.03), read(9, 1.02)] }).blocks) {
      expect(block.fact.length).toBeGreaterThan(5)
      expect(block.why).toMatch(/\.$/)
    }
  })

  test.each([
    [{ ...done, expectedFg: 10 }, /expectedFg is 10/],
    [{ ...done, on: 'today' }, /on is "today"/],
    [{ ...done, bottle: 'jug' as 'beer' }, /bottle is "jug": allowed beer/],
    [{ ...done, primer: { kind: 'sucrose', gramsPerLitre: -1 } as const }, /primer.gramsPerLitre is -1/],
    [{ ...done, readings: [{ at: 'x', gravity: 1 }] }, /readings\[0\].at/],
    [{ ...done, readings: [{ at: '2026-10-01T00:00:00Z', gravity: 1050 }] }, /readings\[0\].gravity is 1050/],
  ])('refuses by name (%#)', (input, message) => {
    expect(() => bottlingGate(input)).toThrow(RangeError)
    expect(() => bottlingGate(input)).toThrow(message)
  })
})
