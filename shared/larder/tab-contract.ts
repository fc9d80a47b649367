import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, prose } from '../http/fields.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import { SETTLEMENT_METHODS, UNITS } from './vocabulary.ts'

const SETTLEMENT_MAX_MINOR = 10_000_000
const params = z.object({ id: Id })

export const TAB_KINDS = ['draw', 'undo', 'settlement'] as const

export const TabItem = z.object({
  id: Id,
  kind: z.enum(TAB_KINDS),
  at: Instant,
  /** What it adds to what is owed; negative for an undone draw and for a settlement. */
  amountMinor: z.int(),
  /** What was owed after it. */
  balanceMinor: z.int(),
  ingredientId: Id.nullable(),
  ingredientName: z.string().nullable(),
  quantity: z.number().nullable(),
  unit: z.enum(UNITS).nullable(),
  lotId: Id.nullable(),
  batchId: Id.nullable(),
  batchName: z.string().nullable(),
  method: z.enum(SETTLEMENT_METHODS).nullable(),
  note: z.string().nullable(),
})
export type TabItem = z.output<typeof TabItem>

/** What a member owes the space for what they drew, at cost. */
export const Tab = z.object({
  memberId: Id,
  memberName: z.string(),
  currency: z.string(),
  /** Owed now; negative when the space owes the member. */
  balanceMinor: z.int(),
  /** Owed before the first item. */
  openingMinor: z.int(),
  /** Newest first. */
  items: z.array(TabItem),
})
export type Tab = z.output<typeof Tab>

export const SettlementRequest = z
  .strictObject({
    amountMinor: intIn(-SETTLEMENT_MAX_MINOR, SETTLEMENT_MAX_MINOR),
    method: z.enum(SETTLEMENT_METHODS),
    note: prose(300).optional(),
  })
  .refine((s) => s.amountMinor > 0 || (s.method === 'correction' && s.amountMinor !== 0), {
    path: ['amountMinor'],
    message: 'More than 0. Only a correction can go the other way.',
  })
export type SettlementRequest = z.output<typeof SettlementRequest>

export const Settlement = z.object({
  id: Id,
  memberId: Id,
  amountMinor: z.int(),
  currency: z.string(),
  method: z.enum(SETTLEMENT_METHODS),
  note: z.string().nullable(),
  at: Instant,
  /** What is owed after it. */
  balanceMinor: z.int(),
})

export const TabBrief = z.object({
  memberId: Id,
  memberName: z.string(),
  balanceMinor: z.int(),
  lastAt: Instant.nullable(),
})
export type TabBrief = z.output<typeof TabBrief>

const period = z.object({ from: CalendarDay.optional(), to: CalendarDay.optional() })

export const tabEndpoints = {
  mine: endpoint({
    method: 'GET',
    path: '/me/tab',
    access: 'member',
    summary: 'What you owe for what you drew, and how it came about.',
    query: period,
    reply: Tab,
  }),
  ofMember: endpoint({
    method: 'GET',
    path: '/members/:id/tab',
    access: 'member',
    summary: 'The statement of a member: their own, or anyone’s for a steward.',
    params,
    query: period,
    reply: Tab,
  }),
  all: endpoint({
    method: 'GET',
    path: '/tabs',
    access: 'steward',
    summary: 'Members with an open tab, the largest first.',
    reply: z.object({ currency: z.string(), items: z.array(TabBrief), nextCursor: z.null() }),
  }),
  settle: endpoint({
    method: 'POST',
    path: '/members/:id/settlements',
    access: 'steward',
    summary: 'Records that a member settled, outside the app.',
    params,
    body: SettlementRequest,
    status: 201,
    creates: 'sync',
    reply: Settlement,
  }),
}
