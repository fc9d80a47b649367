import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id } from '../http/fields.ts'
import { AskedDay } from './contract.ts'
import { CalendarDay } from '../time/day.ts'
import { lengthDays } from '../time/day-range.ts'
import { LOAN_STATUSES } from './vocabulary.ts'

/** A month with the weeks at its edges, and some to spare. */
const CALENDAR_DAYS_MAX = 100

export const CalendarLoan = z.object({
  loanId: Id,
  kindId: Id,
  kindName: z.string(),
  itemTag: z.string().nullable(),
  memberId: Id,
  memberName: z.string(),
  mine: z.boolean(),
  from: CalendarDay,
  to: CalendarDay,
  status: z.enum(LOAN_STATUSES),
  overdue: z.boolean(),
  /** Where the bar ends: the return-by day, or today for what is late. */
  until: CalendarDay,
  atRisk: z.boolean(),
})

export const Calendar = z.object({
  from: CalendarDay,
  to: CalendarDay,
  loans: z.array(CalendarLoan),
})
export type Calendar = z.output<typeof Calendar>

export const CalendarQuery = z
  .object({
    from: AskedDay,
    to: AskedDay,
    /** `all` is for stewards. */
    scope: z.enum(['me', 'all']).default('me'),
    kindId: Id.optional(),
    memberId: Id.optional(),
  })
  .superRefine((range, context) => {
    const message =
      range.to < range.from
        ? 'The last day is before the first.'
        : lengthDays(range) > CALENDAR_DAYS_MAX
          ? `Ask for ${CALENDAR_DAYS_MAX} days at most.`
          : undefined
    if (message) context.addIssue({ code: 'custom', path: ['to'], message, input: range.to })
  })
export type CalendarQuery = z.output<typeof CalendarQuery>

export const calendarEndpoints = {
  month: endpoint({
    method: 'GET',
    path: '/calendar',
    access: 'member',
    summary: 'Loans that touch a range of days: your own; for stewards, everyone’s.',
    query: CalendarQuery,
    reply: Calendar,
  }),
}
