import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chooseKind, type ChoosableKind } from '#shared/batches/kit-choice'
import {
  inOrder,
  movedDays,
  nextStep,
  planEnd,
  planLines,
  planProblem,
  planProblemSentence,
  planSpans,
  stepDays,
  type PlanStep,
} from '#shared/batches/plan'
import { templateFor } from '#shared/batches/plan-template'
import { BATCH_STYLES } from '#shared/batches/vocabulary'
import { addDays, day, daysBetween } from '#shared/time/day'

const step = (id: string, dayOffset: number, needs: PlanStep['needs'] = []): PlanStep => ({
  id,
  kind: 'prepare',
  title: id,
  dayOffset,
  needs,
})
const vessel = { kindId: 'vessel', fromDays: 0, toDays: 0, untilStepId: 'bottle' }
const siphon = { kindId: 'siphon', fromDays: -1, toDays: 0 }
const plan = [step('must', 0, [vessel]), step('rack', 14, [siphon]), step('bottle', 28, [siphon])]

describe('a plan', () => {
  it('turns steps into days and bookings', () => {
    const days = stepDays(plan, day('2031-05-10'))
    expect([...days.values()]).toEqual(['2031-05-10', '2031-05-24', '2031-06-07'])
    expect(planLines(plan, days).map(({ kindId, from, to }) => [kindId, from, to])).toEqual([
      ['vessel', '2031-05-10', '2031-06-07'],
      ['siphon', '2031-05-23', '2031-05-24'],
      ['siphon', '2031-06-06', '2031-06-07'],
    ])
  })

  it('keeps a vessel until the day its last step has moved to', () => {
    const days = stepDays(plan, day('2031-05-10')).set('bottle', day('2031-06-20'))
    expect(planLines(plan, days)[0]).toMatchObject({ to: '2031-06-20', capped: false })
  })

  it('cuts a need to the longest loan of its kind, and says so', () => {
    const days = stepDays(plan, day('2031-05-10'))
    const longest = (kindId: string) => (kindId === 'vessel' ? 21 : undefined)
    expect(planLines(plan, days, longest)[0]).toMatchObject({ to: '2031-05-30', capped: true })
    expect(planSpans(plan, longest).get('vessel')).toEqual([{ from: 0, to: 20 }])
  })

  it('asks for the same days whether counted as days or from the first of them', () => {
    const anOffset = fc.integer({ min: 0, max: 60 })
    fc.assert(
      fc.property(anOffset, anOffset, fc.integer({ min: 1, max: 50 }), (a, b, most) => {
        const steps = [step('one', a, [vessel]), step('bottle', a + b)]
        const start = day('2031-05-10')
        const [line] = planLines(steps, stepDays(steps, start), () => most)
        const [span] = planSpans(steps, () => most).get('vessel') ?? []
        expect(span).toEqual({ from: daysBetween(start, line!.from), to: daysBetween(start, line!.to) })
      }),
    )
  })

  it.each([
    ['no-steps', []],
    ['unknown-step', [step('must', 0, [vessel])]],
    ['ends-before-it-starts', [step('must', 9, [vessel]), step('bottle', 3)]],
    ['before-the-plan', [step('rack', 0, [siphon])]],
  ])('refuses %s', (problem, steps) => {
    const found = planProblem(steps)
    expect(found?.problem).toBe(problem)
    expect(planProblemSentence(found!)).toMatch(/\.$/)
  })

  it('finds no fault with a good one, and no end in none', () => {
    expect(planProblem(plan)).toBeUndefined()
    const days = stepDays(plan, day('2031-05-10'))
    expect(planEnd(planLines(plan, days), days.values())).toBe('2031-06-07')
    expect(planEnd([], [])).toBeUndefined()
  })
})

describe('moving a plan', () => {
  const dated = [
    { id: 'must', on: day('2031-05-10'), done: true },
    { id: 'pitch', on: day('2031-05-10'), done: false },
    { id: 'rack', on: day('2031-05-24'), done: false },
    { id: 'bottle', on: day('2031-06-07'), done: false },
  ]

  it('takes what comes after along, and leaves what is done', () => {
    expect(Object.fromEntries(movedDays(dated, 'rack', day('2031-05-27')))).toEqual({
      must: '2031-05-10',
      pitch: '2031-05-10',
      rack: '2031-05-27',
      bottle: '2031-06-10',
    })
  })

  it('moves one step alone when asked', () => {
    expect(movedDays(dated, 'rack', day('2031-05-27'), true).get('bottle')).toBe('2031-06-07')
  })

  it('does not move a step that is done, and moves steps of one day in their order', () => {
    expect(movedDays(dated, 'must', day('2031-05-12')).get('must')).toBe('2031-05-10')
    expect(movedDays(dated, 'pitch', day('2031-05-12')).get('must')).toBe('2031-05-10')
  })

  it('keeps every distance between steps that are still to do', () => {
    fc.assert(
      fc.property(
        fc.array(fc.nat(90), { minLength: 2, maxLength: 8 }),
        fc.nat(7),
        fc.integer({ min: -99, max: 99 }),
        (ats, at, shift) => {
          const steps = inOrder(ats.map((dayOffset, id) => step(String(id), dayOffset))).map(
            ({ id, dayOffset }) => ({
              id,
              on: addDays(day('2031-01-01'), dayOffset),
              done: false,
            }),
          )
          const place = at % steps.length
          const moved = movedDays(steps, steps[place]!.id, addDays(steps[place]!.on, shift))
          steps.forEach(({ id, on }, index) =>
            expect(daysBetween(on, moved.get(id)!)).toBe(index >= place ? shift : 0),
          )
        },
      ),
    )
  })

  it('names the next step by its day', () => {
    expect(nextStep(dated)?.id).toBe('pitch')
    expect(nextStep(dated.map((one) => ({ ...one, done: true })))).toBeUndefined()
  })
})

describe('the usual plan of a style', () => {
  it.each(BATCH_STYLES)('%s can be planned as it stands, still or carbonated', (style) => {
    for (const carbonated of [false, true]) {
      const template = templateFor(style, carbonated)
      const steps = template.map((one, place): PlanStep => ({
        ...one,
        id: String(place),
        needs: one.needs.map((need) => ({
          kindId: need.role,
          fromDays: need.fromDays,
          toDays: need.toDays,
          untilStepId: need.until && String(template.findIndex((other) => other.kind === need.until)),
        })),
      }))
      expect(planProblem(steps)).toBeUndefined()
      expect(inOrder(steps).map(({ id }) => id)).toEqual(steps.map(({ id }) => id))
      const lines = planLines(steps, stepDays(steps, day('2031-05-10')))
      const vessels = lines.filter(({ kindId }) => kindId === 'fermenter')
      const bottled = steps.find(({ kind }) => kind === 'bottle')!
      expect(vessels.map(({ from, to }) => [from, to])).toEqual([
        [style === 'cider' ? '2031-05-11' : '2031-05-10', addDays(day('2031-05-10'), bottled.dayOffset)],
      ])
      expect(template.some(({ kind }) => kind === 'condition')).toBe(carbonated)
      expect(template.map(({ title }) => title).join()).not.toMatch(/undefined/)
    }
  })

  it('reads the gravity twice, a week apart, before it is bottled', () => {
    const bottled = templateFor('mead', false).find(({ kind }) => kind === 'bottle')
    const readings = bottled?.needs
      .filter(({ role }) => role === 'hydrometer')
      .map(({ fromDays }) => fromDays)
    expect(readings).toEqual([-7, 0])
  })
})

describe('kit for a role', () => {
  const kind = (id: string, category: ChoosableKind['category'], more: Partial<ChoosableKind> = {}) => ({
    id,
    name: id,
    category,
    capacityLitres: null,
    markedForTemperatureC: null,
    wildOnly: false,
    ...more,
  })
  const shelf = [
    kind('Bucket 10 L', 'vessel', { capacityLitres: 10 }),
    kind('Demijohn 4.5 L', 'vessel', { capacityLitres: 4.5 }),
    kind('Demijohn 4.5 L, wild', 'vessel', { capacityLitres: 4.5, wildOnly: true }),
    kind('Refractometer', 'instrument'),
    kind('Old hydrometer', 'instrument', { markedForTemperatureC: 15.6 }),
    kind('Hydrometer', 'instrument', { markedForTemperatureC: 20 }),
    kind('Tubing', 'transfer'),
    kind('Siphon', 'transfer'),
    kind('Corker', 'closure'),
    kind('Bench capper', 'closure'),
    kind('Boiler 30 L', 'heating', { capacityLitres: 30 }),
  ]
  const wish = { volumeLitres: 4.5, wild: false, bottleKind: 'beer' as const }

  it.each([
    ['fermenter', wish, 'Demijohn 4.5 L'],
    ['fermenter', { ...wish, volumeLitres: 9 }, 'Bucket 10 L'],
    ['fermenter', { ...wish, volumeLitres: 90 }, undefined],
    ['fermenter', { ...wish, wild: true }, 'Demijohn 4.5 L, wild'],
    ['second-vessel', wish, 'Bucket 10 L'],
    ['second-vessel', { ...wish, volumeLitres: 9 }, 'Bucket 10 L'],
    ['hydrometer', wish, 'Hydrometer'],
    ['siphon', wish, 'Siphon'],
    ['closer', wish, 'Bench capper'],
    ['closer', { ...wish, bottleKind: 'still-wine' as const }, 'Corker'],
    ['closer', { ...wish, bottleKind: 'swing-top' as const }, undefined],
    ['heater', wish, 'Boiler 30 L'],
    ['heater', { ...wish, volumeLitres: 40 }, undefined],
  ] as const)('%s for %j is %s', (role, wanted, name) => {
    expect(chooseKind(role, shelf, wanted)?.name).toBe(name)
  })
})
