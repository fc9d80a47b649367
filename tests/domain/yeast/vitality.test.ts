import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addDays, day, type CalendarDay } from '#shared/time/day'
import { STORAGES, YEAST_FORMS, type Storage } from '#shared/brewing/vocabulary'
import { type LotReport, lotStanding, lotStateAfter } from '#shared/yeast/lot-evidence'
import { packetVitality, type LotFacts } from '#shared/yeast/vitality'
import { OUTCOMES, VERDICTS } from '#shared/yeast/vocabulary'

const ON = day('2031-05-06')

const packet = (more: object = {}) => ({
  strain: 'Fallow 71',
  form: 'dry' as const,
  use: 'mead' as const,
  unit: 'g' as const,
  madeOn: addDays(ON, -300),
  bestBefore: null,
  openedOn: null,
  storage: [{ from: addDays(ON, -300), storage: 'fridge' as Storage }],
  ...more,
})

const lot = (reports: LotReport[] = []): LotFacts => ({
  state: 'sound',
  note: null,
  reports,
  pitches: reports.length,
})

const report = (more: Partial<LotReport> = {}): LotReport => ({
  outcome: 'started',
  hoursToActivity: 9,
  hoursUntilReport: 72,
  pitchedOn: addDays(ON, -10),
  form: 'dry',
  survival: 0.95,
  cellsPerMl: 5e6,
  rehydrated: true,
  mustTemperatureC: 20,
  setAside: false,
  ...more,
})
const failure = (more: Partial<LotReport> = {}) => report({ outcome: 'none', hoursToActivity: null, ...more })

const ask = (facts: ReturnType<typeof packet>, reports: LotReport[] = [], on: CalendarDay = ON) =>
  packetVitality(facts, 5, lot(reports), { on, timeZone: 'Europe/London', volumeLitres: 4.5, og: 1.08 })

const anyReport = fc
  .record({
    outcome: fc.constantFrom(...OUTCOMES),
    hoursToActivity: fc.option(fc.double({ min: 0.5, max: 300, noNaN: true })),
    hoursUntilReport: fc.double({ min: 0, max: 400, noNaN: true }),
    survival: fc.double({ min: 0, max: 1, noNaN: true }),
    cellsPerMl: fc.double({ min: 0, max: 1e8, noNaN: true }),
    rehydrated: fc.boolean(),
    mustTemperatureC: fc.option(fc.double({ min: -5, max: 60, noNaN: true })),
    setAside: fc.boolean(),
  })
  .map((more) => report(more))
const anyReports = fc.array(anyReport, { maxLength: 8 })
const anyForm = fc.constantFrom(...YEAST_FORMS)
const age = fc.integer({ min: 0, max: 2500 })

const atMost = (less: ReturnType<typeof ask>, more: ReturnType<typeof ask>) => {
  for (const end of ['low', 'estimate', 'high'] as const)
    expect(less.viability[end]).toBeLessThanOrEqual(more.viability[end] + 1e-12)
  expect(VERDICTS.indexOf(less.verdict)).toBeGreaterThanOrEqual(VERDICTS.indexOf(more.verdict))
}

describe('the answer, whatever the lot did', () => {
  it('never rises with age', () => {
    fc.assert(
      fc.property(anyReports, anyForm, age, fc.integer({ min: 0, max: 900 }), (reports, form, days, more) => {
        const facts = packet({
          form,
          madeOn: addDays(ON, -days),
          storage: [{ from: addDays(ON, -days), storage: 'fridge' }],
        })
        atMost(ask(facts, reports, addDays(ON, more)), ask(facts, reports))
      }),
    )
  })

  it('never rises with warmth', () => {
    fc.assert(
      fc.property(anyReports, age, fc.nat(2500), (reports, days, moved) => {
        const from = addDays(ON, -days)
        const at = addDays(from, Math.min(moved, days))
        const kept = (...storage: Storage[]) =>
          ask(
            packet({
              madeOn: from,
              storage: storage.map((place, index) => ({ from: index === 0 ? from : at, storage: place })),
            }),
            reports,
          )
        const [freezer, fridge, shelf] = STORAGES
        atMost(kept(shelf), kept(fridge, shelf))
        atMost(kept(fridge, shelf), kept(fridge))
        atMost(kept(fridge), kept(freezer))
      }),
    )
  })

  it('never rises with opening, nor with opening earlier', () => {
    fc.assert(
      fc.property(anyReports, anyForm, age, fc.nat(2500), fc.nat(2500), (reports, form, days, a, b) => {
        const madeOn = addDays(ON, -days)
        const at = (days: number) => addDays(ON, -days)
        const opened = (openedOn: CalendarDay | null) =>
          ask(packet({ form, madeOn, openedOn, storage: [{ from: madeOn, storage: 'fridge' }] }), reports)
        const [early, late] = [Math.min(days, Math.max(a, b)), Math.min(days, a, b)]
        atMost(opened(at(early)), opened(at(late)))
        atMost(opened(at(late)), opened(null))
      }),
    )
  })

  it('keeps its band in order and within none and all', () => {
    fc.assert(
      fc.property(anyReports, anyForm, age, (reports, form, days) => {
        const { viability } = ask(packet({ form, madeOn: addDays(ON, -days) }), reports)
        expect(viability.low).toBeGreaterThanOrEqual(0)
        expect(viability.low).toBeLessThanOrEqual(viability.estimate)
        expect(viability.estimate).toBeLessThanOrEqual(viability.high)
        expect(viability.high).toBeLessThanOrEqual(1)
      }),
    )
  })
})

describe('what a lot did', () => {
  it('is nothing while nobody has reported', () => {
    expect(lotStanding([], ON)).toMatchObject({ factor: 1, low: 1, high: 1 })
  })

  it('counts as the worked example of the sheet does', () => {
    // Reference sheet, yeast: prior 0.88 / 0.09 / 0.03 with mean 0.663; started at 8 h gives mean 0.78, at 24 h 0.351,
    // never by 72 h 0.247 with P(dead) 0.558. Grid posterior, checked by Monte Carlo with 400,000 draws.
    const fresh = { survival: 1 }
    const mean = (reports: LotReport[]) => lotStanding(reports, addDays(ON, -10)).factor * 0.663
    expect(mean([report({ ...fresh, hoursToActivity: 8 })])).toBeCloseTo(0.78, 1)
    expect(mean([report({ ...fresh, outcome: 'slow', hoursToActivity: 24 })])).toBeCloseTo(0.351, 1)
    const once = lotStanding([failure(fresh)], addDays(ON, -10))
    expect(once.factor * 0.663).toBeCloseTo(0.247, 1)
    expect(once.dead).toBeCloseTo(0.558, 1)
  })

  it('takes sound packets out of good after two failures, and two only', () => {
    const none = ask(packet())
    const two = ask(packet(), [failure(), failure()])
    expect(none.verdict).toBe('good')
    expect(two.verdict).toBe('do-not-rely')
    expect(two.reasons[0]?.effect).toBe('raises')
    expect(two.reasons.map(({ text }) => text)).toContain('Two of two pitches from this lot never started.')
    expect(lotStateAfter('sound', [failure()])).toBe('sound')
    expect(lotStateAfter('sound', [failure(), failure()])).toBe('flagged')
    expect(lotStateAfter('sound', [failure(), failure({ setAside: true })])).toBe('sound')
    expect(lotStateAfter('withdrawn', [])).toBe('withdrawn')
  })

  it('comes back after one fast start as far as its record allows, and no further', () => {
    const before = ask(packet()).viability.estimate
    const failed = ask(packet(), [failure(), failure()]).viability.estimate
    const after = ask(packet(), [failure(), failure(), report({ hoursToActivity: 8 })]).viability.estimate
    expect(after).toBeGreaterThan(failed)
    // One start of three, on nine starts of ten believed beforehand: (9 + 1) / (10 + 3), against 0.9.
    expect(after / before).toBeCloseTo(10 / 13 / 0.9, 6)
    const more = ask(packet(), [failure(), failure(), ...Array.from({ length: 6 }, () => report())])
    expect(more.viability.estimate).toBeGreaterThan(after)
    expect(more.viability.estimate).toBeLessThan(before)
  })

  it('is raised by starts on time, within the band of storage alone', () => {
    const old = packet({ openedOn: addDays(ON, -150) })
    const alone = ask(old).viability
    const known = ask(
      old,
      Array.from({ length: 6 }, () => report()),
    ).viability
    expect(known.estimate).toBeGreaterThan(alone.estimate)
    expect(known.estimate).toBeLessThanOrEqual(alone.high)
    expect(known.high - known.low).toBeLessThan(alone.high - alone.low)
  })

  it('blames a cold must and an old packet before it blames the lot', () => {
    const factor = (more: Partial<LotReport>) =>
      lotStanding([report({ outcome: 'slow', hoursToActivity: 24, ...more })], ON).factor
    expect(factor({ mustTemperatureC: 10 })).toBeGreaterThan(factor({ mustTemperatureC: 20 }))
    expect(factor({ survival: 0.2 })).toBeGreaterThan(factor({ survival: 1 }))
    expect(factor({ rehydrated: false })).toBeGreaterThan(factor({ rehydrated: true }))
    expect(factor({ rehydrated: false, form: 'liquid' })).toBe(factor({ form: 'liquid' }))
  })

  it('fades when it was good news, and stays when it was bad', () => {
    const later = addDays(ON, 700)
    expect(lotStanding([report()], later).factor).toBeLessThan(lotStanding([report()], ON).factor)
    expect(lotStanding([failure()], later).factor).toBe(lotStanding([failure()], ON).factor)
  })
})
