import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, line, prose } from '../http/fields.ts'
import { LOAN_STATUSES } from '../loans/vocabulary.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant, InstantInput } from '../time/instant.ts'
import { RECIPE_UNITS, STEP_KINDS } from './vocabulary.ts'

const Range = z.object({ from: CalendarDay, to: CalendarDay })
const Caution = z.object({ text: z.string(), why: z.string() })
const params = z.object({ id: Id })
const stepParams = z.object({ id: Id, stepId: Id })

/** Kit a step needs: from so many days before its day (negative) to so many after, or after the day of a later step. */
const NeedRequest = z.strictObject({
  kindId: Id,
  fromDays: intIn(-60, 60).default(0),
  toDays: intIn(-60, 366).default(0),
  /** Place in this list of the step that ends it; its own when absent. */
  untilStep: intIn(0, 59).nullish(),
})

const StepRequest = z.strictObject({
  /** Of a step that is there already: what is done stays done. */
  id: Id.optional(),
  kind: z.enum(STEP_KINDS),
  title: line(80),
  guidance: prose(1000).default(''),
  dayOffset: intIn(0, 730),
  needs: z.array(NeedRequest).max(12).default([]),
})
export const StepsRequest = z.strictObject({ steps: z.array(StepRequest).min(1).max(60) })
export type StepsRequest = z.output<typeof StepsRequest>

export const StepNeed = z.object({
  id: Id,
  kindId: Id,
  kindName: z.string(),
  fromDays: z.int(),
  toDays: z.int(),
  untilStepId: Id.nullable(),
  /** Null until the plan has a first day. */
  from: CalendarDay.nullable(),
  to: CalendarDay.nullable(),
  /** Its booking; shown to its maker only. */
  loan: z
    .object({
      id: Id,
      status: z.enum(LOAN_STATUSES),
      from: CalendarDay,
      to: CalendarDay,
      tag: z.string().nullable(),
    })
    .nullable(),
})

export const BatchStep = z.object({
  id: Id,
  kind: z.enum(STEP_KINDS),
  title: z.string(),
  guidance: z.string(),
  dayOffset: z.int(),
  on: CalendarDay.nullable(),
  doneAt: Instant.nullable(),
  doneNote: z.string().nullable(),
  needs: z.array(StepNeed),
  cautions: z.array(Caution),
})
export type BatchStep = z.output<typeof BatchStep>

/** One booking of the plan, and whether the shelf has it. */
export const PlanLineReply = z.object({
  stepId: Id,
  kindId: Id,
  kindName: z.string(),
  from: CalendarDay,
  to: CalendarDay,
  /** Cut to the longest loan of its kind. */
  capped: z.boolean(),
  free: z.boolean(),
  /** Why not, where it is not only that none is free. */
  reason: z.string().nullable(),
  nearest: Range.nullable(),
  alternatives: z.array(z.object({ kindId: Id, name: z.string() })),
})
export type PlanLineReply = z.output<typeof PlanLineReply>

/** What a plan draws from the larder. `short` goes on the shopping list. */
export const PlanIngredient = z.object({
  ingredientId: Id,
  name: z.string(),
  unit: z.enum(RECIPE_UNITS),
  needed: z.number(),
  short: z.number(),
})
export type PlanIngredient = z.output<typeof PlanIngredient>

export const Plan = z.object({
  startOn: CalendarDay,
  endsOn: CalendarDay,
  fits: z.boolean(),
  steps: z.array(z.object({ id: Id, kind: z.enum(STEP_KINDS), title: z.string(), on: CalendarDay })),
  lines: z.array(PlanLineReply),
  ingredients: z.array(PlanIngredient),
  bottles: z.int(),
})
export type Plan = z.output<typeof Plan>

const BookedLoan = z.object({
  id: Id,
  kindId: Id,
  kindName: z.string(),
  from: CalendarDay,
  to: CalendarDay,
  status: z.enum(LOAN_STATUSES),
})

/** What happens to a booking when the plan moves. */
export const MOVE_OUTCOMES = [
  'stays',
  'moves',
  'asked-again',
  'kept-longer',
  'asked-longer',
  'not-free',
] as const
export type MoveOutcome = (typeof MOVE_OUTCOMES)[number]

export const PlanMove = z.object({
  moved: z.boolean(),
  possible: z.boolean(),
  steps: z.array(z.object({ id: Id, title: z.string(), from: CalendarDay, to: CalendarDay })),
  bookings: z.array(
    z.object({
      loanId: Id,
      kindName: z.string(),
      before: Range,
      after: Range,
      outcome: z.enum(MOVE_OUTCOMES),
    }),
  ),
})
export type PlanMove = z.output<typeof PlanMove>

export const planEndpoints = {
  saveSteps: endpoint({
    method: 'PUT',
    path: '/batches/:id/steps',
    access: 'member',
    summary: 'Write the steps of a batch of yours, while no kit is booked for it.',
    versioned: true,
    params,
    body: StepsRequest,
    reply: z.object({ version: z.int(), steps: z.array(BatchStep) }),
  }),
  plan: endpoint({
    method: 'POST',
    path: '/batches/:id/plan',
    access: 'member',
    summary:
      'What the plan would be from a day: steps with dates, the basket they need, and what the larder has.',
    params,
    body: z.strictObject({ startOn: CalendarDay }),
    reply: Plan,
  }),
  earliestStart: endpoint({
    method: 'GET',
    path: '/batches/:id/earliest-start',
    access: 'member',
    summary: 'The first day from which every piece of kit of the plan is free.',
    params,
    query: z.object({ after: CalendarDay.optional() }),
    reply: z.object({
      /** Null: none as far ahead as the kit can be booked. */
      startOn: CalendarDay.nullable(),
      searchedTo: CalendarDay,
      lines: z.array(PlanLineReply),
    }),
  }),
  requestPlan: endpoint({
    method: 'POST',
    path: '/batches/:id/plan/request',
    access: 'member',
    summary: 'Book the whole basket, reserve the ingredients and date the steps: all of it or nothing.',
    creates: 'sync',
    status: 201,
    params,
    body: z.strictObject({ startOn: CalendarDay }),
    reply: z.object({
      startOn: CalendarDay,
      loans: z.array(BookedLoan),
      short: z.array(PlanIngredient),
      version: z.int(),
    }),
  }),
  movePlan: endpoint({
    method: 'POST',
    path: '/batches/:id/plan/move',
    access: 'member',
    summary:
      'Move a step, those after it, and the bookings that depend on them. Shows what would move until confirmed.',
    params,
    body: z.strictObject({
      stepId: Id,
      on: CalendarDay,
      alone: z.boolean().default(false),
      confirm: z.boolean().default(false),
    }),
    reply: PlanMove,
  }),
  dropPlan: endpoint({
    method: 'POST',
    path: '/batches/:id/plan/drop',
    access: 'member',
    summary: 'Cancel the bookings that are not collected yet, and give back what was reserved.',
    params,
    body: z.strictObject({}),
    reply: z.object({ cancelled: z.int(), version: z.int() }),
  }),
  addStep: endpoint({
    method: 'POST',
    path: '/batches/:id/steps',
    access: 'member',
    summary: 'Add a step that needs no kit, such as one more feed.',
    creates: 'sync',
    status: 201,
    params,
    body: z.strictObject({
      kind: z.enum(STEP_KINDS),
      title: line(80),
      guidance: prose(1000).default(''),
      on: CalendarDay,
    }),
    reply: BatchStep,
  }),
  stepDone: endpoint({
    method: 'POST',
    path: '/batches/:id/steps/:stepId/done',
    access: 'member',
    summary: 'Tick a step, with the moment and a note.',
    params: stepParams,
    body: z.strictObject({ at: InstantInput.optional(), note: line(1000).optional() }),
    reply: BatchStep,
  }),
  stepUndone: endpoint({
    method: 'DELETE',
    path: '/batches/:id/steps/:stepId/done',
    access: 'member',
    summary: 'Take the tick off a step again.',
    params: stepParams,
    reply: BatchStep,
  }),
}
