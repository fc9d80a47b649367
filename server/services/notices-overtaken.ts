import { eq } from 'drizzle-orm'
import type { LoanStatus } from '#shared/loans/vocabulary'
import { isLoanReminder } from '#shared/notices/vocabulary'
import { loans, waitings } from '../db/schema/loans.ts'
import type { letters } from '../db/schema/notices.ts'
import type { Tx } from '../db/open.ts'
import { stepsDone } from './notices-batches.ts'
import { pitchAnswered } from './yeast/notices.ts'

type Letter = typeof letters.$inferSelect

/** Why a letter that waited is no longer true, in words for the mail record; undefined while it still is. */
export function overtaken(tx: Tx, letter: Letter): string | undefined {
  const { aboutId } = letter
  if (!aboutId) return undefined
  if (isLoanReminder(letter.kind)) return overtakenReminder(tx, letter, aboutId)
  if (letter.kind === 'loan-at-risk' || letter.kind === 'loan-safe-again') {
    const loan = tx
      .select({ status: loans.status, atRisk: loans.atRisk })
      .from(loans)
      .where(eq(loans.id, aboutId))
      .get()
    const live = loan?.status === 'requested' || loan?.status === 'approved'
    return live && loan.atRisk === (letter.kind === 'loan-at-risk')
      ? undefined
      : 'It changed again meanwhile.'
  }
  if (letter.kind === 'waiting-offer' && letter.aboutType === 'waiting') {
    const row = tx.select({ state: waitings.state }).from(waitings).where(eq(waitings.id, aboutId)).get()
    return row?.state === 'offered' ? undefined : 'The offer is over.'
  }
  if (letter.kind === 'batch-step-due' && letter.aboutOn)
    return stepsDone(tx, aboutId, letter.aboutOn) ? 'It was done or moved meanwhile.' : undefined
  if (letter.kind === 'batch-outlasts-loan') return otherDays(tx, letter, aboutId, 'out')
  if (letter.kind === 'packet-outcome-wanted')
    return pitchAnswered(tx, aboutId) ? 'It was answered meanwhile.' : undefined
  return undefined
}

const overtakenReminder = (tx: Tx, letter: Letter, loanId: string) =>
  otherDays(tx, letter, loanId, letter.kind === 'loan-collect-tomorrow' ? 'approved' : 'out')

function otherDays(tx: Tx, letter: Letter, loanId: string, status: LoanStatus): string | undefined {
  const loan = tx
    .select({ status: loans.status, to: loans.toOn })
    .from(loans)
    .where(eq(loans.id, loanId))
    .get()
  if (loan?.status !== status) return 'The loan has moved on.'
  return letter.aboutOn !== null && letter.aboutOn !== loan.to ? 'The loan has other days by now.' : undefined
}
