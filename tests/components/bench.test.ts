import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { answerTo } from '@/components/brewing/bench-answer'
import { PLAIN_UNITS, queryOf, typedFrom, unitsFrom, type Typed } from '@/components/brewing/bench-state'
import { MOMENTS, type Answer, type Ask, type Question, type Units } from '@/components/brewing/question'
import { QUESTIONS, questionOf } from '@/components/brewing/questions/all'

const TODAY = '2026-10-14'
const OTHER: Units = { gravity: 'bx', volume: 'gal', temperature: 'F' }

const question = (id: string): Question => {
  const found = questionOf(id)
  if (!found) throw new Error(`no question ${id}`)
  return found
}
const start = (id: string, query: Record<string, string> = {}): Typed => typedFrom(question(id), query, TODAY)
const ask = (id: string, query: Record<string, string> = {}, units = PLAIN_UNITS) =>
  answerTo(question(id), start(id, query), units, TODAY)

const wordsOf = (answer: Answer): string[] => [
  answer.figure?.text ?? '',
  answer.word?.text ?? '',
  answer.sentence,
  ...(answer.facts ?? []).flatMap((fact) => [fact.label, fact.value]),
  ...(answer.acts ?? []).flatMap((act) => [act.act, act.more ?? '']),
  ...(answer.checks ?? []).flatMap((check) => [check.fact, check.why ?? '']),
  ...(answer.notes ?? []),
]

describe('the questions of the bench', () => {
  test('cover every moment, each with an id of its own', () => {
    for (const moment of MOMENTS) expect(QUESTIONS.some((one) => one.moment === moment)).toBe(true)
    expect(new Set(QUESTIONS.map((one) => one.id)).size).toBe(QUESTIONS.length)
    expect(QUESTIONS.length).toBeGreaterThanOrEqual(20)
  })

  test.each(QUESTIONS.map((one) => [one.id, one] as const))('%s says how it is worked out', (_id, one) => {
    expect(one.how.formula.length).toBeGreaterThan(0)
    expect(one.how.source.length).toBeGreaterThan(5)
    expect(one.how.range.length).toBeGreaterThan(5)
  })

  test.each(QUESTIONS.map((one) => [one.id, one] as const))('%s opens with an answer, in any units', (id) => {
    for (const units of [PLAIN_UNITS, OTHER]) {
      const { answer, errors, missing } = ask(id, {}, units)
      expect({ errors, missing }).toEqual({ errors: {}, missing: [] })
      expect(answer?.figure ?? answer?.word).toBeDefined()
      expect(wordsOf(answer as Answer).join(' ')).not.toMatch(/NaN|Infinity|undefined|-0\b|\d\.\d{5}/)
    }
  })
})

/** Anything a person might leave in a field. */
function anything(one: Ask): fc.Arbitrary<Typed[string]> {
  const number = fc.oneof(
    fc.constantFrom(undefined, Number.NaN, 0, -1, 1, 1.05, 1066, 1e9),
    fc.double({ min: -50, max: 200, noNaN: true }),
    fc.double({ min: 0.98, max: 1.15, noNaN: true }),
  )
  const day = fc.constantFrom('', '2026-10-01', '2026-10-14', '2020-02-29', '2030-01-01')
  switch (one.kind) {
    case 'number':
      return number
    case 'choice':
      return fc.constantFrom(...one.options.map((option) => option.value))
    case 'day':
      return day
    case 'lines':
      return fc.array(
        fc.record({ ingredient: fc.constantFrom('honey', 'apple', 'white-sugar'), grams: number }),
        {
          maxLength: 3,
        },
      )
    case 'readings':
      return fc.array(fc.record({ on: day, gravity: number }), { maxLength: 5 })
  }
}

describe('whatever is typed', () => {
  test.each(QUESTIONS.map((one) => [one.id, one] as const))(
    '%s answers, or says beside which field it cannot',
    (_id, one) => {
      const typed = fc.record(Object.fromEntries(one.asks.map((field) => [field.key, anything(field)])))
      fc.assert(
        fc.property(typed, fc.constantFrom(PLAIN_UNITS, OTHER), (values, units) => {
          const { answer, errors, missing } = answerTo(one, values, units, TODAY)
          const said = [...Object.values(errors), ...(answer ? wordsOf(answer) : [])].join(' ')
          expect(said).not.toMatch(/NaN|Infinity|undefined|(?<!\d)-0\b/)
          for (const key of Object.keys(errors))
            expect([...one.asks.map((field) => field.key)]).toContain(key)
          expect(answer !== undefined || Object.keys(errors).length > 0 || missing.length > 0).toBe(true)
        }),
        { seed: 14, numRuns: one.id === 'finish' ? 20 : 80 },
      )
    },
  )
})

describe('an answer', () => {
  test('the linear rule gives 8.9 % for 1.066 and 0.998 (common practice)', () => {
    expect(ask('strength', { og: '1,066', fg: '0.998', method: 'linear' }).answer?.figure).toEqual({
      text: '8.9',
      unit: '%',
    })
  })

  test('26.8 g of sugar primes 4.5 L to 2.4 volumes at 20 °C', () => {
    const { answer } = ask('priming', { volumeLitres: '4.5', targetVolumes: '2.4', temperatureC: '20' })
    expect(answer?.figure).toEqual({ text: '26.8', unit: 'g' })
  })

  test('three tablets for a 750 mL bottle', () => {
    expect(ask('tablets').answer?.figure).toEqual({ text: '3', unit: 'tablets' })
  })

  test('five bottles from a demijohn racked twice off fruit', () => {
    expect(ask('bottles').answer?.figure).toEqual({ text: '5', unit: 'bottles' })
  })

  test('the gate holds ten points back, whatever the bubbles say', () => {
    const { answer } = ask('gate', { readings: '2026-10-05:1.010~2026-10-13:1.010' })
    expect(answer?.word?.text).toBe('Not yet')
    expect(answer?.sentence).toMatch(/5\.8 volumes: 7\.4 bar/)
  })
})

describe('what is not allowed', () => {
  test('is said beside its field, with what is, in the unit shown', () => {
    expect(ask('reading', { temperatureC: '55' }).errors).toEqual({
      temperatureC: 'From 5 to 40 °C is allowed.',
    })
    expect(ask('reading', { temperatureC: '55' }, OTHER).errors).toEqual({
      temperatureC: 'From 41 to 104 °F is allowed.',
    })
    expect(ask('dose', { alive: '140' }).errors).toEqual({ alive: 'From 0 to 100 % is allowed.' })
    expect(ask('strength', { og: '1.04', fg: '0.97' }).errors.fg).toMatch(/Allowed 0\.986 to 1\.04/)
    expect(ask('amount', { target: '1.5' }).errors).toEqual({ target: 'From 1.000 to 1.200 is allowed.' })
  })

  test('and what is empty is asked for', () => {
    expect(ask('strength', { og: '', fg: '1' })).toEqual({
      answer: undefined,
      errors: {},
      missing: ['Gravity at the start'],
    })
  })
})

describe('the address', () => {
  test.each(QUESTIONS.map((one) => [one.id, one] as const))('%s comes back as it was written', (_id, one) => {
    const typed = typedFrom(one, {}, TODAY)
    const query = queryOf(one, typed, OTHER)
    expect(query.ask).toBe(one.id)
    expect(typedFrom(one, query, '2031-01-01')).toEqual(typed)
    expect(unitsFrom(query)).toEqual(OTHER)
  })

  test('nonsense in it is not believed', () => {
    const typed = start('strength', { og: 'x', method: 'guess' })
    expect(typed.og).toBeUndefined()
    expect(typed.method).toBe('mixture')
    expect(unitsFrom({ gravity: 'stone' })).toEqual(PLAIN_UNITS)
  })
})
