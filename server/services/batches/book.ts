import { and, desc, eq, lt, ne, or, sql, type SQL } from 'drizzle-orm'
import type { Batch, BatchPatch, BatchRequest } from '#shared/batches/contract'
import { isOver, mayMove } from '#shared/batches/lifecycle'
import type { BatchStatus } from '#shared/batches/vocabulary'
import type { Page } from '#shared/http/paging'
import { batches } from '../../db/schema/batches.ts'
import { members } from '../../db/schema/people.ts'
import { write } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import { newId } from '../../ids.ts'
import { ownBatch, readableBatch, type BatchRow } from './access.ts'

interface ListQuery {
  of: 'me' | 'space' | 'all'
  status?: BatchStatus | undefined
  limit: number
  cursor?: string | undefined
}

const asReply = (row: { batch: BatchRow; memberName: string }, memberId: string): Batch => ({
  ...row.batch,
  memberName: row.memberName,
  mine: row.batch.memberId === memberId,
})

/** A member's own batches and those others show, newest first. */
export function listBatches(deps: Deps, memberId: string, query: ListQuery): Page<Batch> {
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
  const page = pageFrom(rows, query.limit, (row) => [row.batch.createdAt, row.batch.id])
  return { ...page, items: page.items.map((row) => asReply(row, memberId)) }
}

export const readBatch = (deps: Deps, memberId: string, batchId: string): Batch =>
  asReply(readableBatch(deps.db, memberId, batchId), memberId)

/** Starts a batch; it is private unless said otherwise. */
export function startBatch(deps: Deps, memberId: string, request: BatchRequest): Batch {
  const id = newId()
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    tx.insert(batches)
      .values({
        ...request,
        id,
        memberId,
        visibility: request.visibility ?? 'private',
        status: 'planned',
        createdAt: now,
        updatedAt: now,
      })
      .run()
    return asReply(readableBatch(tx, memberId, id), memberId)
  })
}

/**
 * Changes a batch of one's own.
 * @throws AppError `wrong-state` for a move the book does not know, `stale` when the version has moved on
 */
export function changeBatch(
  deps: Deps,
  memberId: string,
  batchId: string,
  version: number,
  patch: BatchPatch,
): Batch {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    const status = patch.status ?? batch.status
    if (!mayMove(batch.status, status))
      throw new AppError('wrong-state', `A batch that is ${batch.status} cannot become ${status}.`)
    const changed = tx
      .update(batches)
      .set({
        ...patch,
        ...(status !== batch.status && { endedAt: isOver(status) ? now : null }),
        updatedAt: now,
        version: version + 1,
      })
      .where(and(eq(batches.id, batchId), eq(batches.version, version)))
      .run()
    if (changed.changes === 0)
      throw new AppError('stale', 'This batch was changed elsewhere. Load it again, then make your change.')
    return asReply(readableBatch(tx, memberId, batchId), memberId)
  })
}
