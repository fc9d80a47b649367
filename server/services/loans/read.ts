import { and, eq, gte, inArray, lt, lte, sql } from 'drizzle-orm'
import { type Loan, type LoanDetail, LOAN_DAYS_MAX, type LoanQuery } from '#shared/loans/contract'
import type { Page } from '#shared/http/paging'
import { roleCovers } from '#shared/people/vocabulary'
import { addDays } from '#shared/time/day'
import { loans } from '../../db/schema/loans.ts'
import { write } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { actorOf } from './act.ts'
import { loanHistory } from './history.ts'
import { asLoan, loanRow, selectLoans } from './rows.ts'
import { suggestedItem } from './suggested.ts'

/** Loans, latest collection day first: a member's own; for stewards anyone's. */
export function listLoans(deps: Deps, user: SignedIn, query: LoanQuery): Page<Loan> {
  const memberId = whose(user, query.member)
  const after = query.cursor ? (decodeCursor(query.cursor, 2) as [string, string]) : undefined
  const rows = selectLoans(
    deps.db,
    and(
      memberId === undefined ? undefined : eq(loans.memberId, memberId),
      query.status && inArray(loans.status, query.status),
      query.kindId === undefined ? undefined : eq(loans.kindId, query.kindId),
      query.batchId === undefined ? undefined : eq(loans.batchId, query.batchId),
      query.from && and(gte(loans.toOn, query.from), gte(loans.fromOn, addDays(query.from, -LOAN_DAYS_MAX))),
      query.to && lte(loans.fromOn, query.to),
      after && lt(sql`(${loans.fromOn}, ${loans.id})`, sql`(${after[0]}, ${after[1]})`),
    ),
    query.limit + 1,
  )
  const page = pageFrom(rows, query.limit, ({ loan }) => [loan.fromOn, loan.id])
  const today = deps.clock.today()
  return { ...page, items: page.items.map((row) => asLoan(row, today)) }
}

/** @throws AppError `forbidden` for a member who asks for somebody else's */
function whose(user: SignedIn, member: string | undefined): string | undefined {
  const isSteward = user.status === 'active' && roleCovers(user.role, 'steward')
  if (member === 'me' || member === user.id) return user.id
  if (isSteward) return member
  if (member === undefined) return user.id
  throw new AppError('forbidden', 'Only a steward can see the loans of others.')
}

/** @throws AppError `not-found` for a loan that is not there or not theirs */
export function readLoan(deps: Deps, user: SignedIn, loanId: string): LoanDetail {
  const found = loanRow(deps.db, loanId)
  if (actorOf(user, found.loan) === 'stranger') throw notFound('That loan')
  return {
    ...asLoan(found, deps.clock.today()),
    ...suggestedItem(deps, found.loan),
    history: loanHistory(deps.db, loanId),
  }
}

/** @throws AppError `not-found`, `stale` */
export function changeNote(
  deps: Deps,
  user: SignedIn,
  loanId: string,
  version: number,
  note: string | null,
): Loan {
  return write(deps.db, (tx) => {
    const { loan } = loanRow(tx, loanId)
    if (actorOf(user, loan) === 'stranger') throw notFound('That loan')
    const { changes } = tx
      .update(loans)
      .set({ note: note || null, updatedAt: deps.clock.now(), version: version + 1 })
      .where(and(eq(loans.id, loanId), eq(loans.version, version)))
      .run()
    if (changes === 0)
      throw new AppError('stale', 'This loan was changed elsewhere. Load it again, then make your change.')
    return asLoan(loanRow(tx, loanId), deps.clock.today())
  })
}
