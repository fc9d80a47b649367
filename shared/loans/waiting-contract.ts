import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { AskedDay } from './contract.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import { WAITING_STATES } from './vocabulary.ts'

/** How many places in line one member may have at a time. */
export const WAITINGS_MAX = 10

export const Waiting = z.object({
  id: Id,
  kindId: Id,
  kindName: z.string(),
  memberId: Id,
  memberName: z.string(),
  wild: z.boolean(),
  from: CalendarDay,
  to: CalendarDay,
  state: z.enum(WAITING_STATES),
  /** What is offered is kept until then. */
  offeredUntil: Instant.nullable(),
  loanId: Id.nullable(),
  createdAt: Instant,
})
export type Waiting = z.output<typeof Waiting>

export const WaitingRequest = z
  .strictObject({ kindId: Id, from: AskedDay, to: AskedDay, wild: z.boolean().optional() })
  .refine((range) => range.to >= range.from, { path: ['to'], error: 'The last day is before the first.' })
export type WaitingRequest = z.output<typeof WaitingRequest>

export const waitingEndpoints = {
  list: endpoint({
    method: 'GET',
    path: '/waiting',
    access: 'member',
    summary: 'Your places in line; for stewards with `member=all`, everyone’s.',
    query: z.object({ ...pageQuery, kindId: Id.optional(), member: z.enum(['me', 'all']).default('me') }),
    reply: pageOf(Waiting),
  }),
  wait: endpoint({
    method: 'POST',
    path: '/waiting',
    access: 'member',
    summary: 'Wait for a kind on given days. When it comes free, the first in line has a day to take it.',
    creates: 'sync',
    status: 201,
    body: WaitingRequest,
    reply: Waiting,
  }),
  leave: endpoint({
    method: 'DELETE',
    path: '/waiting/:id',
    access: 'member',
    summary: 'Leave the line, or let an offer go.',
    whileSuspended: true,
    params: z.object({ id: Id }),
    status: 204,
    reply: null,
  }),
}
