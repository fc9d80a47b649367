import { eq } from 'drizzle-orm'
import type {
  Bottling,
  BottlingAdvice,
  BottlingRequest,
  Tasting,
  TastingRequest,
} from '#shared/batches/bottling-contract'
import { bottlingPlan, type BottlingWish } from '#shared/batches/bottling'
import { gateChecks, gateOpensOn } from '#shared/batches/gate-checks'
import { isOver } from '#shared/batches/lifecycle'
import { strengthBetween } from '#shared/batches/standing'
import { DRY_FG } from '#shared/batches/recipe'
import type { BatchPrimer, BottleKind } from '#shared/batches/vocabulary'
import { day, type CalendarDay } from '#shared/time/day'
import { batches, bottlings, tastings } from '../../db/schema/batches.ts'
import { items } from '../../db/schema/kit.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField } from '../../errors.ts'
import { newId } from '../../ids.ts'
import { ownBatch, readableBatch, touchBatch, type BatchRow } from './access.ts'
import { asReadings, gravitiesOf, loadFacts } from './facts.ts'
import { fitOf } from './forecast.ts'
import { bottlingsOf, tastingsOf } from './view.ts'

interface BottlingQuery {
  bottle?: BottleKind | undefined
  bottleMl?: number | undefined
  targetVolumesCo2?: number | undefined
  primer?: BatchPrimer | undefined
  tabletGrams?: number | undefined
}

/** What a common sugar tablet weighs, where the pack is not at hand (from memory; go by the pack). */
const USUAL_TABLET_GRAMS = 1.4

/** Whether a batch can be bottled, and all that goes with it; what is not asked is as the batch has it. */
export function bottlingAdvice(
  deps: Deps,
  memberId: string,
  batchId: string,
  query: BottlingQuery,
): BottlingAdvice {
  const { batch } = readableBatch(deps.db, memberId, batchId)
  return adviceFor(deps, deps.db, batch, wishOf(batch, query), deps.clock.today())
}

function wishOf(batch: BatchRow, query: BottlingQuery): BottlingWish {
  const target = query.targetVolumesCo2 ?? batch.targetVolumesCo2
  return {
    bottleKind: query.bottle ?? batch.bottleKind,
    bottleMl: query.bottleMl ?? batch.bottleMl,
    targetVolumesCo2: target === 0 ? null : target,
    primer: query.primer ?? batch.primer,
    tabletGrams: query.tabletGrams ?? USUAL_TABLET_GRAMS,
  }
}

function adviceFor(
  deps: Deps,
  db: Db | Tx,
  batch: BatchRow,
  wish: BottlingWish,
  on: CalendarDay,
): BottlingAdvice {
  const facts = loadFacts(db, [batch.id])(batch.id)
  const { og, expectedFg = DRY_FG } = gravitiesOf(batch, facts)
  const plan = bottlingPlan(
    {
      readings: asReadings(facts.readings),
      og: og !== undefined && og >= 1 && og <= 1.2 ? og : undefined,
      expectedFg,
      volumeLitres: batch.volumeLitres,
      rackings: facts.steps.filter((step) => step.kind === 'rack').length,
      fruit: batch.style === 'melomel' || batch.style === 'wine',
      on,
    },
    wish,
  )
  const last = facts.readings.at(-1)
  const fit = fitOf(deps, batch, facts)
  const { gate, ...rest } = plan
  return {
    ...rest,
    ...wish,
    ready: gate.ready,
    blocks: gate.blocks,
    checks: gateChecks(gate, last && hydrometerOf(db, last), on),
    cautions: gate.cautions,
    earliestOn: gateOpensOn(gate, fit?.finishOn && day(fit.finishOn.likely), on) ?? null,
    worstCaseVolumes: gate.worstCaseVolumes,
    worstCaseBarAt30C: gate.worstCaseBarAt30C,
    pointsToCome: gate.pointsToCome,
    limitVolumes: gate.limitVolumes,
  }
}

/** The instrument of the last reading, if it is one of the space. */
function hydrometerOf(db: Db | Tx, reading: { hydrometerItemId: string | null; offsetSg: number }) {
  if (reading.hydrometerItemId === null) return undefined
  const row = db
    .select({ tag: items.tag, calibratedOn: items.calibratedOn })
    .from(items)
    .where(eq(items.id, reading.hydrometerItemId))
    .get()
  return row && { ...row, offsetSg: reading.offsetSg }
}

/**
 * Logs what was bottled, with what the gate said. While it is shut it wants to hear that it was done anyway, and keeps
 * what the person was shown.
 * @throws AppError `wrong-state`, with the blocks, when the gate is shut and nobody said anyway
 */
export function addBottling(
  deps: Deps,
  memberId: string,
  batchId: string,
  request: BottlingRequest,
): Bottling {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    if (batch.status === 'planned' || isOver(batch.status))
      throw new AppError('wrong-state', `A batch that is ${batch.status} has nothing to bottle.`)
    if (request.bottledOn > deps.clock.today())
      throw invalidField('bottledOn', 'That is still to come. Log it once it is in bottles.')
    const { anyway, bottles, note, primingGrams, ...wish } = request
    const targetVolumesCo2 = wish.targetVolumesCo2 || null
    const advice = adviceFor(
      deps,
      tx,
      batch,
      { ...wish, targetVolumesCo2, tabletGrams: USUAL_TABLET_GRAMS },
      request.bottledOn,
    )
    if (!advice.ready && !anyway)
      throw new AppError('wrong-state', 'It is not ready to bottle. Read why before you log it.', {
        body: { blocks: advice.blocks },
      })
    const facts = loadFacts(tx, [batchId])(batchId)
    const gravity = facts.readings.at(-1)?.correctedGravity
    const { og } = gravitiesOf(batch, facts)
    tx.insert(bottlings)
      .values({
        ...wish,
        id: newId(),
        batchId,
        bottles,
        targetVolumesCo2,
        primingGrams: wish.primer === 'none' ? null : (primingGrams ?? null),
        gravity: gravity ?? null,
        abvPercent: (gravity !== undefined && strengthBetween(og, gravity)?.percent) || null,
        ready: advice.ready,
        anyway: !advice.ready,
        shown: advice.blocks.map(({ fact, why }) => `${fact}. ${why}`),
        worstCaseVolumes: advice.worstCaseVolumes,
        worstCaseBar: advice.worstCaseBarAt30C,
        note: note ?? null,
        createdAt: deps.clock.now(),
      })
      .run()
    tx.update(batches).set({ status: 'bottled' }).where(eq(batches.id, batchId)).run()
    touchBatch(deps, tx, batchId)
    return bottlingsOf(tx, batchId)[0] as Bottling
  })
}

/** Writes down how it tastes. */
export function addTasting(deps: Deps, memberId: string, batchId: string, request: TastingRequest): Tasting {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    if (batch.status === 'planned') throw new AppError('wrong-state', 'There is nothing to taste yet.')
    if (request.tastedOn > deps.clock.today()) throw invalidField('tastedOn', 'That is still to come.')
    const id = newId()
    tx.insert(tastings)
      .values({ ...request, id, batchId, createdAt: deps.clock.now() })
      .run()
    touchBatch(deps, tx, batchId)
    return tastingsOf(tx, batchId).find((tasting) => tasting.id === id) as Tasting
  })
}
