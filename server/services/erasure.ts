import { and, eq, inArray, isNotNull, lte } from 'drizzle-orm'
import { addDays, type CalendarDay } from '#shared/time/day'
import { joinRequests, tokens } from '../db/schema/accounts.ts'
import { loanEvents, loans, waitings } from '../db/schema/loans.ts'
import { letters, noticePreferences } from '../db/schema/notices.ts'
import { idempotencyKeys, members, sessions, throttles } from '../db/schema/people.ts'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'
import type { SignedIn } from '../http/sessions.ts'
import { newId } from '../ids.ts'
import { accountLetter } from './account-letters.ts'

/** Days in which leaving can be undone. */
export const UNDO_DAYS = 14

/** Stops the account at once and sets the day it is erased. Kit must be back first. */
export function askToLeave(deps: Deps, user: SignedIn) {
  return write(deps.db, (tx) => {
    const open = tx
      .select({ id: loans.id })
      .from(loans)
      .where(and(eq(loans.memberId, user.id), inArray(loans.status, ['requested', 'approved', 'out'])))
      .all()
    if (open.length > 0)
      throw new AppError(
        'wrong-state',
        'You still have bookings or kit out. Bring back or cancel them first, then leave.',
        { body: { loans: open.map(({ id }) => id) } },
      )
    const erasedOn = addDays(deps.clock.today(), UNDO_DAYS)
    tx.update(members)
      .set({ status: 'suspended', eraseOn: erasedOn, updatedAt: deps.clock.now() })
      .where(eq(members.id, user.id))
      .run()
    tx.delete(sessions).where(eq(sessions.memberId, user.id)).run()
    accountLetter(tx, deps, {
      kind: 'account-leaving',
      memberId: user.id,
      name: user.name,
      facts: { day: erasedOn },
      dedupeKey: `leaving:${user.id}:${erasedOn}`,
    })
    return { erasedOn }
  })
}

/** Erases every account whose day has come; run by the daily sweep. Gives back how many. */
export function eraseDue(deps: Deps, today: CalendarDay = deps.clock.today()): number {
  const due = deps.db
    .select({ id: members.id, email: members.email })
    .from(members)
    .where(and(isNotNull(members.eraseOn), lte(members.eraseOn, today)))
    .all()
  for (const { id, email } of due) write(deps.db, (tx) => erase(tx, deps, id, email))
  // Deleted bytes are overwritten (secure_delete); the log that still has them is emptied.
  if (due.length > 0) deps.db.$client.pragma('wal_checkpoint(TRUNCATE)')
  return due.length
}

/**
 * Takes the person out of every row. Loans keep kind, item, dates and condition, so that every count stays; the id they
 * carry now belongs to nobody.
 */
function erase(tx: Tx, deps: Deps, id: string, email: string) {
  tx.delete(sessions).where(eq(sessions.memberId, id)).run()
  tx.delete(tokens).where(eq(tokens.memberId, id)).run()
  tx.delete(tokens).where(eq(tokens.email, email)).run()
  tx.delete(joinRequests).where(eq(joinRequests.email, email)).run()
  tx.delete(letters).where(eq(letters.memberId, id)).run()
  tx.delete(letters).where(eq(letters.toAddress, email)).run()
  tx.delete(noticePreferences).where(eq(noticePreferences.memberId, id)).run()
  tx.delete(throttles)
    .where(eq(throttles.key, `sign-in:${email}`))
    .run()
  // First answers kept for repeats may quote anybody; they are short-lived anyway.
  tx.delete(idempotencyKeys).run()
  tx.delete(waitings).where(eq(waitings.memberId, id)).run()
  const own = tx.select({ id: loans.id }).from(loans).where(eq(loans.memberId, id))
  tx.update(loanEvents).set({ detail: null }).where(inArray(loanEvents.loanId, own)).run()
  tx.update(loans)
    .set({ note: null, returnNote: null, declineReason: null, overrideReason: null })
    .where(eq(loans.memberId, id))
    .run()
  tx.update(members)
    .set({
      name: 'Former member',
      email: `${newId()}@left.invalid`.toLowerCase(),
      phone: null,
      passwordHash: null,
      role: 'member',
      status: 'left',
      eraseOn: null,
      updatedAt: deps.clock.now(),
    })
    .where(eq(members.id, id))
    .run()
}
