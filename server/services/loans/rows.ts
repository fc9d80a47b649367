import { desc, eq, inArray, type SQL } from 'drizzle-orm'
import type { Loan } from '#shared/loans/contract'
import { collectBy, daysLate } from '#shared/loans/lateness'
import type { CalendarDay } from '#shared/time/day'
import { items, kinds } from '../../db/schema/kit.ts'
import { loans } from '../../db/schema/loans.ts'
import { members } from '../../db/schema/people.ts'
import type { Db, Tx } from '../../db/open.ts'
import { notFound } from '../../errors.ts'

export type LoanRow = typeof loans.$inferSelect

export interface NamedLoan {
  loan: LoanRow
  kindName: string
  itemTag: string | null
  memberName: string
}

/** Loans with the names of what and whom they are about; one statement however many. */
export const selectLoans = (db: Db | Tx, where: SQL | undefined, limit: number): NamedLoan[] =>
  db
    .select({ loan: loans, kindName: kinds.name, itemTag: items.tag, memberName: members.name })
    .from(loans)
    .innerJoin(kinds, eq(kinds.id, loans.kindId))
    .innerJoin(members, eq(members.id, loans.memberId))
    .leftJoin(items, eq(items.id, loans.itemId))
    .where(where)
    .orderBy(desc(loans.fromOn), desc(loans.id))
    .limit(limit)
    .all()

/** @throws AppError `not-found` */
export function loanRow(db: Db | Tx, id: string): NamedLoan {
  const [row] = selectLoans(db, eq(loans.id, id), 1)
  if (!row) throw notFound('That loan')
  return row
}

/** Loans in the order of the ids. */
export function loansByIds(db: Db | Tx, ids: readonly string[], today: CalendarDay): Loan[] {
  const rows = new Map(
    selectLoans(db, inArray(loans.id, [...ids]), ids.length).map((row) => [row.loan.id, asLoan(row, today)]),
  )
  return ids.flatMap((id) => rows.get(id) ?? [])
}

/** A loan as the API tells it. */
export function asLoan({ loan, ...names }: NamedLoan, today: CalendarDay): Loan {
  const { fromOn: from, toOn: to } = loan
  const late = daysLate({ status: loan.status, to }, today)
  const { approvedOn } = loan
  return {
    ...loan,
    ...names,
    from,
    to,
    overdue: late > 0,
    daysLate: late,
    collectBy: loan.status === 'approved' && approvedOn ? collectBy({ from, approvedOn }) : null,
  }
}
