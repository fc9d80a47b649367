import { describe, expect, it } from 'vitest'
import { BATCH_MOVES, isOver, mayMove } from '#shared/batches/lifecycle'
import { stuckTriage, type StuckFacts } from '#shared/batches/stuck'
import { BATCH_STATUSES } from '#shared/batches/vocabulary'

const facts: StuckFacts = {
  temperatureC: 20,
  abvPercent: 8,
  tolerancePercent: 14,
  ph: 3.4,
  sulphiteMgPerLitre: 0,
  nitrogenShortMgPerLitre: 0,
  feedsDone: 2,
  feedsPlanned: 2,
  drop: 0.6,
}
const likely = (more: Partial<StuckFacts>) =>
  stuckTriage({ ...facts, ...more })
    .filter(({ odds }) => odds === 'likely')
    .map(({ cause }) => cause)

describe('a stuck ferment', () => {
  it.each([
    [{ temperatureC: 12 }, ['cold']],
    [{ temperatureC: 33 }, ['hot']],
    [{ feedsDone: 0 }, ['nitrogen']],
    [{ feedsDone: 0, feedsPlanned: 0, nitrogenShortMgPerLitre: 120 }, ['nitrogen']],
    [{ abvPercent: 13.4 }, ['tolerance']],
    [{ ph: 2.8 }, ['acid']],
    [{ sulphiteMgPerLitre: 60 }, ['sulphite']],
    [{ drop: 0.05 }, ['yeast']],
    [{}, []],
    [{ temperatureC: 12, ph: 2.9 }, ['cold', 'acid']],
  ])('with %j points at %j', (more, causes) => {
    expect(likely(more)).toEqual(causes)
  })

  it('asks for what is not known before it rules anything out', () => {
    const blank = stuckTriage({ sulphiteMgPerLitre: 0, feedsDone: 0, feedsPlanned: 0 })
    expect(blank.map(({ odds }) => odds)).toEqual([
      'look',
      'look',
      'look',
      'look',
      'unlikely',
      'unlikely',
      'unlikely',
    ])
    for (const { fact, act } of blank) expect(`${fact} ${act}`).toMatch(/\.$/)
  })

  it('does not feed ammonium to a ferment that is more than half done', () => {
    const act = (drop: number) =>
      stuckTriage({ ...facts, feedsDone: 0, drop }).find((a) => a.cause === 'nitrogen')?.act
    expect(act(0.3)).toMatch(/next feed/)
    expect(act(0.7)).toMatch(/no longer takes up ammonium/)
  })
})

describe('the life of a batch', () => {
  it('ends somewhere from everywhere, and never un-bottles', () => {
    for (const status of BATCH_STATUSES) {
      expect(mayMove(status, status)).toBe(true)
      const reached = new Set([status])
      for (const one of reached) for (const next of BATCH_MOVES[one]) reached.add(next)
      expect([...reached].some(isOver)).toBe(true)
    }
    expect(mayMove('bottled', 'fermenting')).toBe(false)
    expect(mayMove('finished', 'fermenting')).toBe(false)
  })
})
