import { describe, expect, it } from 'vitest'
import { loanTransition } from '#shared/loans/lifecycle'
import { LOAN_ACTIONS, LOAN_ACTORS, LOAN_STATUSES } from '#shared/loans/vocabulary'

/**
 * The rules of the house, written out by hand: state, action, actor, and what becomes of the loan. Whatever is not here is
 * refused. `*` marks what happens only while an extension waits for an answer.
 */
const ALLOWED = `
  requested approve    steward            approved
  requested decline    steward            declined
  requested cancel     borrower           cancelled
  requested cancel     suspended-borrower cancelled
  requested cancel     steward            cancelled
  requested lapse      house              lapsed
  approved  cancel     borrower           cancelled
  approved  cancel     suspended-borrower cancelled
  approved  cancel     steward            cancelled
  approved  check-out  steward            out
  approved  extend     borrower           approved
  approved  extend     steward            approved
  approved  lapse      house              lapsed
  approved  approve*   steward            approved
  approved  decline*   steward            approved
  out       check-in   steward            returned
  out       extend     borrower           out
  out       extend     steward            out
  out       approve*   steward            out
  out       decline*   steward            out
`
const allowed = new Map(
  ALLOWED.trim()
    .split('\n')
    .map((row) => row.trim().split(/\s+/))
    .map(([status, action, actor, to]) => [`${status} ${action} ${actor}`, to]),
)

const triples = LOAN_STATUSES.flatMap((status) =>
  LOAN_ACTIONS.flatMap((action) => LOAN_ACTORS.map((actor) => ({ status, action, actor }))),
)

/** Who may ever do a thing, in any state. */
const may = (action: string, actor: string) =>
  [...allowed.keys()].some((key) => key.replace('*', '').endsWith(` ${action} ${actor}`))

describe('the life of a loan', () => {
  it('names every state, action and actor', () => {
    expect(triples).toHaveLength(7 * 7 * 5)
  })

  describe.each([false, true])('with an extension pending: %s', (extensionPending) => {
    it.each(triples)('$status: $action by $actor', ({ status, action, actor }) => {
      const to =
        allowed.get(`${status} ${action} ${actor}`) ??
        (extensionPending ? allowed.get(`${status} ${action}* ${actor}`) : undefined)
      const answer = loanTransition({ status, extensionPending }, action, actor)
      if (to !== undefined) expect(answer).toMatchObject({ ok: true, to })
      else if (actor === 'stranger') expect(answer).toEqual({ ok: false, reason: 'not-found' })
      else if (!may(action, actor)) expect(answer).toEqual({ ok: false, reason: 'forbidden' })
      else expect(answer).toEqual({ ok: false, reason: 'wrong-state' })
    })
  })

  it('tells an answer to an extension from an answer to a request', () => {
    const pending = { status: 'out', extensionPending: true } as const
    expect(loanTransition(pending, 'decline', 'steward')).toEqual({
      ok: true,
      to: 'out',
      answersExtension: true,
    })
    const request = { status: 'requested', extensionPending: false } as const
    expect(loanTransition(request, 'decline', 'steward')).toMatchObject({ answersExtension: false })
  })
})
