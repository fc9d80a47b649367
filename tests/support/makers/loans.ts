import type { Loan } from '#shared/loans/contract'
import type { KindRequest } from '#shared/kit/kind-contract'
import type { LoanStatus } from '#shared/loans/vocabulary'
import { addDays, type CalendarDay } from '#shared/time/day'
import { runLoanRound } from '#server/services/loans/round'
import { comeBack, type Person } from '#tests/support/people'
import type { TestApp } from '#tests/support/test-app'
import { makeItems, makeKind } from './kit.ts'

/** Days before (negative) or after today of the app's clock. */
export const inDays = (app: TestApp, days: number): CalendarDay => addDays(app.clock.today(), days)

/** A kind with so many clean items. */
export function makeShelf(app: TestApp, steward: Person, count: number, facts: Partial<KindRequest> = {}) {
  const kind = makeKind(app, steward, facts)
  return { kind, items: makeItems(app, steward, kind.id, count) }
}

interface Wanted {
  kindId: string
  from: CalendarDay
  to: CalendarDay
}

/** A request by a member, as they make it. */
export async function askFor(member: Person, wanted: Wanted & object): Promise<Loan> {
  const reply = await member.agent.post('/api/loans').send(wanted)
  if (reply.status !== 201) throw new Error(`no loan: ${reply.text}`)
  return reply.body as Loan
}

const act = async (who: Person, loan: { id: string }, action: string, body: object = {}): Promise<Loan> => {
  const reply = await who.agent.post(`/api/loans/${loan.id}/${action}`).send(body)
  if (reply.status !== 200) throw new Error(`could not ${action}: ${reply.text}`)
  return reply.body as Loan
}

interface Cast {
  member: Person
  steward: Person
}

/**
 * A loan in any state, reached the way people reach it. Leaves the clock where it was, but for `lapsed`, which takes the days
 * it takes.
 */
export async function makeLoan(
  app: TestApp,
  { member, steward }: Cast,
  wanted: Wanted & { itemId?: string },
  status: LoanStatus,
): Promise<Loan> {
  const { itemId, ...request } = wanted
  const requested = await askFor(member, request)
  if (status === 'requested') return requested
  if (status === 'declined')
    return act(steward, requested, 'decline', { reason: 'The shelf is being mended.' })
  if (status === 'cancelled') return act(member, requested, 'cancel')
  const approved = await act(steward, requested, 'approve')
  if (status === 'approved') return approved
  if (status === 'lapsed') {
    app.clock.set(`${addDays(wanted.from, 2)}T10:00:00.000Z`)
    comeBack(app, steward, 'steward')
    comeBack(app, member)
    runLoanRound(app.deps)
    return (await steward.agent.get(`/api/loans/${requested.id}`)).body as Loan
  }
  const out = await act(steward, approved, 'check-out', {
    itemId: itemId ?? (await suggestion(steward, approved)),
  })
  if (status === 'out') return out
  return act(steward, out, 'check-in', { condition: 'ok', hygiene: 'clean' })
}

async function suggestion(steward: Person, loan: Loan): Promise<string> {
  const detail = (await steward.agent.get(`/api/loans/${loan.id}`)).body as { suggestedItemId: string | null }
  if (detail.suggestedItemId === null) throw new Error('nothing to hand out')
  return detail.suggestedItemId
}
