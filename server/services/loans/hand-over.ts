import { and, eq, isNull, sql } from 'drizzle-orm'
import { blocksUntil, fits } from '#shared/loans/availability'
import { type Loan, LOAN_DAYS_MAX } from '#shared/loans/contract'
import { checkOutObstacle, type Obstacle } from '#shared/loans/suggestion'
import type { ReturnCondition } from '#shared/loans/vocabulary'
import { addDays, earlierDay, laterDay } from '#shared/time/day'
import { lengthDays } from '#shared/time/day-range'
import { faults, items, kinds } from '../../db/schema/kit.ts'
import { loans } from '../../db/schema/loans.ts'
import type { Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { reportFault } from '../kit/faults.ts'
import { recordHygiene } from '../kit/hygiene.ts'
import { addItemEvent } from '../kit/item-events.ts'
import { type Act, actOnLoan, changeLoan } from './act.ts'
import { addLoanEvents } from './history.ts'
import { offerNext } from './offers.ts'
import { kindOfPool, loansOfPool } from './pool.ts'
import { refreshRisk, refreshRiskOfKind } from './risk.ts'
import type { LoanRow } from './rows.ts'

interface HandedOut {
  itemId: string
  overrideReason?: string | undefined
}

/**
 * Hands out an item. It must be clean (or sanitised, where the kind says so) and without a blocking fault; a steward may
 * override either with a reason, which is kept. Handed out before its first day, or after its last, the loan starts or ends
 * today, if that leaves nobody without.
 */
export const checkOutLoan = (
  deps: Deps,
  user: SignedIn,
  loanId: string,
  { itemId, overrideReason }: HandedOut,
): Loan =>
  actOnLoan(deps, user, loanId, 'check-out', (act) => {
    const { tx, found, to } = act
    const { loan } = found
    const item = itemToHandOut(tx, loan, itemId)
    const obstacle = checkOutObstacle(item, item.needsSanitised, deps.clock.now())
    if (obstacle && !mayOverride(obstacle, item, overrideReason)) throw refusalOf(obstacle, item)
    const at = deps.clock.now()
    const today = deps.clock.today()
    const range = { fromOn: earlierDay(loan.fromOn, today), toOn: laterDay(loan.toOn, today) }
    if (lengthDays({ from: range.fromOn, to: range.toOn }) > LOAN_DAYS_MAX)
      throw new AppError(
        'over-limit',
        `No loan is longer than ${LOAN_DAYS_MAX} days. Hand it out nearer its day.`,
      )
    refuseIfTaken(deps, act, range)
    const overridden = obstacle === undefined ? undefined : overrideReason
    changeLoan(tx, deps, loan, {
      ...range,
      status: to,
      itemId: item.id,
      outAt: at,
      outBy: user.id,
      blocksUntilOn: blocksUntil({ status: 'out', to: range.toOn }, loan.turnaroundDays, today),
      atRisk: false,
      atRiskReason: null,
      sequence: loan.sequence + 1,
      ...(overridden !== undefined && { overrideReason: overridden }),
    })
    addLoanEvents(tx, [
      {
        loanId,
        event: 'checked-out',
        at,
        byId: user.id,
        detail: overridden ? `${item.tag}. ${overridden}` : item.tag,
      },
    ])
    addItemEvent(tx, {
      itemId: item.id,
      event: 'checked-out',
      actorId: user.id,
      borrowerId: loan.memberId,
      aboutId: loanId,
      happenedAt: at,
      ...(overridden !== undefined && { detail: { overrideReason: overridden } }),
    })
  })

function itemToHandOut(tx: Tx, loan: LoanRow, itemId: string) {
  const blocking = and(eq(faults.itemId, items.id), eq(faults.blocking, true), isNull(faults.resolvedAt))
  const row = tx
    .select({
      item: items,
      needsSanitised: kinds.needsSanitised,
      faults: tx.$count(faults, blocking),
      outOn: loans.id,
    })
    .from(items)
    .innerJoin(kinds, eq(kinds.id, items.kindId))
    .leftJoin(loans, and(eq(loans.itemId, items.id), eq(loans.status, 'out')))
    .where(eq(items.id, itemId))
    .get()
  if (!row) throw invalidField('itemId', 'There is no such item.')
  const { item } = row
  if (item.kindId !== loan.kindId) throw invalidField('itemId', `${item.tag} is another kind of kit.`)
  if (item.wild !== loan.wild)
    throw invalidField(
      'itemId',
      item.wild ? `${item.tag} is kept for wild cultures.` : `${item.tag} is not kept for wild cultures.`,
    )
  return {
    ...item,
    sanitisedUntil: item.sanitisedUntil ?? undefined,
    usable: item.status === 'in-service' && row.faults === 0,
    out: row.outOn !== null,
    needsSanitised: row.needsSanitised,
  }
}

function mayOverride(obstacle: Obstacle, item: { status: string }, reason: string | undefined): boolean {
  if (reason === undefined || obstacle === 'not-available') return false
  return item.status === 'in-service' || item.status === 'repair'
}

function refusalOf(
  obstacle: Obstacle,
  item: { tag: string; status: string; needsSanitised: boolean },
): AppError {
  switch (obstacle) {
    case 'not-available':
      return new AppError('not-available', `${item.tag} is out on another loan.`)
    case 'blocked-by-fault':
      return new AppError(
        'blocked-by-fault',
        item.status === 'in-service'
          ? `${item.tag} has a fault that takes it out of service.`
          : `${item.tag} is not in service: ${item.status}.`,
      )
    case 'not-clean':
      return new AppError(
        'not-clean',
        item.needsSanitised
          ? `${item.tag} has to be sanitised first.`
          : `${item.tag} has to be cleaned first.`,
      )
  }
}

/** Days before the first or after the last that the loan would take must have an item spare. */
function refuseIfTaken(deps: Deps, { found }: Act, range: Pick<LoanRow, 'fromOn' | 'toOn'>) {
  const { loan } = found
  const added = [
    { from: range.fromOn, blocksUntil: addDays(loan.fromOn, -1) },
    { from: addDays(loan.blocksUntilOn, 1), blocksUntil: addDays(range.toOn, loan.turnaroundDays) },
  ].filter((hold) => hold.from <= hold.blocksUntil)
  if (added.length === 0) return
  const { serviceable } = kindOfPool(deps, loan)
  const today = deps.clock.today()
  const others = loansOfPool(deps, loan)
    .filter(({ id }) => id !== loan.id)
    .map((other) => ({ from: other.from, blocksUntil: blocksUntil(other, other.turnaroundDays, today) }))
  if (!added.every((hold) => fits(serviceable, others, hold)))
    throw new AppError(
      'not-available',
      'It is promised to someone else before then. Keep to the booked days.',
    )
}

interface HandedIn {
  condition: ReturnCondition
  hygiene: 'clean' | 'dirty'
  wild?: boolean | undefined
  note?: string | undefined
}

/**
 * Takes an item back in the state it is in. What is damaged goes to repair with a fault, what is lost is off the shelf; what
 * met wild cultures is kept apart from now on. The days it was still booked for are free at once; while it is dirty, its
 * turnaround is not.
 */
export const checkInLoan = (deps: Deps, user: SignedIn, loanId: string, handed: HandedIn): Loan =>
  actOnLoan(deps, user, loanId, 'check-in', ({ tx, found, to }) => {
    const { loan } = found
    const { itemId } = loan
    if (itemId === null) throw new Error(`loan ${loanId} is out without an item`)
    const at = deps.clock.now()
    const today = deps.clock.today()
    const becomesWild = handed.wild === true && !loan.wild
    const dries = handed.condition === 'ok' && handed.hygiene === 'dirty' && !becomesWild
    changeLoan(tx, deps, loan, {
      status: to,
      returnedAt: at,
      returnedOn: today,
      returnedBy: user.id,
      returnCondition: handed.condition,
      returnNote: handed.note || null,
      blocksUntilOn: addDays(today, loan.turnaroundDays),
      blocking: dries,
      extensionTo: null,
      extensionAskedAt: null,
      sequence: loan.sequence + 1,
    })
    addLoanEvents(tx, [
      {
        loanId,
        event: 'checked-in',
        at,
        byId: user.id,
        detail: handed.note ? `${handed.condition}. ${handed.note}` : handed.condition,
      },
    ])
    addItemEvent(tx, {
      itemId,
      event: 'checked-in',
      actorId: user.id,
      borrowerId: loan.memberId,
      aboutId: loanId,
      happenedAt: at,
      detail: { condition: handed.condition, hygiene: handed.hygiene },
    })
    putAway(deps, tx, user, itemId, handed, becomesWild)
    if (becomesWild) refreshRiskOfKind(tx, deps, loan.kindId)
    else refreshRisk(tx, deps, loan)
    offerNext(tx, deps, loan)
  })

/** What coming back does to the item. */
function putAway(deps: Deps, tx: Tx, user: SignedIn, itemId: string, handed: HandedIn, becomesWild: boolean) {
  const at = deps.clock.now()
  if (handed.condition !== 'lost')
    recordHygiene(deps, user, itemId, { state: handed.hygiene, note: 'On return.' }, tx)
  if (handed.condition === 'damaged') {
    const summary = handed.note?.slice(0, 500) || 'Came back damaged.'
    reportFault(deps, user, itemId, { summary, blocking: true, severity: 'major' }, tx)
  }
  const status = STATUS_AFTER[handed.condition]
  tx.update(items)
    .set({
      ...(status && { status }),
      ...(becomesWild && { wild: true }),
      updatedAt: at,
      version: sql`${items.version} + 1`,
    })
    .where(eq(items.id, itemId))
    .run()
  const event = { itemId, actorId: user.id, happenedAt: at }
  if (becomesWild) addItemEvent(tx, { ...event, event: 'became-wild' })
  if (status)
    addItemEvent(tx, { ...event, event: 'status-changed', detail: { from: 'in-service', to: status } })
}

const STATUS_AFTER = { ok: undefined, damaged: 'repair', lost: 'lost' } as const
