import { describe, expect, it } from 'vitest'
import { AGENTS, findAgent, NEVER_MIX } from '#shared/kit/agents'
import { hygieneAt, hygieneWarnings, sanitisedUntil, usualContactMinutes } from '#shared/kit/hygiene'
import type { Instant } from '#shared/time/instant'

const at = (text: string) => text as Instant

describe('a sanitising', () => {
  it('lasts as long as its kind says, across a clock change too', () => {
    // 2031-03-30 is the spring change in London: 24 hours are 24 hours.
    expect(sanitisedUntil(at('2031-03-29T10:00:00.000Z'), 24)).toBe('2031-03-30T10:00:00.000Z')
  })

  it('leaves the item clean from the moment it runs out', () => {
    const item = { hygiene: 'sanitised', sanitisedUntil: at('2031-05-02T10:00:00.000Z') } as const
    expect(hygieneAt(item, at('2031-05-02T09:59:59.999Z'))).toBe('sanitised')
    expect(hygieneAt(item, at('2031-05-02T10:00:00.000Z'))).toBe('clean')
    expect(hygieneAt({ hygiene: 'dirty', sanitisedUntil: null }, at('2031-05-02T10:00:00.000Z'))).toBe(
      'dirty',
    )
  })
})

describe('the usual contact time', () => {
  it.each([
    ['iodophor', 0.5], // Utah R392-102-10: 30 s
    ['Iodophor', 0.5],
    ['hypochlorite', 0.5], // California: 100 mg/L for 30 s
    ['hot-water', 0.5], // 77 °C for 30 s
    ['peracetic-acid', 1],
    ['something else', undefined],
    ['detergent', undefined],
  ])('of %s is %s minutes', (agent, expected) => {
    expect(usualContactMinutes(agent)).toBe(expected)
  })
})

describe('a record of cleaning', () => {
  const codes = (
    act: Parameters<typeof hygieneWarnings>[0],
    before: 'dirty' | 'clean' | 'sanitised' = 'clean',
  ) => hygieneWarnings(act, before).map((warning) => warning.code)

  it('passes when it was in contact for the shortest published time or longer', () => {
    expect(codes({ state: 'sanitised', agent: 'iodophor', contactMinutes: 0.5 })).toEqual([])
    expect(codes({ state: 'sanitised', agent: 'iodophor', contactMinutes: 0.49 })).toEqual(['contact-short'])
  })

  it('says nothing about washing or about dirt', () => {
    expect(codes({ state: 'clean', agent: 'percarbonate', contactMinutes: 1 }, 'dirty')).toEqual([])
    expect(codes({ state: 'dirty' })).toEqual([])
  })

  it('points at soil, a missing agent, a missing time and a cleaner taken for a sanitiser', () => {
    expect(codes({ state: 'sanitised' }, 'dirty')).toEqual(['not-washed-first', 'agent-missing'])
    expect(codes({ state: 'sanitised', agent: 'iodophor' })).toEqual(['contact-missing'])
    expect(codes({ state: 'sanitised', agent: 'Washing-up liquid', contactMinutes: 60 })).toEqual([
      'not-a-sanitiser',
    ])
  })
})

describe('the agents', () => {
  it('each have a caution with its why, and every figure its source', () => {
    for (const agent of AGENTS) {
      expect(agent.caution).toMatch(/\.$/)
      expect(agent.why).toMatch(/\.$/)
      for (const use of agent.usual) expect(use.source).not.toBe('')
      expect(findAgent(agent.code)).toBe(agent)
    }
    expect(NEVER_MIX.filter(({ pair }) => pair.join().includes('Chlorine bleach'))).toHaveLength(4)
  })
})
