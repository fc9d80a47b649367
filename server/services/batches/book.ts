import { and, desc, eq, inArray, lt, ne, or, sql, type SQL } from 'drizzle-orm'
import type { Batch, BatchCard, BatchPatch, BatchRequest, CopyRequest } from '#shared/batches/contract'
import { isOver, mayMove } from '#shared/batches/lifecycle'
import { scaledLines } from '#shared/batches/recipe'
import type { BatchStatus } from '#shared/batches/vocabulary'
import type { Page } from '#shared/http/paging'
import type { SignedIn } from '../../http/sessions.ts'
import { batches, recipeLines } from '../../db/schema/batches.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import { newId } from '../../ids.ts'
import { ownBatch, readableBatch, staleBatch, type BatchRow } from './access.ts'
import { loadFacts, nextReply, standingReply } from './facts.ts'
import { releasePlan } from './plan-request.ts'
import { writeRecipe } from './recipe.ts'
import { copySteps, writeUsualSteps } from './steps.ts'
import { batchReply } from './view.ts'

interface ListQuery {
  of: 'me' | 'space' | 'all'
  status?: BatchStatus | undefined
  limit: number
  cursor?: string | undefined
}

/** A member's own batches and those others show, newest first. */
export function listBatches(deps: Deps, memberId: string, query: ListQuery): Page<BatchCard> {
  const mine = eq(batches.memberId, memberId)
  const others = and(ne(batches.memberId, memberId), eq(batches.visibility, 'space'))
  const which: SQL | undefined = query.of === 'me' ? mine : query.of === 'space' ? others : or(mine, others)
  const after = query.cursor ? (decodeCursor(query.cursor, 2) as [string, string]) : undefined
  const rows = deps.db
    .select({ batch: batches, memberName: members.name })
    .from(batches)
    .innerJoin(members, eq(members.id, batches.memberId))
    .where(
      and(
        which,
        query.status && eq(batches.status, query.status),
        after && lt(sql`(${batches.createdAt}, ${batches.id})`, sql`(${after[0]}, ${after[1]})`),
      ),
    )
    .orderBy(desc(batches.createdAt), desc(batches.id))
    .limit(query.limit + 1)
    .all()
  const page = pageFrom(rows, query.limit, ({ batch }) => [batch.createdAt, batch.id])
  const factsOf = loadFacts(
    deps.db,
    page.items.map(({ batch }) => batch.id),
  )
  return {
    ...page,
    items: page.items.map(({ batch, memberName }) => {
      const facts = factsOf(batch.id)
      return {
        ...batch,
        memberName,
        mine: batch.memberId === memberId,
        standing: standingReply(batch, facts),
        next: nextReply(batch, facts.steps),
      }
    }),
  }
}

export const readBatch = (deps: Deps, memberId: string, batchId: string): Batch =>
  batchReply(deps.db, memberId, batchId)

/** Starts a batch, private unless said otherwise, with the usual steps of its style. */
export function startBatch(deps: Deps, memberId: string, { recipe, ...request }: BatchRequest): Batch {
  return write(deps.db, (tx) => {
    const batch = insertBatch(deps, tx, memberId, request)
    if (recipe) writeRecipe(tx, batch.id, recipe)
    writeUsualSteps(tx, batch)
    return batchReply(tx, memberId, batch.id)
  })
}

type NewBatch = Omit<BatchRequest, 'recipe'> & { copiedFromId?: string }

function insertBatch(deps: Deps, tx: Tx, memberId: string, facts: NewBatch): BatchRow {
  const now = deps.clock.now()
  return tx
    .insert(batches)
    .values({
      ...facts,
      id: newId(),
      memberId,
      visibility: facts.visibility ?? 'private',
      status: 'planned',
      createdAt: now,
      updatedAt: now,
    })
    .returning()
    .get()
}

/**
 * Changes a batch of one's own. Given up, it lets go of what is booked and reserved for it.
 * @throws AppError `wrong-state` for a move the book does not know, `stale` when the version has moved on
 */
export function changeBatch(
  deps: Deps,
  user: SignedIn,
  batchId: string,
  version: number,
  { recipe, ...patch }: BatchPatch,
): Batch {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, user.id, batchId)
    const status = patch.status ?? batch.status
    if (!mayMove(batch.status, status))
      throw new AppError('wrong-state', `A batch that is ${batch.status} cannot become ${status}.`)
    const moved = status !== batch.status
    const changed = tx
      .update(batches)
      .set({
        ...patch,
        ...(moved && { endedAt: isOver(status) ? now : null }),
        ...(moved && status === 'fermenting' && { pitchedAt: batch.pitchedAt ?? now }),
        ...(moved && status === 'planned' && { pitchedAt: null }),
        updatedAt: now,
        version: version + 1,
      })
      .where(and(eq(batches.id, batchId), eq(batches.version, version)))
      .run()
    if (changed.changes === 0) throw staleBatch()
    if (recipe) writeRecipe(tx, batchId, recipe)
    if (moved && isOver(status)) releasePlan(deps, tx, user, batchId)
    return batchReply(tx, user.id, batchId)
  })
}

/**
 * A new batch from the recipe and the steps of one that may be read, one's own or another's. Nothing is dated or booked,
 * and it is private until its maker shows it.
 */
export function copyBatch(deps: Deps, memberId: string, batchId: string, request: CopyRequest): Batch {
  return write(deps.db, (tx) => {
    const { batch: from } = readableBatch(tx, memberId, batchId)
    const volumeLitres = request.volumeLitres ?? from.volumeLitres
    const batch = insertBatch(deps, tx, memberId, {
      name: request.name ?? nextName(from.name),
      style: from.style,
      volumeLitres,
      wild: from.wild,
      expectedFg: from.expectedFg,
      notes: from.memberId === memberId ? from.notes : '',
      waterTreatment: from.waterTreatment,
      chlorineMgPerLitre: from.chlorineMgPerLitre,
      nitrogenDemand: from.nitrogenDemand,
      yeast: from.yeast,
      tolerancePercent: from.tolerancePercent,
      bottleKind: from.bottleKind,
      bottleMl: from.bottleMl,
      targetVolumesCo2: from.targetVolumesCo2,
      primer: from.primer,
      copiedFromId: from.id,
    })
    const lines = tx
      .select()
      .from(recipeLines)
      .where(inArray(recipeLines.batchId, [batchId]))
      .all()
    for (const line of scaledLines(lines, from.volumeLitres, volumeLitres))
      tx.insert(recipeLines)
        .values({ ...line, id: newId(), batchId: batch.id })
        .run()
    copySteps(tx, batchId, batch)
    return batchReply(tx, memberId, batch.id)
  })
}

/** "Windfall cyser" is followed by "Windfall cyser 2", that by 3. */
function nextName(name: string): string {
  const [, stem = name, number] = /^(.*?) (\d{1,3})$/.exec(name) ?? []
  return `${stem.slice(0, 76)} ${number ? Number(number) + 1 : 2}`
}
