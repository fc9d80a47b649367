import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, line, prose } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { KIND_CATEGORIES } from '../kit/vocabulary.ts'
import { CalendarDay } from '../time/day.ts'
import { lengthDays } from '../time/day-range.ts'
import { Instant } from '../time/instant.ts'
import { LOAN_EVENTS, LOAN_STATUSES, RETURN_CONDITIONS, RISK_REASONS } from './vocabulary.ts'

/** As many days as availability is told for at once. */
export const AVAILABILITY_DAYS_MAX = 400
/** As many lines as one basket takes. */
export const BASKET_LINES_MAX = 30
/** No loan is longer (a CHECK of its table says so too), so what touches a day started no earlier. */
export const LOAN_DAYS_MAX = 730

/** A day people ask about: room is left on both sides for what is counted from it. */
export const AskedDay = CalendarDay.refine((on) => on >= '1970-01-01' && on < '2900-01-01', {
  error: 'Give a day between 1970 and 2899.',
})

const dates = { from: CalendarDay, to: CalendarDay }
const askedDates = { from: AskedDay, to: AskedDay }
type Dates = z.output<z.ZodObject<typeof dates>>

/** Names the field at fault when a range of days runs backwards or on and on. */
const inOrder = (max: number) => (range: Dates, context: z.core.$RefinementCtx<Dates>) => {
  const message =
    range.to < range.from
      ? 'The last day is before the first.'
      : lengthDays(range) > max
        ? `Ask for ${max} days at most.`
        : undefined
  if (message) context.addIssue({ code: 'custom', path: ['to'], message, input: range.to })
}

export const Loan = z.object({
  id: Id,
  kindId: Id,
  kindName: z.string(),
  itemId: Id.nullable(),
  itemTag: z.string().nullable(),
  memberId: Id,
  memberName: z.string(),
  batchId: Id.nullable(),
  stepId: Id.nullable(),
  basketId: Id.nullable(),
  wild: z.boolean(),
  ...dates,
  status: z.enum(LOAN_STATUSES),
  overdue: z.boolean(),
  daysLate: z.int(),
  atRisk: z.boolean(),
  atRiskReason: z.enum(RISK_REASONS).nullable(),
  note: z.string().nullable(),
  declineReason: z.string().nullable(),
  overrideReason: z.string().nullable(),
  /** The last day an approved loan may be collected. */
  collectBy: CalendarDay.nullable(),
  /** The day the member asks to keep it until, while that waits for an answer. */
  extensionTo: CalendarDay.nullable(),
  requestedAt: Instant,
  decidedAt: Instant.nullable(),
  outAt: Instant.nullable(),
  returnedAt: Instant.nullable(),
  returnCondition: z.enum(RETURN_CONDITIONS).nullable(),
  returnNote: z.string().nullable(),
  updatedAt: Instant,
  version: z.int(),
})
export type Loan = z.output<typeof Loan>

export const LoanHistoryLine = z.object({
  event: z.enum(LOAN_EVENTS),
  at: Instant,
  /** Null: the house itself. */
  byName: z.string().nullable(),
  detail: z.string().nullable(),
})

export const LoanDetail = Loan.extend({
  /** What would be handed out today: shown before it is chosen at check-out. */
  suggestedItemId: Id.nullable(),
  suggestedTag: z.string().nullable(),
  history: z.array(LoanHistoryLine),
})
export type LoanDetail = z.output<typeof LoanDetail>

const request = {
  kindId: Id,
  ...askedDates,
  /** Ask for kit that is kept for wild cultures. Left out: as the kind is. */
  wild: z.boolean().optional(),
}

/** For stewards: book for someone else, or past a limit with the reason. */
const onBehalf = { memberId: Id.optional(), overrideReason: line(500).optional() }

export const LoanRequest = z
  .strictObject({ ...request, batchId: Id.optional(), note: prose(1000).optional(), ...onBehalf })
  .superRefine(inOrder(LOAN_DAYS_MAX))
export type LoanRequest = z.output<typeof LoanRequest>

export const BasketLine = z
  .strictObject({ ...request, stepId: Id.optional() })
  .superRefine(inOrder(LOAN_DAYS_MAX))
export type BasketLine = z.output<typeof BasketLine>

export const BasketRequest = z.strictObject({
  batchId: Id.optional(),
  note: prose(1000).optional(),
  lines: z.array(BasketLine).min(1).max(BASKET_LINES_MAX),
  ...onBehalf,
})
export type BasketRequest = z.output<typeof BasketRequest>

/** What a refusal offers instead: part of the `not-available` problem. */
export const Instead = z.object({
  nearest: z.object(dates).nullable(),
  alternatives: z.array(z.object({ kindId: Id, name: z.string() })),
})
export type Instead = z.output<typeof Instead>

const statuses = z
  .string()
  .transform((text) => text.split(','))
  .pipe(z.array(z.enum(LOAN_STATUSES)).min(1).max(LOAN_STATUSES.length))

export const LoanQuery = z.object({
  ...pageQuery,
  /** One status or several: `?status=approved,out`. */
  status: statuses.optional(),
  kindId: Id.optional(),
  batchId: Id.optional(),
  /** Loans that touch a day from here on. */
  from: AskedDay.optional(),
  /** Loans that touch a day up to here. */
  to: AskedDay.optional(),
  /** `me`, or for stewards anyone's id. Members see their own whatever they leave out. */
  member: Id.optional(),
})
export type LoanQuery = z.output<typeof LoanQuery>

const availabilityQuery = { ...askedDates, wild: z.enum(['true', 'false']).optional() }

export const DayAvailability = z.object({ date: CalendarDay, serviceable: z.int(), free: z.int() })

export const KindAvailability = z.object({
  kindId: Id,
  ...dates,
  minFree: z.int(),
  days: z.array(DayAvailability),
})
export type KindAvailability = z.output<typeof KindAvailability>

export const ShelfAvailability = z.object({
  ...dates,
  kinds: z.array(
    z.object({
      kindId: Id,
      name: z.string(),
      minFree: z.int(),
      serviceable: z.int(),
      free: z.array(z.int()),
    }),
  ),
})
export type ShelfAvailability = z.output<typeof ShelfAvailability>

const byId = { params: z.object({ id: Id }) }

export const loanEndpoints = {
  kindAvailability: endpoint({
    method: 'GET',
    path: '/kinds/:id/availability',
    access: 'member',
    summary: 'How many of a kind are free on each day.',
    ...byId,
    query: z.object(availabilityQuery).superRefine(inOrder(AVAILABILITY_DAYS_MAX)),
    reply: KindAvailability,
  }),
  availability: endpoint({
    method: 'GET',
    path: '/availability',
    access: 'member',
    summary: 'How many of every kind are free on each day.',
    query: z
      .object({ ...availabilityQuery, category: z.enum(KIND_CATEGORIES).optional() })
      .superRefine(inOrder(AVAILABILITY_DAYS_MAX)),
    reply: ShelfAvailability,
  }),
  list: endpoint({
    method: 'GET',
    path: '/loans',
    access: 'member',
    summary: 'Loans, latest collection day first: your own; for stewards, anyone’s.',
    query: LoanQuery,
    reply: pageOf(Loan),
  }),
  book: endpoint({
    method: 'POST',
    path: '/loans',
    access: 'member',
    summary: 'Ask for a kind from a day to a day. Refused as `not-available` with what would do instead.',
    creates: 'sync',
    status: 201,
    body: LoanRequest,
    reply: Loan,
  }),
  bookBasket: endpoint({
    method: 'POST',
    path: '/baskets',
    access: 'member',
    summary:
      'Ask for several loans at once: all or nothing, with an answer for each line that stands in the way.',
    creates: 'sync',
    status: 201,
    body: BasketRequest,
    reply: z.object({ basketId: Id, loans: z.array(Loan) }),
  }),
  get: endpoint({
    method: 'GET',
    path: '/loans/:id',
    access: 'member',
    summary: 'A loan with its history and the item that would be handed out.',
    ...byId,
    reply: LoanDetail,
  }),
  change: endpoint({
    method: 'PATCH',
    path: '/loans/:id',
    access: 'member',
    summary: 'Change the note on a loan.',
    versioned: true,
    ...byId,
    body: z.strictObject({ note: prose(1000).nullable() }),
    reply: Loan,
  }),
  approve: endpoint({
    method: 'POST',
    path: '/loans/:id/approve',
    access: 'steward',
    summary: 'Say yes to a request, or to the extension that was asked for.',
    ...byId,
    body: z.strictObject({}),
    reply: Loan,
  }),
  decline: endpoint({
    method: 'POST',
    path: '/loans/:id/decline',
    access: 'steward',
    summary: 'Say no to a request, or to the extension that was asked for, and why.',
    ...byId,
    body: z.strictObject({ reason: line(500) }),
    reply: Loan,
  }),
  cancel: endpoint({
    method: 'POST',
    path: '/loans/:id/cancel',
    access: 'member',
    summary: 'Give up a loan that is not out yet. Its days are free at once.',
    whileSuspended: true,
    ...byId,
    body: z.strictObject({ reason: line(500).optional() }),
    reply: Loan,
  }),
  checkOut: endpoint({
    method: 'POST',
    path: '/loans/:id/check-out',
    access: 'steward',
    summary:
      'Hand out an item. It must be clean and without a blocking fault, or the override needs a reason.',
    ...byId,
    body: z.strictObject({ itemId: Id, overrideReason: line(500).optional() }),
    reply: Loan,
  }),
  checkIn: endpoint({
    method: 'POST',
    path: '/loans/:id/check-in',
    access: 'steward',
    summary: 'Take an item back, in the state it is in.',
    ...byId,
    body: z.strictObject({
      condition: z.enum(RETURN_CONDITIONS),
      hygiene: z.enum(['clean', 'dirty']),
      wild: z.boolean().optional(),
      note: prose(1000).optional(),
    }),
    reply: Loan,
  }),
  extend: endpoint({
    method: 'POST',
    path: '/loans/:id/extend',
    access: 'member',
    summary: 'Keep a loan until a later day: at once when nobody is delayed, otherwise asked at the desk.',
    ...byId,
    body: z.strictObject({ to: AskedDay, overrideReason: line(500).optional() }),
    reply: Loan,
  }),
}
