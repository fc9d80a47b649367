import type { Loan } from '#shared/loans/contract'
import type { Deps } from '../../deps.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { queueNotice } from '../notices.ts'
import { type Act, actOnLoan, changeLoan, factsOf } from './act.ts'
import { declineExtension, grantExtension } from './extend.ts'
import { addLoanEvents } from './history.ts'
import { offerNext } from './offers.ts'
import { refreshRisk } from './risk.ts'

/** Says yes to a request, or to the extension that was asked for. */
export const approveLoan = (deps: Deps, user: SignedIn, loanId: string): Loan =>
  actOnLoan(deps, user, loanId, 'approve', (act) => {
    const { tx, found, to, answersExtension } = act
    if (answersExtension) return grantExtension(deps, user, act)
    const at = deps.clock.now()
    changeLoan(tx, deps, found.loan, {
      status: to,
      decidedAt: at,
      decidedBy: user.id,
      approvedOn: deps.clock.today(),
    })
    addLoanEvents(tx, [{ loanId, event: 'approved', at, byId: user.id }])
    queueNotice(tx, deps, {
      kind: 'loan-approved',
      memberId: found.loan.memberId,
      dedupeKey: `loan-approved:${loanId}`,
      about: { type: 'loan', id: loanId, on: found.loan.fromOn },
      facts: factsOf(found),
    })
  })

/** Says no, and why. */
export const declineLoan = (deps: Deps, user: SignedIn, loanId: string, reason: string): Loan =>
  actOnLoan(deps, user, loanId, 'decline', (act) => {
    const { tx, found, answersExtension } = act
    if (answersExtension) return declineExtension(deps, user, act, reason)
    const at = deps.clock.now()
    letGo(deps, act, { decidedAt: at, decidedBy: user.id, declineReason: reason })
    addLoanEvents(tx, [{ loanId, event: 'declined', at, byId: user.id, detail: reason }])
    queueNotice(tx, deps, {
      kind: 'loan-declined',
      memberId: found.loan.memberId,
      dedupeKey: `loan-declined:${loanId}`,
      about: { type: 'loan', id: loanId, on: found.loan.fromOn },
      facts: { ...factsOf(found), reason },
    })
  })

/** Gives up a loan that is not out yet. A steward who cancels somebody else's has them told. */
export const cancelLoan = (deps: Deps, user: SignedIn, loanId: string, reason: string | undefined): Loan =>
  actOnLoan(deps, user, loanId, 'cancel', (act) => {
    const { tx, found } = act
    letGo(deps, act, {})
    const at = deps.clock.now()
    addLoanEvents(tx, [{ loanId, event: 'cancelled', at, byId: user.id, detail: reason ?? null }])
    if (found.loan.memberId === user.id) return
    queueNotice(tx, deps, {
      kind: 'loan-cancelled',
      memberId: found.loan.memberId,
      dedupeKey: `loan-cancelled:${loanId}`,
      about: { type: 'loan', id: loanId, on: found.loan.fromOn },
      facts: { ...factsOf(found), ...(reason !== undefined && { reason }) },
    })
  })

/** Ends a live loan and gives its days to whoever is next. */
function letGo(deps: Deps, { tx, found, to }: Act, change: Parameters<typeof changeLoan>[3]) {
  changeLoan(tx, deps, found.loan, {
    ...change,
    status: to,
    blocking: false,
    atRisk: false,
    atRiskReason: null,
    extensionTo: null,
    sequence: found.loan.sequence + 1,
  })
  refreshRisk(tx, deps, found.loan)
  offerNext(tx, deps, found.loan)
}
