import { and, desc, eq, isNull, lt, lte, sql, type SQL } from 'drizzle-orm'
import type { OutcomeRequest, Pitch, PitchRequest } from '#shared/yeast/contract'
import { amountText, fromMilli, toMilli } from '#shared/yeast/amount'
import { TOO_HOT_FOR_YEAST_C } from '#shared/yeast/judgement'
import { lotStanding } from '#shared/yeast/lot-evidence'
import { survivalOf } from '#shared/yeast/survival'
import { packetVitality } from '#shared/yeast/vitality'
import { CELLS_PER_GRAM } from '#shared/brewing/judgement'
import { isOver } from '#shared/batches/lifecycle'
import { addMinutes, dayAt, type Instant } from '#shared/time/instant'
import type { Page } from '#shared/http/paging'
import { batches } from '../../db/schema/batches.ts'
import { packets, pitches, pitchOutcomes } from '../../db/schema/yeast.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { ownBatch, type BatchRow } from '../batches/access.ts'
import { lotHistories, visiblePacket, type Loaded } from './fridge.ts'
import { settleLot } from './lots.ts'
import { tellOfFlag } from './notices.ts'
import { moveAmount } from './packets.ts'

/**
 * Yeast into a batch of one's own: takes it from the packet in the same transaction.
 * @throws AppError `not-found`, `forbidden`, `wrong-state`, `not-enough`, `invalid`
 */
export function pitchInto(deps: Deps, user: SignedIn, batchId: string, request: PitchRequest): Pitch {
  const now = deps.clock.now()
  const at = request.at ?? now
  if (at > addMinutes(now, 24 * 60)) throw invalidField('at', 'That is more than a day ahead.')
  return write(deps.db, (tx) => {
    const batch = ownBatch(tx, user.id, batchId)
    if (isOver(batch.status) || batch.status === 'bottled')
      throw new AppError('wrong-state', `This batch is ${batch.status}; there is nothing to ferment.`)
    const found = visiblePacket(tx, user.id, request.packetId)
    const milli = amountFor(found, request)
    const id = newId()
    const thought = beliefAt(deps, tx, found, batch, milli, at)
    tx.insert(pitches)
      .values({
        id,
        packetId: found.packet.id,
        batchId,
        memberId: user.id,
        at,
        unit: found.packet.unit,
        amountMilli: milli,
        mustTemperatureC: request.mustTemperatureC ?? null,
        rehydrated: request.rehydrated,
        ...thought,
        createdAt: now,
      })
      .run()
    moveAmount(deps, tx, user, {
      packetId: found.packet.id,
      reason: 'pitched',
      changeMilli: -milli,
      pitchId: id,
    })
    afterPitch(deps, tx, found, batch, { at, milli })
    return readPitchRow(tx, user, id)
  })
}

/** The amount in thousandths, in the packet's unit and no more than is left. */
function amountFor({ packet, lot }: Loaded, { grams, ml }: PitchRequest): number {
  if (packet.discardedAt) throw new AppError('wrong-state', 'That packet was thrown away. Choose another.')
  if (lot.state === 'withdrawn')
    throw new AppError('wrong-state', 'A steward withdrew this lot. Choose another packet.')
  const amount = packet.unit === 'g' ? grams : ml
  if (amount === undefined)
    throw invalidField(
      packet.unit === 'g' ? 'grams' : 'ml',
      `This packet is counted in ${packet.unit === 'g' ? 'grams' : 'millilitres'}.`,
    )
  const milli = toMilli(amount)
  if (milli > packet.remainingMilli) {
    const left = fromMilli(packet.remainingMilli)
    const field = packet.unit === 'g' ? 'remainingGrams' : 'remainingMl'
    throw new AppError(
      'not-enough',
      `There ${left > 0 ? `is ${amountText(left)} ${packet.unit === 'g' ? 'g' : 'mL'} left` : 'is nothing left'}. Take less, or a second packet.`,
      { body: { [field]: left } },
    )
  }
  return milli
}

/** What is thought of the packet as it goes in; kept, so that the report can be read against it. */
function beliefAt(deps: Deps, tx: Tx, found: Loaded, batch: BatchRow, milli: number, at: Instant) {
  const { packet, lot } = found
  const { timeZone } = deps.clock
  const on = dayAt(at, timeZone)
  if (packet.madeOn && on < packet.madeOn) throw invalidField('at', 'That is before the packet was made.')
  const history = lotHistories(tx, [lot], timeZone).get(lot.id)
  const reports = history?.reports ?? []
  const og = batch.og === null ? undefined : Math.min(1.2, Math.max(1, batch.og))
  const facts = { state: lot.state, note: null, reports, pitches: reports.length }
  const question = { on, timeZone, volumeLitres: batch.volumeLitres, og }
  const { pitch } = packetVitality(packet, fromMilli(milli), facts, question, lotStanding(reports, on))
  return {
    survival: survivalOf(packet, on).estimate,
    cellsPerMl: (fromMilli(milli) * CELLS_PER_GRAM[packet.form]) / (batch.volumeLitres * 1000),
    expectedHours: pitch.expectedHours.likely,
    outcomeWantedAt: addMinutes(at, Math.round(pitch.expectedHours.likely * 60)),
  }
}

/** What is left of a packet is open from now on (a jar of slurry never was sealed); a planned batch ferments from now on. */
function afterPitch(
  deps: Deps,
  tx: Tx,
  { packet }: Loaded,
  batch: BatchRow,
  { at, milli }: { at: Instant; milli: number },
) {
  const on = dayAt(at, deps.clock.timeZone)
  const now = deps.clock.now()
  const rest = packet.remainingMilli - milli
  const opens = packet.form !== 'slurry' && rest > 0 && (packet.openedOn === null || packet.openedOn > on)
  tx.update(packets)
    .set({ ...(opens && { openedOn: on }), updatedAt: now, version: packet.version + 1 })
    .where(eq(packets.id, packet.id))
    .run()
  const first = batch.pitchedAt === null || at < batch.pitchedAt
  if (!first && batch.status !== 'planned') return
  tx.update(batches)
    .set({
      ...(first && { pitchedAt: at }),
      ...(batch.status === 'planned' && { status: 'fermenting' as const }),
      updatedAt: now,
      version: batch.version + 1,
    })
    .where(eq(batches.id, batch.id))
    .run()
}

const LAST = sql`(select max(later.ordinal) from pitch_outcomes later where later.pitch_id = ${pitches.id})`

function pitchRows(db: Db | Tx, where: SQL | undefined, limit: number) {
  return db
    .select({
      pitch: pitches,
      strain: packets.strain,
      lotId: packets.lotId,
      batchName: batches.name,
      outcome: pitchOutcomes.outcome,
      hoursToActivity: pitchOutcomes.hoursToActivity,
      reportedAt: pitchOutcomes.reportedAt,
      ordinal: pitchOutcomes.ordinal,
    })
    .from(pitches)
    .innerJoin(packets, eq(packets.id, pitches.packetId))
    .innerJoin(batches, eq(batches.id, pitches.batchId))
    .leftJoin(pitchOutcomes, and(eq(pitchOutcomes.pitchId, pitches.id), eq(pitchOutcomes.ordinal, LAST)))
    .where(where)
    .orderBy(desc(pitches.at), desc(pitches.id))
    .limit(limit)
    .all()
}

type PitchRow = ReturnType<typeof pitchRows>[number]

/** @throws AppError `not-found` for a pitch of anyone else */
function ownPitch(db: Db | Tx, user: SignedIn, pitchId: string): PitchRow {
  const [row] = pitchRows(db, and(eq(pitches.id, pitchId), eq(pitches.memberId, user.id)), 1)
  if (!row) throw notFound('That pitch')
  return row
}

function pitchReply({ pitch, strain, batchName, outcome, hoursToActivity, reportedAt }: PitchRow): Pitch {
  const { unit, amountMilli, mustTemperatureC, ...rest } = pitch
  const amount = fromMilli(amountMilli)
  const hot = mustTemperatureC !== null && mustTemperatureC > TOO_HOT_FOR_YEAST_C
  return {
    ...rest,
    ...{ strain, batchName, outcome, hoursToActivity, reportedAt, mustTemperatureC },
    grams: unit === 'g' ? amount : null,
    ml: unit === 'ml' ? amount : null,
    cautions: hot
      ? [`Must over ${TOO_HOT_FOR_YEAST_C} °C can kill yeast before it wakes. Watch this one.`]
      : [],
  }
}

const readPitchRow = (db: Db | Tx, user: SignedIn, pitchId: string) => pitchReply(ownPitch(db, user, pitchId))

export const readPitch = (deps: Deps, user: SignedIn, pitchId: string) => readPitchRow(deps.db, user, pitchId)

interface PitchQuery {
  limit: number
  cursor?: string | undefined
  batchId?: string | undefined
  packetId?: string | undefined
  waiting?: boolean | undefined
}

/** A member's own pitches, newest first; `waiting`: those that should show by now and were not reported. */
export function listPitches(deps: Deps, user: SignedIn, query: PitchQuery): Page<Pitch> {
  const after = query.cursor ? (decodeCursor(query.cursor, 2) as [string, string]) : undefined
  const where = and(
    eq(pitches.memberId, user.id),
    query.batchId ? eq(pitches.batchId, query.batchId) : undefined,
    query.packetId ? eq(pitches.packetId, query.packetId) : undefined,
    query.waiting ? and(lte(pitches.outcomeWantedAt, deps.clock.now()), isNull(pitchOutcomes.id)) : undefined,
    after && lt(sql`(${pitches.at}, ${pitches.id})`, sql`(${after[0]}, ${after[1]})`),
  )
  const rows = pitchRows(deps.db, where, query.limit + 1)
  const page = pageFrom(rows, query.limit, ({ pitch }) => [pitch.at, pitch.id])
  return { ...page, items: page.items.map(pitchReply) }
}

/** What became of a pitch: kept beside what was said before, and counted for the whole lot at once. */
export function reportOutcome(deps: Deps, user: SignedIn, pitchId: string, report: OutcomeRequest): Pitch {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const row = ownPitch(tx, user, pitchId)
    if (row.pitch.at > now)
      throw new AppError('wrong-state', 'It is not in yet. Report once it has had its time.')
    const hoursToActivity = report.hoursToActivity ?? null
    if (row.outcome === report.outcome && row.hoursToActivity === hoursToActivity) return pitchReply(row)
    tx.insert(pitchOutcomes)
      .values({
        id: newId(),
        pitchId,
        ordinal: (row.ordinal ?? 0) + 1,
        outcome: report.outcome,
        hoursToActivity,
        reportedBy: user.id,
        reportedAt: now,
      })
      .run()
    if (settleLot(deps, tx, row.lotId)) tellOfFlag(deps, tx, row.lotId)
    return readPitchRow(tx, user, pitchId)
  })
}
