import { eq } from 'drizzle-orm'
import type { BasketRequest, Loan, LoanRequest } from '#shared/loans/contract'
import { roleCovers } from '#shared/people/vocabulary'
import { addDays } from '#shared/time/day'
import { batches } from '../../db/schema/batches.ts'
import { loans } from '../../db/schema/loans.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { queueNotice } from '../notices.ts'
import { refusalOf } from './booking-refusal.ts'
import { answerLine, type Booking, type Facts, isWild, kindAt, lineAt, loadFacts } from './booking-rules.ts'
import { guarded } from './guard.ts'
import { addLoanEvents } from './history.ts'
import { takeWaitings } from './offers.ts'
import { countRefusals } from './refusals.ts'
import { rollLoans } from './round.ts'
import { loansByIds } from './rows.ts'

/** @throws AppError `not-available`, `over-limit`, `needs-induction` and what {@link bookLines} says */
export function bookLoan(deps: Deps, user: SignedIn, request: LoanRequest): Loan {
  const { batchId, note, memberId, overrideReason, ...line } = request
  const booking = { batchId, note, memberId, overrideReason }
  const [loan] = bookLines(deps, user, {
    ...booking,
    lines: [line],
    pathOf: (_, field) => field,
    basketId: null,
  })
  if (!loan) throw new Error('a booking of one line gave no loan')
  return loan
}

/** All lines or none. */
export function bookBasket(deps: Deps, user: SignedIn, request: BasketRequest) {
  const basketId = newId()
  const pathOf = (index: number, field: string) => `lines.${index}.${field}`
  return { basketId, loans: bookLines(deps, user, { ...request, pathOf, basketId }) }
}

/**
 * Books lines for a member, all or nothing, in as many statements for thirty as for one. What is refused is counted, and the
 * count stays although nothing else does.
 */
function bookLines(deps: Deps, user: SignedIn, booking: Booking): Loan[] {
  const today = deps.clock.today()
  const borrowerId = borrowerOf(deps, user, booking)
  const outcome = write(deps.db, (tx) => {
    rollLoans(tx, deps)
    const facts = loadFacts(deps, borrowerId, booking)
    const mayExceed = booking.overrideReason !== undefined
    const answers = booking.lines.map((line) => answerLine(facts, line, today, mayExceed))
    const refused = answers.flatMap((answer, index) =>
      answer.ok ? [] : [{ index, refusal: answer.refusal }],
    )
    if (refused.length > 0) {
      const counted = refused.map(({ index, refusal }) => ({
        ...lineAt(booking, index),
        reason: refusal.reason,
      }))
      countRefusals(deps, borrowerId, counted)
      return { refused }
    }
    return { ids: insertLines(tx, deps, user, booking, facts, borrowerId) }
  })
  if (outcome.refused) throw refusalOf(deps, borrowerId, booking, outcome.refused)
  return loansByIds(deps.db, outcome.ids, today)
}

/** Whom the booking is for; only a steward may book for somebody else, or past a limit. */
function borrowerOf(deps: Deps, user: SignedIn, booking: Booking): string {
  const isSteward = roleCovers(user.role, 'steward')
  const borrowerId = booking.memberId ?? user.id
  if (!isSteward && booking.overrideReason !== undefined)
    throw new AppError('forbidden', 'Only a steward can go past a limit.')
  if (!isSteward && borrowerId !== user.id)
    throw new AppError('forbidden', 'Only a steward can book for somebody else.')
  if (borrowerId !== user.id) {
    const member = deps.db
      .select({ status: members.status })
      .from(members)
      .where(eq(members.id, borrowerId))
      .get()
    if (!member || member.status === 'left') throw invalidField('memberId', 'There is no such member.')
    if (member.status === 'suspended')
      throw new AppError('suspended', 'Their membership is paused, so nothing can be booked for them.')
  }
  if (booking.batchId !== undefined) {
    const batch = deps.db
      .select({ memberId: batches.memberId })
      .from(batches)
      .where(eq(batches.id, booking.batchId))
      .get()
    if (batch?.memberId !== borrowerId) throw invalidField('batchId', 'That is not a batch of yours.')
  }
  return borrowerId
}

function insertLines(
  tx: Tx,
  deps: Deps,
  user: SignedIn,
  booking: Booking,
  facts: Facts,
  memberId: string,
): string[] {
  const now = deps.clock.now()
  const today = deps.clock.today()
  const onBehalf = memberId !== user.id
  const rows = booking.lines.map((line) => {
    const kind = kindAt(facts, line)
    // A steward who books for someone has decided by booking; some kinds need no decision within their limits.
    const approved = onBehalf || (kind.selfApproving === 1 && booking.overrideReason === undefined)
    return {
      id: newId(),
      kindId: line.kindId,
      memberId,
      batchId: booking.batchId ?? null,
      stepId: line.stepId ?? null,
      basketId: booking.basketId,
      wild: isWild(kind, line),
      fromOn: line.from,
      toOn: line.to,
      turnaroundDays: kind.turnaroundDays,
      blocksUntilOn: addDays(line.to, kind.turnaroundDays),
      blocking: true,
      status: approved ? ('approved' as const) : ('requested' as const),
      note: booking.note || null,
      overrideReason: booking.overrideReason ?? null,
      requestedAt: now,
      requestedBy: user.id,
      ...(approved && { decidedAt: now, decidedBy: onBehalf ? user.id : null, approvedOn: today }),
      createdAt: now,
      updatedAt: now,
    }
  })
  guarded(() => tx.insert(loans).values(rows).run())
  addLoanEvents(
    tx,
    rows.flatMap(({ id, status }) => {
      const requested = {
        loanId: id,
        event: 'requested' as const,
        at: now,
        byId: user.id,
        detail: booking.overrideReason ?? null,
      }
      const approved = {
        loanId: id,
        event: 'approved' as const,
        at: now,
        byId: onBehalf ? user.id : null,
        detail: null,
      }
      return status === 'approved' ? [requested, approved] : [requested]
    }),
  )
  for (const row of rows) {
    const { id, kindId, wild, fromOn: from, toOn: to } = row
    const kind = facts.kinds.get(kindId)
    if (kind?.waits === 1) takeWaitings(tx, deps, { id, kindId, wild, from, to, memberId })
    if (onBehalf)
      queueNotice(tx, deps, {
        kind: 'loan-approved',
        memberId,
        dedupeKey: `loan-approved:${id}`,
        about: { type: 'loan', id, on: from },
        facts: { loanId: id, kindName: kind?.name ?? '', from, to },
      })
  }
  return rows.map(({ id }) => id)
}
