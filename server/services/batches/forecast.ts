import { and, eq, inArray } from 'drizzle-orm'
import { FORECAST_WORDS } from '#shared/batches/forecast-words'
import { keepUntil, outlastsBy } from '#shared/batches/outlast'
import type { ExtensionOffer, Forecast } from '#shared/batches/reading-contract'
import { strengthBetween } from '#shared/batches/standing'
import { stuckTriage } from '#shared/batches/stuck'
import { fitFermentation, type FermentForecast } from '#shared/brewing/index'
import { answerExtension } from '#shared/loans/extension'
import { addDays, day, laterDay, type CalendarDay } from '#shared/time/day'
import { dayRange } from '#shared/time/day-range'
import { dayAt, instantOn } from '#shared/time/instant'
import { stepNeeds } from '../../db/schema/batches.ts'
import { items, kinds } from '../../db/schema/kit.ts'
import { loans } from '../../db/schema/loans.ts'
import type { Db, Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { kindOfPool, loansOfPool } from '../loans/pool.ts'
import { readableBatch, type BatchRow } from './access.ts'
import { asReadings, gravitiesOf, loadFacts, type BatchFacts } from './facts.ts'

/** A picture of a ferment longer than this is cut. */
const PICTURE_DAYS_MAX = 200

/** Where a batch stands and where it will end, with what that means for the kit it holds. */
export function forecastBatch(deps: Deps, memberId: string, batchId: string): Forecast {
  const { batch } = readableBatch(deps.db, memberId, batchId)
  const facts = loadFacts(deps.db, [batchId])(batchId)
  const { og, expectedFg } = gravitiesOf(batch, facts)
  const fit = fitOf(deps, batch, facts)
  const status = fit?.status ?? 'unknown'
  const finishOn = fit?.finishOn && {
    early: day(fit.finishOn.early),
    likely: day(fit.finishOn.likely),
    late: day(fit.finishOn.late),
  }
  return {
    status,
    ...FORECAST_WORDS[status],
    reasons: fit?.reasons ?? [],
    og: og ?? null,
    expectedFg: expectedFg ?? null,
    finalGravity: fit?.finalGravity ?? null,
    finalGravityBand: fit?.finalGravityBand ?? null,
    finishOn: finishOn ?? null,
    curve: fit ? curveOf(deps, batch, facts, fit, finishOn?.late) : [],
    residual: fit?.residual ?? null,
    offers: batch.memberId === memberId && finishOn ? offersFor(deps, deps.db, batch, facts, finishOn) : [],
    triage: status === 'stuck' ? triageOf(batch, facts) : [],
  }
}

/** The fitted ferment, or undefined where there is nothing to fit: no reading, or gravities that cannot be. */
export function fitOf(deps: Deps, batch: BatchRow, facts: BatchFacts): FermentForecast | undefined {
  const { og, expectedFg } = gravitiesOf(batch, facts)
  if (facts.readings.length === 0 || og === undefined || expectedFg === undefined) return undefined
  if (og < 1 || og > 1.2 || expectedFg > og || expectedFg > 1.1) return undefined
  return fitFermentation({
    readings: asReadings(facts.readings),
    og,
    expectedFg,
    on: deps.clock.today(),
    ...(batch.pitchedAt && { pitchedAt: batch.pitchedAt }),
  })
}

function curveOf(
  deps: Deps,
  batch: BatchRow,
  facts: BatchFacts,
  fit: FermentForecast,
  late: CalendarDay | undefined,
): Forecast['curve'] {
  const zone = deps.clock.timeZone
  const first = batch.pitchedAt ?? facts.readings[0]?.at
  if (!first) return []
  const from = dayAt(first, zone)
  const today = deps.clock.today()
  const end = late ? laterDay(addDays(late, 3), addDays(today, 2)) : addDays(today, 3)
  const to = end > addDays(from, PICTURE_DAYS_MAX) ? addDays(from, PICTURE_DAYS_MAX) : end
  return dayRange({ from, to }).map((on) => {
    const noon = instantOn(on, 12, 0, zone)
    return { on, gravity: fit.curve(noon), ...fit.band(noon) }
  })
}

/** The vessels the ferment is likely to outlast, each with what keeping it would mean for others. */
export function offersFor(
  deps: Deps,
  db: Db | Tx,
  batch: BatchRow,
  facts: BatchFacts,
  finishOn: { likely: CalendarDay; late: CalendarDay },
): ExtensionOffer[] {
  const bottleOn = facts.steps.find((step) => step.kind === 'bottle' && step.doneAt === null)?.plannedOn
  return vesselsOut(deps, db, batch.id).flatMap(({ loan, kindName, tag }) => {
    const byDays = outlastsBy(finishOn.likely, loan.toOn)
    if (byDays === undefined) return []
    const keepTo = keepUntil(finishOn, bottleOn ?? undefined)
    const pool = { kindId: loan.kindId, wild: loan.wild }
    const live = loansOfPool(deps, pool)
    const held = live.find(({ id }) => id === loan.id)
    if (!held) return []
    const kind = kindOfPool(deps, pool)
    const answer = answerExtension(held, keepTo, {
      loans: live,
      serviceable: kind.serviceable,
      limits: kind,
      today: deps.clock.today(),
    })
    const delayed = answer.granted ? [] : live.filter(({ id }) => answer.delays.includes(id))
    const [first] = delayed.map(({ from }) => from).sort()
    return [
      {
        loanId: loan.id,
        kindName,
        tag,
        returnBy: loan.toOn,
        byDays,
        keepTo,
        atOnce: answer.granted,
        delays: delayed.length,
        neededOn: first ?? null,
        askedTo: loan.extensionTo,
      },
    ]
  })
}

/** Vessels in hand for a batch, but for those lent for one step alone. */
function vesselsOut(deps: Deps, db: Db | Tx, batchId: string) {
  const today = deps.clock.today()
  return db
    .select({
      loan: loans,
      kindName: kinds.name,
      tag: items.tag,
      needId: stepNeeds.id,
      until: stepNeeds.untilStepId,
    })
    .from(loans)
    .innerJoin(kinds, eq(kinds.id, loans.kindId))
    .leftJoin(items, eq(items.id, loans.itemId))
    .leftJoin(stepNeeds, eq(stepNeeds.loanId, loans.id))
    .where(
      and(
        eq(loans.batchId, batchId),
        eq(kinds.category, 'vessel'),
        inArray(loans.status, ['approved', 'out']),
      ),
    )
    .all()
    .filter(({ loan, needId, until }) => loan.fromOn <= today && (needId === null || until !== null))
}

function triageOf(batch: BatchRow, facts: BatchFacts): Forecast['triage'] {
  const { og, expectedFg, sums } = gravitiesOf(batch, facts)
  const last = facts.readings.at(-1)
  const feeds = facts.steps.filter((step) => step.kind === 'feed')
  const gravity = last?.correctedGravity
  const drop =
    og !== undefined && expectedFg !== undefined && gravity !== undefined && og > expectedFg
      ? (og - gravity) / (og - expectedFg)
      : undefined
  return stuckTriage({
    temperatureC: last?.temperatureC,
    abvPercent: gravity === undefined ? undefined : strengthBetween(og, gravity)?.percent,
    tolerancePercent: batch.tolerancePercent ?? undefined,
    ph: facts.readings.findLast((reading) => reading.ph !== null)?.ph ?? undefined,
    sulphiteMgPerLitre: batch.sulphiteMgPerLitre,
    nitrogenShortMgPerLitre: sums.nitrogen?.shortfallMgPerLitre,
    feedsDone: feeds.filter((step) => step.doneAt !== null).length,
    feedsPlanned: feeds.length,
    drop,
  })
}
