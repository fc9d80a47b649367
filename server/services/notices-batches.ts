import { and, eq, isNotNull, isNull, lte, ne } from 'drizzle-orm'
import { reminderDay, stepDay } from '#shared/notices/due'
import { day, type CalendarDay } from '#shared/time/day'
import { instantOn } from '#shared/time/instant'
import { batches, batchSteps } from '../db/schema/batches.ts'
import { loans } from '../db/schema/loans.ts'
import type { Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { loadFacts } from './batches/facts.ts'
import { fitOf, offersFor } from './batches/forecast.ts'
import { queueNotice } from './notices.ts'

/** Queues one letter for each batch whose plan has a step on a reminder day. Gives back the letters' ids. */
export function queueStepNotices(tx: Tx, deps: Deps, on: CalendarDay): string[] {
  const rows = tx
    .select({ batch: batches, title: batchSteps.title, plannedOn: batchSteps.plannedOn })
    .from(batchSteps)
    .innerJoin(batches, eq(batches.id, batchSteps.batchId))
    .where(
      and(
        isNull(batchSteps.doneAt),
        isNotNull(batchSteps.plannedOn),
        lte(batchSteps.plannedOn, on),
        isNull(batches.endedAt),
      ),
    )
    .orderBy(batchSteps.position)
    .all()
  return [...new Map(rows.map(({ batch }) => [batch.id, batch])).values()].flatMap((batch) => {
    const steps = rows.flatMap(({ batch: { id }, title, plannedOn }) =>
      id === batch.id && plannedOn ? [{ on: plannedOn, title }] : [],
    )
    const stepOn = stepDay(steps, reminderDay(batch.updatedAt, deps.clock.timeZone), on)
    if (!stepOn) return []
    const stepName = steps.flatMap((step) => (step.on === stepOn ? [step.title] : [])).join('; ')
    const notice = {
      kind: 'batch-step-due' as const,
      memberId: batch.memberId,
      about: { type: 'batch', id: batch.id, on: stepOn } as const,
      dedupeKey: `batch-step-due:${batch.id}:${stepOn}`,
      facts: { batchId: batch.id, batchName: batch.name, stepName, on: stepOn },
    }
    return queueNotice(tx, deps, notice) ?? []
  })
}

/** Whether every step a letter spoke of has been done, or moved to another day. */
export const stepsDone = (tx: Tx, batchId: string, on: CalendarDay): boolean =>
  tx
    .select({ id: batchSteps.id })
    .from(batchSteps)
    .where(and(eq(batchSteps.batchId, batchId), eq(batchSteps.plannedOn, on), isNull(batchSteps.doneAt)))
    .get() === undefined

/** Tells members whose ferment is likely to outlast the loan of its vessel, once for each return-by day. */
export function queueOutlastNotices(tx: Tx, deps: Deps): string[] {
  const found = tx
    .selectDistinct({ batch: batches })
    .from(batches)
    .innerJoin(loans, and(eq(loans.batchId, batches.id), eq(loans.status, 'out')))
    .where(and(isNull(batches.endedAt), ne(batches.status, 'planned')))
    .all()
  const factsOf = loadFacts(
    tx,
    found.map(({ batch }) => batch.id),
  )
  return found.flatMap(({ batch }) => {
    const facts = factsOf(batch.id)
    const finish = fitOf(deps, batch, facts)?.finishOn
    if (!finish) return []
    const finishOn = { likely: day(finish.likely), late: day(finish.late) }
    return offersFor(deps, tx, batch, facts, finishOn).flatMap((offer) => {
      if (offer.askedTo !== null) return []
      const notice = {
        kind: 'batch-outlasts-loan' as const,
        memberId: batch.memberId,
        about: { type: 'loan', id: offer.loanId, on: offer.returnBy } as const,
        dedupeKey: `batch-outlasts-loan:${offer.loanId}:${offer.returnBy}`,
        usefulUntil: instantOn(offer.returnBy, 23, 59, deps.clock.timeZone),
        facts: {
          batchId: batch.id,
          batchName: batch.name,
          kindName: offer.kindName,
          to: offer.returnBy,
          likelyOn: finishOn.likely,
          keepTo: offer.keepTo,
          atOnce: offer.atOnce,
        },
      }
      return notice.usefulUntil > deps.clock.now() ? (queueNotice(tx, deps, notice) ?? []) : []
    })
  })
}
