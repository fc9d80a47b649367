import { addDays, dayNumber, laterDay, type CalendarDay } from '../time/day.ts'
import type { DayRange } from '../time/day-range.ts'
import type { Span } from './earliest-start.ts'
import type { StepKind } from './vocabulary.ts'

/** Kit a step needs: from so many days before its day (negative) to so many after, or after another step's day. */
export interface PlanNeed {
  kindId: string
  fromDays: number
  toDays: number
  /** The step whose day ends the need; the step's own when absent. */
  untilStepId?: string | undefined
}

export interface PlanStep {
  id: string
  kind: StepKind
  title: string
  /** Days after the first day of the plan. */
  dayOffset: number
  needs: readonly PlanNeed[]
}

/** One booking the plan asks for. `capped`: cut to the longest loan of its kind; more is asked for once it is under way. */
export interface PlanLine extends DayRange {
  stepId: string
  kindId: string
  /** Place of the need in its step. */
  need: number
  capped: boolean
}

export type PlanProblem =
  | { problem: 'no-steps' }
  | { problem: 'unknown-step'; stepId: string; need: number }
  | { problem: 'ends-before-it-starts'; stepId: string; need: number }
  | { problem: 'before-the-plan'; stepId: string; need: number }

/** Longest loan of a kind, in days; without one a need is never cut. */
export type LongestLoan = (kindId: string) => number | undefined

/** In the order they are done: by day, and within a day as they stand. */
export function inOrder<Step extends { dayOffset: number }>(steps: readonly Step[]): Step[] {
  return steps
    .map((step, place) => ({ step, place }))
    .sort((a, b) => a.step.dayOffset - b.step.dayOffset || a.place - b.place)
    .map(({ step }) => step)
}

/** The first thing that makes a plan impossible, or undefined. */
export function planProblem(steps: readonly PlanStep[]): PlanProblem | undefined {
  if (steps.length === 0) return { problem: 'no-steps' }
  const offsets = offsetsOf(steps)
  for (const step of steps)
    for (const [need, wanted] of step.needs.entries()) {
      if (wanted.untilStepId !== undefined && !offsets.has(wanted.untilStepId))
        return { problem: 'unknown-step', stepId: step.id, need }
      const { from, to } = spanOf(step, wanted, offsets)
      if (to < from) return { problem: 'ends-before-it-starts', stepId: step.id, need }
      if (from < 0) return { problem: 'before-the-plan', stepId: step.id, need }
    }
  return undefined
}

/** One sentence a member can act on. */
export function planProblemSentence({ problem }: PlanProblem): string {
  switch (problem) {
    case 'no-steps':
      return 'A plan needs at least one step.'
    case 'unknown-step':
      return 'This kit is kept until a step that is not in the plan. Choose another.'
    case 'ends-before-it-starts':
      return 'This kit would go back before it is collected. Look at the days of the two steps.'
    case 'before-the-plan':
      return 'This kit would be collected before the first day of the plan. Move the step later, or need it for fewer days.'
  }
}

/** When each step falls if the plan starts on a day: `dayOffset` 3 from the 1st is the 4th. */
export function stepDays(steps: readonly PlanStep[], startOn: CalendarDay): Map<string, CalendarDay> {
  return new Map(steps.map((step) => [step.id, addDays(startOn, step.dayOffset)]))
}

/** The bookings of a plan whose steps fall on given days, in the order of steps and needs. */
export function planLines(
  steps: readonly PlanStep[],
  days: ReadonlyMap<string, CalendarDay>,
  longest: LongestLoan = () => undefined,
): PlanLine[] {
  return steps.flatMap((step) =>
    step.needs.map((wanted, need) => {
      const on = dayOf(days, step.id)
      const from = addDays(on, wanted.fromDays)
      const end = addDays(dayOf(days, wanted.untilStepId ?? step.id), wanted.toDays)
      const most = longest(wanted.kindId)
      const latest = most === undefined ? end : addDays(from, most - 1)
      const capped = latest < end
      return { stepId: step.id, kindId: wanted.kindId, need, from, to: capped ? latest : end, capped }
    }),
  )
}

/** What a plan takes of each kind, in days from its first day; the turnaround after each booking is not in it. */
export function planSpans(
  steps: readonly PlanStep[],
  longest: LongestLoan = () => undefined,
): Map<string, Span[]> {
  const offsets = offsetsOf(steps)
  const spans = new Map<string, Span[]>()
  for (const step of steps)
    for (const wanted of step.needs) {
      const span = spanOf(step, wanted, offsets)
      const most = longest(wanted.kindId)
      const to = most === undefined ? span.to : Math.min(span.to, span.from + most - 1)
      spans.set(wanted.kindId, [...(spans.get(wanted.kindId) ?? []), { from: span.from, to }])
    }
  return spans
}

export interface DatedStep {
  id: string
  on: CalendarDay
  done: boolean
}

/**
 * Where the steps fall once one of them is moved: it goes to the new day, and every step not yet done that came on its
 * day or after it keeps its distance. What is done stays. With `alone`, only the one step moves.
 */
export function movedDays(
  steps: readonly DatedStep[],
  stepId: string,
  on: CalendarDay,
  alone = false,
): Map<string, CalendarDay> {
  const place = steps.findIndex((step) => step.id === stepId)
  const moved = steps[place]
  const shift = moved ? dayNumber(on) - dayNumber(moved.on) : 0
  return new Map(
    steps.map((step, index) => {
      const follows = moved !== undefined && (step.on > moved.on || (step.on === moved.on && index > place))
      const moves = !step.done && (step.id === stepId || (follows && !alone))
      return [step.id, moves ? addDays(step.on, shift) : step.on]
    }),
  )
}

/** The next step to do, by day; undefined once all are done. */
export function nextStep<Step extends DatedStep>(steps: readonly Step[]): Step | undefined {
  let next: Step | undefined
  for (const step of steps) if (!step.done && (next === undefined || step.on < next.on)) next = step
  return next
}

/** The last day a plan reaches, bookings included. */
export function planEnd(lines: readonly DayRange[], days: Iterable<CalendarDay>): CalendarDay | undefined {
  let end: CalendarDay | undefined
  for (const on of [...days, ...lines.map((line) => line.to)]) end = end ? laterDay(end, on) : on
  return end
}

const offsetsOf = (steps: readonly PlanStep[]) => new Map(steps.map((step) => [step.id, step.dayOffset]))

function spanOf(step: PlanStep, wanted: PlanNeed, offsets: ReadonlyMap<string, number>): Span {
  const end = offsets.get(wanted.untilStepId ?? step.id) ?? step.dayOffset
  return { from: step.dayOffset + wanted.fromDays, to: end + wanted.toDays }
}

function dayOf(days: ReadonlyMap<string, CalendarDay>, stepId: string): CalendarDay {
  const on = days.get(stepId)
  if (on === undefined) throw new RangeError(`no day is given for the step ${stepId}`)
  return on
}
