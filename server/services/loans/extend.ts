import { type Loan, LOAN_DAYS_MAX } from '#shared/loans/contract'
import { blocksUntil } from '#shared/loans/availability'
import { answerExtension, type ExtensionAnswer } from '#shared/loans/extension'
import { breachSentence } from '#shared/loans/limits'
import type { CalendarDay } from '#shared/time/day'
import { lengthDays } from '#shared/time/day-range'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { queueNotice } from '../notices.ts'
import { type Act, actOnLoan, actorOf, changeLoan, factsOf } from './act.ts'
import { addLoanEvents } from './history.ts'
import { kindOfPool, loansOfPool } from './pool.ts'
import { refreshRisk } from './risk.ts'

interface Asked {
  to: CalendarDay
  overrideReason?: string | undefined
}

/**
 * Keeps a loan until a later day: at once when nobody is delayed and the limits allow, otherwise it is asked at the desk. A
 * steward may go past the longest loan with a reason, but not past what others were promised.
 */
export const extendLoan = (deps: Deps, user: SignedIn, loanId: string, { to, overrideReason }: Asked): Loan =>
  actOnLoan(deps, user, loanId, 'extend', (act) => {
    const { tx, found } = act
    const { loan } = found
    if (to <= loan.toOn) throw invalidField('to', 'Choose a day after the present return-by day.')
    if (to < deps.clock.today()) throw invalidField('to', 'That day has passed. Choose a later one.')
    if (lengthDays({ from: loan.fromOn, to }) > LOAN_DAYS_MAX)
      throw invalidField('to', `No loan is longer than ${LOAN_DAYS_MAX} days.`)
    const isSteward = actorOf(user, loan) === 'steward'
    if (!isSteward && overrideReason !== undefined)
      throw new AppError('forbidden', 'Only a steward can go past a limit.')
    const { answer, names } = askShelf(deps, act, to)
    if (answer.granted) return keepUntil(deps, user, act, to, overrideReason)
    if (!isSteward) {
      changeLoan(tx, deps, loan, { extensionTo: to, extensionAskedAt: deps.clock.now() })
      addLoanEvents(tx, [
        { loanId, event: 'extension-requested', at: deps.clock.now(), byId: user.id, detail: to },
      ])
      return
    }
    if (answer.full) throw inTheWay(answer, names)
    const [breach] = answer.breaches
    if (overrideReason === undefined && breach)
      throw new AppError('over-limit', `${breachSentence(breach)} Or give a reason for the exception.`, {
        body: { limits: answer.breaches },
      })
    keepUntil(deps, user, act, to, overrideReason)
  })

/** The desk's yes to an extension that was asked for. What others were promised still stands in its way. */
export function grantExtension(deps: Deps, user: SignedIn, act: Act) {
  const to = act.found.loan.extensionTo
  if (to === null) throw new Error('no extension was asked for')
  const { answer, names } = askShelf(deps, act, to)
  if (!answer.granted && answer.full) throw inTheWay(answer, names)
  keepUntil(deps, user, act, to, undefined)
}

export function declineExtension(deps: Deps, user: SignedIn, { tx, found }: Act, reason: string) {
  const { loan } = found
  const at = deps.clock.now()
  changeLoan(tx, deps, loan, { extensionTo: null, extensionAskedAt: null })
  addLoanEvents(tx, [{ loanId: loan.id, event: 'extension-declined', at, byId: user.id, detail: reason }])
  queueNotice(tx, deps, {
    kind: 'loan-extension-declined',
    memberId: loan.memberId,
    dedupeKey: `loan-extension-declined:${loan.id}:${at}`,
    about: { type: 'loan', id: loan.id, on: loan.toOn },
    facts: { ...factsOf(found), reason },
  })
}

function askShelf(deps: Deps, { found }: Act, to: CalendarDay) {
  const { loan } = found
  const kind = kindOfPool(deps, loan)
  const all = loansOfPool(deps, loan)
  const names = new Map(all.map((other) => [other.id, other]))
  const own = names.get(loan.id)
  if (!own) throw new Error(`loan ${loan.id} is not in its pool`)
  const shelf = { loans: all, serviceable: kind.serviceable, limits: kind, today: deps.clock.today() }
  return { answer: answerExtension(own, to, shelf), names }
}

function inTheWay(
  answer: Extract<ExtensionAnswer, { granted: false }>,
  names: ReturnType<typeof askShelf>['names'],
) {
  const delays = answer.delays.flatMap((id) => {
    const loan = names.get(id)
    return loan ? [{ loanId: id, memberName: loan.memberName, from: loan.from }] : []
  })
  const who = delays.map(({ memberName, from }) => `${memberName} from ${from}`).join(', ')
  const detail = who
    ? `It is promised to ${who}. Move or cancel that first.`
    : 'It is not free on all of those days.'
  return new AppError('not-available', detail, { body: { delays } })
}

function keepUntil(
  deps: Deps,
  user: SignedIn,
  { tx, found }: Act,
  to: CalendarDay,
  reason: string | undefined,
) {
  const { loan } = found
  const at = deps.clock.now()
  const status = loan.status === 'out' ? 'out' : 'approved'
  changeLoan(tx, deps, loan, {
    toOn: to,
    blocksUntilOn: blocksUntil({ status, to }, loan.turnaroundDays, deps.clock.today()),
    extensionTo: null,
    extensionAskedAt: null,
    sequence: loan.sequence + 1,
    ...(reason !== undefined && { overrideReason: reason }),
  })
  const detail = reason === undefined ? `${loan.toOn} → ${to}` : `${loan.toOn} → ${to}. ${reason}`
  addLoanEvents(tx, [{ loanId: loan.id, event: 'extended', at, byId: user.id, detail }])
  refreshRisk(tx, deps, loan)
  if (user.id === loan.memberId) return
  queueNotice(tx, deps, {
    kind: 'loan-extended',
    memberId: loan.memberId,
    dedupeKey: `loan-extended:${loan.id}:${to}:${at}`,
    about: { type: 'loan', id: loan.id, on: to },
    facts: { ...factsOf(found), to },
  })
}
