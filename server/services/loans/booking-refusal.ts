import { breachSentence } from '#shared/loans/limits'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import type { Booking, Refusal } from './booking-rules.ts'
import { insteadOf } from './instead.ts'

/**
 * One answer for all that stands in the way: inductions first, since no other day helps; then limits; then what is taken,
 * with what would do instead.
 */
export function refusalOf(
  deps: Deps,
  memberId: string,
  booking: Booking,
  refused: readonly { index: number; refusal: Refusal }[],
): AppError {
  const inBasket = booking.basketId !== null
  const uninducted = refused.flatMap(({ index, refusal }) =>
    refusal.reason === 'needs-induction' ? [{ index, kind: refusal.kind }] : [],
  )
  const [first] = uninducted
  if (first) {
    const lines = uninducted.map(({ index, kind }) => ({ index, kindId: kind.id, howTo: kind.inductionNote }))
    const howTo = first.kind.inductionNote || 'Ask a steward to show you.'
    const detail = `You need an induction before you can book ${first.kind.name}. ${howTo}`
    return new AppError('needs-induction', detail, { keep: true, ...(inBasket && { body: { lines } }) })
  }
  const over = refused.flatMap(({ index, refusal }) =>
    refusal.reason === 'over-limit' ? [{ index, breaches: refusal.breaches, kind: refusal.kind }] : [],
  )
  const [limit] = over.flatMap(({ breaches, kind }) => breaches.map((breach) => ({ breach, kind })))
  if (limit) {
    const lines = over.map(({ index, breaches }) => ({ index, limits: breaches }))
    const detail = `${limit.kind.name}: ${breachSentence(limit.breach)}`
    return new AppError('over-limit', detail, {
      keep: true,
      body: inBasket ? { lines } : { limits: lines[0]?.limits },
    })
  }
  const missed = refused.flatMap(({ index, refusal }) =>
    refusal.reason === 'not-available' ? [{ index, missed: refusal.missed }] : [],
  )
  const instead = insteadOf(
    deps,
    memberId,
    missed.map((line) => line.missed),
  )
  const names = [...new Set(missed.map((line) => line.missed.kind.name))].join(', ')
  return new AppError('not-available', `${names}: not free on all of those days.`, {
    keep: true,
    body: inBasket
      ? { lines: missed.map(({ index }, at) => ({ index, ...instead[at] })) }
      : { ...instead[0] },
  })
}
