import { and, eq, sql } from 'drizzle-orm'
import { batches } from '../../db/schema/batches.ts'
import { members } from '../../db/schema/people.ts'
import type { Db, Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, notFound } from '../../errors.ts'

export type BatchRow = typeof batches.$inferSelect

/**
 * A batch this member may read: their own, or one shown to the space.
 * @throws AppError `not-found` for a private batch of anyone else, whatever the reader's role
 */
export function readableBatch(db: Db | Tx, memberId: string, batchId: string) {
  const row = db
    .select({ batch: batches, memberName: members.name })
    .from(batches)
    .innerJoin(members, eq(members.id, batches.memberId))
    .where(eq(batches.id, batchId))
    .get()
  if (!row || (row.batch.memberId !== memberId && row.batch.visibility !== 'space'))
    throw notFound('That batch')
  return row
}

/**
 * A batch this member made.
 * @throws AppError `not-found`, or `forbidden` for one they may only read
 */
export function ownBatch(db: Db | Tx, memberId: string, batchId: string): BatchRow {
  const { batch, memberName } = readableBatch(db, memberId, batchId)
  if (batch.memberId !== memberId)
    throw new AppError('forbidden', `This batch is ${memberName}’s. Copy it to brew your own.`)
  return batch
}

/**
 * Marks a batch as changed. With `version`, only if nobody changed it since.
 * @throws AppError `stale`
 */
export function touchBatch(deps: Deps, tx: Tx, batchId: string, version?: number) {
  const changed = tx
    .update(batches)
    .set({ updatedAt: deps.clock.now(), version: sql`version + 1` })
    .where(and(eq(batches.id, batchId), version === undefined ? undefined : eq(batches.version, version)))
    .run()
  if (changed.changes === 0) throw staleBatch()
}

export const staleBatch = () =>
  new AppError('stale', 'This batch was changed elsewhere. Load it again, then make your change.')
