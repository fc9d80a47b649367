import type { LoanAction, LoanActor, LoanStatus } from './vocabulary.ts'

interface Rule {
  from: readonly LoanStatus[]
  /** `undefined`: the loan stays as it is and only its dates change. */
  to: LoanStatus | undefined
  by: readonly LoanActor[]
}

/**
 * Every way a loan can change, as data. An extension that was asked for is a second question on a loan: there `approve`
 * and `decline` answer that question (see {@link EXTENSION_RULES}).
 */
export const LOAN_RULES: Record<LoanAction, Rule> = {
  approve: { from: ['requested'], to: 'approved', by: ['steward'] },
  decline: { from: ['requested'], to: 'declined', by: ['steward'] },
  cancel: {
    from: ['requested', 'approved'],
    to: 'cancelled',
    by: ['borrower', 'suspended-borrower', 'steward'],
  },
  'check-out': { from: ['approved'], to: 'out', by: ['steward'] },
  'check-in': { from: ['out'], to: 'returned', by: ['steward'] },
  extend: { from: ['approved', 'out'], to: undefined, by: ['borrower', 'steward'] },
  lapse: { from: ['requested', 'approved'], to: 'lapsed', by: ['house'] },
}

const EXTENSION_RULES: Partial<Record<LoanAction, Rule>> = {
  approve: { from: ['approved', 'out'], to: undefined, by: ['steward'] },
  decline: { from: ['approved', 'out'], to: undefined, by: ['steward'] },
}

export type Transition =
  | { ok: true; to: LoanStatus; answersExtension: boolean }
  | { ok: false; reason: 'not-found' | 'forbidden' | 'wrong-state' }

/**
 * What an action by someone does to a loan. A stranger is told there is no such loan, before anything else; then whether
 * that person may ever do it; then whether the loan is in a state for it.
 */
export function loanTransition(
  loan: { status: LoanStatus; extensionPending: boolean },
  action: LoanAction,
  actor: LoanActor,
): Transition {
  if (actor === 'stranger') return { ok: false, reason: 'not-found' }
  const rule = LOAN_RULES[action]
  if (!rule.by.includes(actor)) return { ok: false, reason: 'forbidden' }
  if (rule.from.includes(loan.status)) {
    return { ok: true, to: rule.to ?? loan.status, answersExtension: false }
  }
  const answering = loan.extensionPending ? EXTENSION_RULES[action] : undefined
  if (answering?.from.includes(loan.status)) return { ok: true, to: loan.status, answersExtension: true }
  return { ok: false, reason: 'wrong-state' }
}
