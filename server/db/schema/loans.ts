import { index, integer, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core'
import {
  LOAN_EVENTS,
  LOAN_STATUSES,
  REFUSAL_REASONS,
  RETURN_CONDITIONS,
  RISK_REASONS,
  WAITING_STATES,
} from '#shared/loans/vocabulary'
import { createdAt, day, flag, id, instant, updatedAt, version } from './columns.ts'
import { items, kinds } from './kit.ts'
import { members } from './people.ts'

const memberId = (name: string) => text(name).references(() => members.id)

/** Triggers in the migration guard this table: no pool is ever promised more than it has. */
export const loans = sqliteTable(
  'loans',
  {
    id: id(),
    kindId: text('kind_id')
      .notNull()
      .references(() => kinds.id),
    /** Null until check-out. */
    itemId: text('item_id').references(() => items.id),
    memberId: memberId('member_id').notNull(),
    batchId: text('batch_id'),
    stepId: text('step_id'),
    /** Asked for together with others of the same basket. */
    basketId: text('basket_id'),
    /** Served from the items kept for wild cultures. */
    wild: flag('wild').notNull().default(false),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on').notNull(),
    /** Of the kind, as it was when this was booked. */
    turnaroundDays: integer('turnaround_days').notNull(),
    /** The last day it takes from the shelf; an overdue loan is rolled forward daily. */
    blocksUntilOn: day('blocks_until_on').notNull(),
    /** Live, or back and still drying. */
    blocking: flag('blocking').notNull(),
    status: text('status', { enum: LOAN_STATUSES }).notNull(),
    note: text('note'),
    declineReason: text('decline_reason'),
    /** Why a steward went past a limit or a rule of check-out; null: nobody did. */
    overrideReason: text('override_reason'),
    requestedAt: instant('requested_at').notNull(),
    requestedBy: memberId('requested_by').notNull(),
    /** Null by itself with a decision: the kind approves itself. */
    decidedAt: instant('decided_at'),
    decidedBy: memberId('decided_by'),
    approvedOn: day('approved_on'),
    outAt: instant('out_at'),
    outBy: memberId('out_by'),
    returnedAt: instant('returned_at'),
    returnedOn: day('returned_on'),
    returnedBy: memberId('returned_by'),
    returnCondition: text('return_condition', { enum: RETURN_CONDITIONS }),
    returnNote: text('return_note'),
    /** The day the member asks to keep it until; null: no question is open. */
    extensionTo: day('extension_to'),
    extensionAskedAt: instant('extension_asked_at'),
    atRisk: flag('at_risk').notNull().default(false),
    atRiskReason: text('at_risk_reason', { enum: RISK_REASONS }),
    /** Counts changes of dates or item, for calendar programs. */
    sequence: integer('sequence').notNull().default(0),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [
    index('loans_hold').on(t.kindId, t.wild, t.blocksUntilOn, t.fromOn, t.id, t.blocking),
    index('loans_shelf').on(t.blocksUntilOn, t.fromOn, t.kindId, t.wild, t.blocking),
    uniqueIndex('loans_item_out').on(t.itemId),
    index('loans_item').on(t.itemId, t.fromOn),
    index('loans_member').on(t.memberId, t.fromOn, t.id, t.toOn),
    index('loans_kind').on(t.kindId, t.fromOn, t.id, t.toOn),
    index('loans_status').on(t.status, t.fromOn, t.id),
    index('loans_from').on(t.fromOn, t.id, t.toOn),
  ],
)

/** One row: the day up to which overdue loans have been rolled forward. */
export const loanRolls = sqliteTable('loan_rolls', {
  id: integer('id').primaryKey(),
  rolledOn: day('rolled_on').notNull(),
})

/** Who did what when; only added to. */
export const loanEvents = sqliteTable(
  'loan_events',
  {
    id: integer('id').primaryKey(),
    loanId: text('loan_id')
      .notNull()
      .references(() => loans.id, { onDelete: 'cascade' }),
    event: text('event', { enum: LOAN_EVENTS }).notNull(),
    at: instant('at').notNull(),
    /** Null: the house itself. */
    byId: memberId('by_id'),
    detail: text('detail'),
  },
  (t) => [index('loan_events_loan').on(t.loanId, t.id)],
)

export const waitings = sqliteTable(
  'waitings',
  {
    id: id(),
    kindId: text('kind_id')
      .notNull()
      .references(() => kinds.id),
    memberId: memberId('member_id').notNull(),
    wild: flag('wild').notNull().default(false),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on').notNull(),
    /** With turnaround: what an offer keeps free. */
    blocksUntilOn: day('blocks_until_on').notNull(),
    state: text('state', { enum: WAITING_STATES }).notNull(),
    /** Null until something was offered. */
    offeredUntil: instant('offered_until'),
    /** The loan it became. */
    loanId: text('loan_id').references(() => loans.id),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
  },
  (t) => [
    index('waitings_kind').on(t.kindId, t.state, t.wild, t.createdAt, t.id),
    index('waitings_state').on(t.state, t.createdAt, t.id),
    index('waitings_member').on(t.memberId, t.state),
    uniqueIndex('waitings_once').on(t.memberId, t.kindId, t.wild, t.fromOn, t.toOn),
  ],
)

/** Every booking that was refused: demand the shelf could not meet. */
export const refusals = sqliteTable(
  'refusals',
  {
    id: integer('id').primaryKey(),
    kindId: text('kind_id')
      .notNull()
      .references(() => kinds.id),
    memberId: memberId('member_id').notNull(),
    fromOn: day('from_on').notNull(),
    toOn: day('to_on').notNull(),
    reason: text('reason', { enum: REFUSAL_REASONS }).notNull(),
    refusedOn: day('refused_on').notNull(),
    createdAt: createdAt(),
  },
  (t) => [index('refusals_kind').on(t.kindId, t.refusedOn), index('refusals_member').on(t.memberId)],
)
