import { lt } from 'drizzle-orm'
import { addDays } from '#shared/time/day'
import { addMinutes, instantOn } from '#shared/time/instant'
import { clockAt } from '../../clock.ts'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { recordHygiene } from '../../services/kit/hygiene.ts'
import { bookLoan } from '../../services/loans/book.ts'
import { approveLoan, cancelLoan, declineLoan } from '../../services/loans/decide.ts'
import { extendLoan } from '../../services/loans/extend.ts'
import { checkInLoan, checkOutLoan } from '../../services/loans/hand-over.ts'
import { readLoan } from '../../services/loans/read.ts'
import { runLoanRound } from '../../services/loans/round.ts'
import { joinWaiting } from '../../services/loans/waiting.ts'
import { letters } from '../schema/notices.ts'
import type { SeedContext } from './index.ts'
import { pastLoans, PRESENT, type PlannedLoan } from './loans-plan.ts'

/** What is known of a planned loan while it is told. */
interface Told extends PlannedLoan {
  id?: string
  itemId?: string
}

/**
 * Three months of lending, day by day and through the services, so that every loan has a past that could have been. A past
 * loan the shelf had no room for is left out (and counted as a refusal, as it would have been); one of today must go through.
 */
export function seedLoans({ deps, people, kinds }: SeedContext) {
  const today = deps.clock.today()
  const zone = deps.clock.timeZone
  const now = deps.clock.now()
  const on = (day: number) => addDays(today, day)
  const at = (day: number, hour: number): Deps => {
    const then = instantOn(on(day), hour, 0, zone)
    return { ...deps, clock: clockAt(then < now ? then : now, zone) }
  }
  const person = (login: string): SignedIn => ({
    id: known(people, login),
    name: login,
    email: `${login}@barmhouse.example`,
    role: login.startsWith('steward') ? 'steward' : 'member',
    status: 'active',
  })
  const steward = person('steward')
  const told: Told[] = [...pastLoans(), ...PRESENT].map((loan) => ({ ...loan }))
  const asked = (loan: Told) => loan.asked ?? loan.from

  for (let day = -95; day <= 0; day += 1) {
    runLoanRound(at(day, 6))
    for (const loan of told.filter(
      (one) => one.itemId && one.reach === 'returned' && one.to + (one.late ?? 0) === day,
    ))
      bringBack(at(day, 8), loan)
    for (const loan of told.filter((one) => asked(one) === day)) ask(at(day, 9), loan)
    for (const loan of told.filter((one) => one.from === day)) handOut(at(day, 10), loan)
  }
  for (const { id, who, extendTo } of told)
    if (id && extendTo !== undefined) extendLoan(at(0, 10), person(who), id, { to: on(extendTo) })
  joinWaiting(at(0, 11), person('member7'), {
    kindId: known(kinds, 'demijohn9'),
    from: on(2),
    to: on(12),
  })
  // Letters of the past were sent in the past.
  deps.db
    .update(letters)
    .set({ status: 'sent', sentAt: letters.queuedAt })
    .where(lt(letters.queuedAt, addMinutes(now, -24 * 60)))
    .run()

  function ask(then: Deps, loan: Told) {
    const who = person(loan.who)
    const request = { kindId: known(kinds, loan.kind), from: on(loan.from), to: on(loan.to) }
    const booked = inThePast(loan, () =>
      bookLoan(then, who, { ...request, ...(loan.note && { note: loan.note }) }),
    )
    if (!booked) return
    loan.id = booked.id
    if (loan.reach === 'requested') return
    if (loan.reach === 'declined')
      declineLoan(then, steward, booked.id, 'The buckets are promised to the open day. Try the week after.')
    else if (booked.status === 'requested') approveLoan(then, steward, booked.id)
    if (loan.reach === 'cancelled') cancelLoan(then, who, booked.id, undefined)
  }

  function handOut(then: Deps, loan: Told) {
    if (!loan.id || (loan.reach !== 'out' && loan.reach !== 'returned')) return
    const { id } = loan
    const itemId = readLoan(then, steward, id).suggestedItemId ?? makeReady(then, loan)
    if (!itemId) {
      if (loan.reach === 'out') throw new Error(`the demo has no ${loan.kind} to hand out to ${loan.who}`)
      delete loan.id
      cancelLoan(then, steward, id, 'Nothing was clean.')
      return
    }
    checkOutLoan(then, steward, id, { itemId })
    loan.itemId = itemId
  }

  /** Sanitises one where the kind wants that and none is. */
  function makeReady(then: Deps, loan: Told): string | undefined {
    const clean = deps.db.$client
      .prepare(
        `SELECT i.id FROM items i WHERE i.kind_id = ? AND i.hygiene <> 'dirty' AND i.status = 'in-service'
           AND NOT EXISTS (SELECT 1 FROM loans l WHERE l.item_id = i.id AND l.status = 'out') ORDER BY i.id`,
      )
      .pluck()
      .get(known(kinds, loan.kind)) as string | undefined
    if (clean)
      recordHygiene(then, steward, clean, {
        state: 'sanitised',
        agent: 'iodophor',
        concentration: '12.5 mg/L',
        contactMinutes: 2,
      })
    return clean
  }

  function bringBack(then: Deps, loan: Told) {
    if (!loan.id || !loan.itemId) return
    checkInLoan(then, steward, loan.id, { condition: 'ok', hygiene: 'dirty' })
    recordHygiene({ ...then, clock: clockAt(addMinutes(then.clock.now(), 50), zone) }, steward, loan.itemId, {
      state: 'clean',
      agent: 'percarbonate',
      contactMinutes: 15,
    })
  }
}

/** A past loan may find no room; a present one may not. */
function inThePast<T>(loan: Told, act: () => T): T | undefined {
  try {
    return act()
  } catch (error) {
    if (loan.reach === 'returned' && error instanceof AppError) return undefined
    throw error
  }
}

function known(ids: Record<string, string>, key: string): string {
  const id = ids[key]
  if (!id) throw new Error(`the demo has no ${key}`)
  return id
}
