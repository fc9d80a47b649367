import { and, asc, desc, eq, isNotNull, isNull, ne } from 'drizzle-orm'
import type {
  Hydrometer,
  Reading,
  ReadingPatch,
  ReadingRequest,
  ReadingTrace,
} from '#shared/batches/reading-contract'
import { correctGravity } from '#shared/brewing/index'
import type { Instant } from '#shared/time/instant'
import { readingChanges, readings } from '../../db/schema/batches.ts'
import { items, kinds } from '../../db/schema/kit.ts'
import { loans } from '../../db/schema/loans.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { invalidField, notFound } from '../../errors.ts'
import { newId } from '../../ids.ts'
import { ownBatch, readableBatch, staleBatch, touchBatch } from './access.ts'
import { batchReply } from './view.ts'

type ReadingRow = typeof readings.$inferSelect

interface Taken {
  at: Instant
  gravity: number
  temperatureC: number
  hydrometerItemId: string | null
}

/**
 * Logs a gravity: as read, and corrected for the temperature and for the offset of the space's hydrometer if it was one.
 * @throws AppError `invalid` for an item that is no hydrometer, or a reading no correction holds for
 */
export function addReading(deps: Deps, memberId: string, batchId: string, request: ReadingRequest): Reading {
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, memberId, batchId)
    const id = newId()
    const now = deps.clock.now()
    const taken = { ...request, hydrometerItemId: request.hydrometerItemId ?? null }
    refuseFuture(deps, taken.at)
    tx.insert(readings)
      .values({
        ...taken,
        ...corrected(tx, taken),
        id,
        batchId: batch.id,
        ph: request.ph ?? null,
        note: request.note ?? null,
        createdAt: now,
        updatedAt: now,
      })
      .run()
    touchBatch(deps, tx, batchId)
    return readingReply(tx, memberId, batchId, id)
  })
}

/**
 * Corrects a reading. What it said before is kept.
 * @throws AppError `not-found`, `stale`, `invalid`
 */
export function changeReading(
  deps: Deps,
  memberId: string,
  batchId: string,
  readingId: string,
  version: number,
  patch: ReadingPatch,
): Reading {
  return write(deps.db, (tx) => {
    ownBatch(tx, memberId, batchId)
    const before = readingRow(tx, batchId, readingId)
    const taken = { ...before, ...given(patch) }
    refuseFuture(deps, taken.at)
    const changed = tx
      .update(readings)
      .set({
        ...given(patch),
        ...corrected(tx, taken),
        updatedAt: deps.clock.now(),
        version: version + 1,
      })
      .where(and(eq(readings.id, readingId), eq(readings.version, version)))
      .run()
    if (changed.changes === 0) throw staleBatch()
    keepTrace(deps, tx, memberId, before, 'edited')
    touchBatch(deps, tx, batchId)
    return readingReply(tx, memberId, batchId, readingId)
  })
}

/** Takes a reading out of every sum; a trace of it stays. */
export function deleteReading(deps: Deps, memberId: string, batchId: string, readingId: string) {
  write(deps.db, (tx) => {
    ownBatch(tx, memberId, batchId)
    const before = readingRow(tx, batchId, readingId)
    tx.update(readings).set({ deletedAt: deps.clock.now() }).where(eq(readings.id, readingId)).run()
    keepTrace(deps, tx, memberId, before, 'deleted')
    touchBatch(deps, tx, batchId)
  })
}

/** What was edited and deleted, newest first. */
export function readingTrace(
  deps: Deps,
  memberId: string,
  batchId: string,
): { items: ReadingTrace[]; nextCursor: null } {
  readableBatch(deps.db, memberId, batchId)
  const rows = deps.db
    .select({
      readingId: readingChanges.readingId,
      change: readingChanges.change,
      changedAt: readingChanges.changedAt,
      changedByName: members.name,
      before: readingChanges.before,
    })
    .from(readingChanges)
    .innerJoin(readings, eq(readings.id, readingChanges.readingId))
    .innerJoin(members, eq(members.id, readingChanges.changedBy))
    .where(eq(readings.batchId, batchId))
    .orderBy(desc(readingChanges.id))
    .limit(200)
    .all()
  return { items: rows, nextCursor: null }
}

/** Drops what the caller left out, so that it does not blot out what is there. */
const given = (patch: ReadingPatch) =>
  Object.fromEntries(Object.entries(patch).filter(([, value]) => value !== undefined)) as ReadingPatch &
    Partial<Taken>

function corrected(tx: Tx, taken: Taken) {
  const instrument = instrumentOf(tx, taken.hydrometerItemId)
  try {
    return {
      ...instrument,
      correctedGravity: correctGravity({
        reading: taken.gravity,
        temperatureC: taken.temperatureC,
        calibrationTemperatureC: instrument.markedForTemperatureC,
        offset: instrument.offsetSg,
      }),
    }
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    throw invalidField('gravity', 'No liquid reads like that at this temperature. Look at both again.')
  }
}

/** What an instrument adds, and the temperature it is marked for; one's own is taken as true and marked for 20 °C. */
function instrumentOf(tx: Tx, itemId: string | null) {
  if (itemId === null) return { offsetSg: 0, markedForTemperatureC: 20 }
  const row = tx
    .select({ offset: items.calibrationOffsetSg, marked: kinds.markedForTemperatureC })
    .from(items)
    .innerJoin(kinds, eq(kinds.id, items.kindId))
    .where(eq(items.id, itemId))
    .get()
  if (row?.marked == null) throw invalidField('hydrometerItemId', 'That is not a hydrometer of the space.')
  return { offsetSg: row.offset ?? 0, markedForTemperatureC: row.marked }
}

function readingRow(tx: Tx, batchId: string, readingId: string): ReadingRow {
  const row = tx
    .select()
    .from(readings)
    .where(and(eq(readings.id, readingId), eq(readings.batchId, batchId), isNull(readings.deletedAt)))
    .get()
  if (!row) throw notFound('That reading')
  return row
}

function readingReply(tx: Tx, memberId: string, batchId: string, readingId: string): Reading {
  return batchReply(tx, memberId, batchId).readings.find(({ id }) => id === readingId) as Reading
}

function keepTrace(deps: Deps, tx: Tx, memberId: string, row: ReadingRow, change: 'edited' | 'deleted') {
  const { at, gravity, temperatureC, correctedGravity, hydrometerItemId, ph } = row
  tx.insert(readingChanges)
    .values({
      readingId: row.id,
      change,
      changedAt: deps.clock.now(),
      changedBy: memberId,
      before: { at, gravity, temperatureC, correctedGravity, hydrometerItemId, ph },
    })
    .run()
}

function refuseFuture(deps: Deps, at: Instant) {
  if (at > deps.clock.now()) throw invalidField('at', 'That is still to come. Log it once it is read.')
}

/** Every hydrometer a member may have read with: in hand first, then by tag. */
export function listHydrometers(deps: Deps, memberId: string): { items: Hydrometer[]; nextCursor: null } {
  const rows = deps.db
    .select({ item: items, kindName: kinds.name, marked: kinds.markedForTemperatureC, loanId: loans.id })
    .from(items)
    .innerJoin(kinds, eq(kinds.id, items.kindId))
    .leftJoin(loans, and(eq(loans.itemId, items.id), eq(loans.status, 'out'), eq(loans.memberId, memberId)))
    .where(and(isNotNull(kinds.markedForTemperatureC), ne(items.status, 'lost'), ne(items.status, 'retired')))
    .orderBy(asc(items.tag))
    .all()
    .map(({ item, kindName, marked, loanId }) => ({
      itemId: item.id,
      tag: item.tag,
      kindName,
      offsetSg: item.calibrationOffsetSg ?? 0,
      markedForTemperatureC: marked ?? 20,
      calibratedOn: item.calibratedOn,
      inHand: loanId !== null,
    }))
  return {
    items: [...rows.filter((row) => row.inHand), ...rows.filter((row) => !row.inHand)],
    nextCursor: null,
  }
}
