import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id } from '../http/fields.ts'
import { HYGIENE_STATES } from '../kit/vocabulary.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import { LOAN_STATUSES, RISK_REASONS, WAITING_STATES } from './vocabulary.ts'

/** As many rows as one list of the desk shows. What is beyond is older or later, and comes up as rows are dealt with. */
export const DESK_ROWS_MAX = 200

const DeskLoan = z.object({
  loanId: Id,
  kindId: Id,
  kindName: z.string(),
  itemId: Id.nullable(),
  itemTag: z.string().nullable(),
  shelf: z.string().nullable(),
  memberId: Id,
  memberName: z.string(),
  memberEmail: z.string(),
  memberPhone: z.string().nullable(),
  from: CalendarDay,
  to: CalendarDay,
  status: z.enum(LOAN_STATUSES),
  daysLate: z.int(),
  atRisk: z.boolean(),
  note: z.string().nullable(),
  basketId: Id.nullable(),
  version: z.int(),
})

const Delayed = z.object({ loanId: Id, memberName: z.string(), kindName: z.string(), from: CalendarDay })

export const DeskApproval = DeskLoan.extend({
  /** A booking to allow, or more days for a loan. */
  question: z.enum(['request', 'extension']),
  extensionTo: CalendarDay.nullable(),
  askedAt: Instant,
  /** On its busiest day this many would still be free. 0: it takes the last one. */
  freeAfter: z.int(),
  /** Whom an extension would leave without an item. */
  delays: z.array(Delayed),
})

export const DeskCollection = DeskLoan.extend({
  collectBy: CalendarDay,
  suggestedItemId: Id.nullable(),
  suggestedTag: z.string().nullable(),
  suggestedShelf: z.string().nullable(),
})

export const DeskRisk = DeskLoan.extend({ reason: z.enum(RISK_REASONS) })

export const DeskWashing = z.object({
  itemId: Id,
  tag: z.string(),
  kindId: Id,
  kindName: z.string(),
  shelf: z.string().nullable(),
  wild: z.boolean(),
  hygiene: z.enum(HYGIENE_STATES),
  needsSanitised: z.boolean(),
  /** The next collection of its kind: what to wash first. */
  wantedOn: CalendarDay.nullable(),
  version: z.int(),
})

export const DeskFault = z.object({
  faultId: Id,
  itemId: Id,
  tag: z.string(),
  kindId: Id,
  kindName: z.string(),
  summary: z.string(),
  blocking: z.boolean(),
  reportedAt: Instant,
})

export const DeskWaiting = z.object({
  waitingId: Id,
  kindId: Id,
  kindName: z.string(),
  memberId: Id,
  memberName: z.string(),
  from: CalendarDay,
  to: CalendarDay,
  state: z.enum(WAITING_STATES),
  offeredUntil: Instant.nullable(),
  createdAt: Instant,
})

export const DeskLowStock = z.object({
  ingredientId: Id,
  name: z.string(),
  unit: z.string(),
  remaining: z.number(),
  parLevel: z.number(),
})

/** A lot to use soon, or one past its date. */
export const DeskExpiring = z.object({
  lotId: Id,
  ingredientId: Id,
  name: z.string(),
  unit: z.string(),
  remaining: z.number(),
  useBy: CalendarDay,
  shelf: z.string().nullable(),
})

export const Desk = z.object({
  today: CalendarDay,
  approvals: z.array(DeskApproval),
  collections: z.array(DeskCollection),
  returns: z.array(DeskLoan),
  overdue: z.array(DeskLoan),
  atRisk: z.array(DeskRisk),
  washing: z.array(DeskWashing),
  faults: z.array(DeskFault),
  waiting: z.array(DeskWaiting),
  lowStock: z.array(DeskLowStock),
  expiring: z.array(DeskExpiring),
})
export type Desk = z.output<typeof Desk>

export const deskEndpoints = {
  desk: endpoint({
    method: 'GET',
    path: '/desk',
    access: 'steward',
    summary: 'What needs a decision or a pair of hands today.',
    reply: Desk,
  }),
}
