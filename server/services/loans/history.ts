import { asc, eq } from 'drizzle-orm'
import type { LoanEvent } from '#shared/loans/vocabulary'
import type { Instant } from '#shared/time/instant'
import { loanEvents } from '../../db/schema/loans.ts'
import { members } from '../../db/schema/people.ts'
import type { Db, Tx } from '../../db/open.ts'

interface NewLoanEvent {
  loanId: string
  event: LoanEvent
  at: Instant
  /** Null: the house itself. */
  byId: string | null
  detail?: string | null
}

/** Adds lines to the history of loans, in the transaction of what they report. */
export function addLoanEvents(tx: Tx, events: NewLoanEvent[]) {
  if (events.length > 0) tx.insert(loanEvents).values(events).run()
}

export const loanHistory = (db: Db | Tx, loanId: string) =>
  db
    .select({
      event: loanEvents.event,
      at: loanEvents.at,
      byName: members.name,
      detail: loanEvents.detail,
    })
    .from(loanEvents)
    .leftJoin(members, eq(members.id, loanEvents.byId))
    .where(eq(loanEvents.loanId, loanId))
    .orderBy(asc(loanEvents.id))
    .all()
