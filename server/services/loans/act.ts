import { eq } from 'drizzle-orm'
import type { Loan } from '#shared/loans/contract'
import { loanTransition } from '#shared/loans/lifecycle'
import type { LoanAction, LoanActor, LoanStatus } from '#shared/loans/vocabulary'
import { roleCovers } from '#shared/people/vocabulary'
import { loans } from '../../db/schema/loans.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, notFound } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { guarded } from './guard.ts'
import { rollLoans } from './round.ts'
import { asLoan, loanRow, type LoanRow, type NamedLoan } from './rows.ts'

export interface Act {
  tx: Tx
  found: NamedLoan
  /** The status the loan goes to. */
  to: LoanStatus
  /** The act answers an extension that was asked for, not the request. */
  answersExtension: boolean
}

/** Who this person is to a loan. */
export function actorOf(user: SignedIn, loan: { memberId: string }): LoanActor {
  if (user.status === 'active' && roleCovers(user.role, 'steward')) return 'steward'
  if (loan.memberId !== user.id) return 'stranger'
  return user.status === 'suspended' ? 'suspended-borrower' : 'borrower'
}

/**
 * One act on one loan, in one transaction: brings loans up to today, asks the state table, then does what is given.
 * @throws AppError `not-found`, `forbidden`, `wrong-state`, and what `act` throws
 */
export function actOnLoan(
  deps: Deps,
  user: SignedIn,
  loanId: string,
  action: LoanAction,
  act: (doing: Act) => void,
): Loan {
  return write(deps.db, (tx) => {
    rollLoans(tx, deps)
    const found = loanRow(tx, loanId)
    const { loan } = found
    const answer = loanTransition(
      { status: loan.status, extensionPending: loan.extensionTo !== null },
      action,
      actorOf(user, loan),
    )
    if (!answer.ok) throw refusal(answer.reason, loan.status, action)
    act({ tx, found, to: answer.to, answersExtension: answer.answersExtension })
    return asLoan(loanRow(tx, loanId), deps.clock.today())
  })
}

function refusal(reason: 'not-found' | 'forbidden' | 'wrong-state', status: LoanStatus, action: LoanAction) {
  if (reason === 'not-found') return notFound('That loan')
  if (reason === 'forbidden') return new AppError('forbidden', 'That is for a steward to do.')
  return new AppError(
    'wrong-state',
    `This loan is ${status}, so ${SAYS[action]}. Load it again to see what happened.`,
  )
}

const SAYS: Record<LoanAction, string> = {
  approve: 'there is nothing to approve',
  decline: 'there is nothing to decline',
  cancel: 'it cannot be cancelled',
  'check-out': 'it cannot be handed out',
  'check-in': 'it cannot be taken back',
  extend: 'it cannot be kept longer',
  lapse: 'it cannot lapse',
}

/** Writes a change of a loan, with the version and the moment of it. */
export function changeLoan(tx: Tx, deps: Deps, loan: LoanRow, change: Partial<typeof loans.$inferInsert>) {
  guarded(() =>
    tx
      .update(loans)
      .set({ ...change, updatedAt: deps.clock.now(), version: loan.version + 1 })
      .where(eq(loans.id, loan.id))
      .run(),
  )
}

/** What a letter about a loan has to say. */
export const factsOf = ({ loan, kindName }: NamedLoan) => ({
  loanId: loan.id,
  kindName,
  from: loan.fromOn,
  to: loan.toOn,
})
