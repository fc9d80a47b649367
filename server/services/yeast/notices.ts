import { and, eq, exists, gte, inArray, lte, not, sql } from 'drizzle-orm'
import { nearDateOwed, outcomeAsked } from '#shared/yeast/due'
import { FAILURES_TO_FLAG, NEAR_DAYS } from '#shared/yeast/judgement'
import { addDays, type CalendarDay } from '#shared/time/day'
import { addMinutes, dayAt, instantOn, type Instant } from '#shared/time/instant'
import { batches } from '../../db/schema/batches.ts'
import { members } from '../../db/schema/people.ts'
import { packets, pitches, pitchOutcomes, yeastLots } from '../../db/schema/yeast.ts'
import type { Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { queueNotice } from '../notices.ts'
import { AT_HAND } from './fridge.ts'

/** Queues what the fridge owes on a reminder day: packets near their date, pitches to report. Gives back the letters' ids. */
export const queueYeastNotices = (tx: Tx, deps: Deps, on: CalendarDay): string[] => [
  ...queueNearDates(tx, deps, on),
  ...queueOutcomesWanted(tx, deps, on),
]

function queueNearDates(tx: Tx, deps: Deps, on: CalendarDay): string[] {
  const furthest = addDays(on, Math.max(...Object.values(NEAR_DAYS)))
  return tx
    .select({
      id: packets.id,
      ownerId: packets.ownerId,
      strain: packets.strain,
      form: packets.form,
      bestBefore: packets.bestBefore,
      createdAt: packets.createdAt,
    })
    .from(packets)
    .where(and(AT_HAND, gte(packets.bestBefore, on), lte(packets.bestBefore, furthest)))
    .all()
    .flatMap(({ id, ownerId, strain, form, bestBefore, createdAt }) => {
      const zone = deps.clock.timeZone
      if (!bestBefore || !nearDateOwed({ form, bestBefore, addedOn: dayAt(createdAt, zone) }, on)) return []
      const notice = {
        kind: 'packet-near-best-before' as const,
        memberId: ownerId,
        about: { type: 'packet', id, on: bestBefore } as const,
        dedupeKey: `packet-near-best-before:${id}:${bestBefore}`,
        usefulUntil: instantOn(addDays(bestBefore, 1), 0, 0, zone),
        facts: { packetId: id, strain, bestBefore },
      }
      return queueNotice(tx, deps, notice) ?? []
    })
}

const unreported = (tx: Tx) =>
  not(
    exists(
      tx
        .select({ one: sql`1` })
        .from(pitchOutcomes)
        .where(eq(pitchOutcomes.pitchId, pitches.id)),
    ),
  )

function queueOutcomesWanted(tx: Tx, deps: Deps, on: CalendarDay): string[] {
  const zone = deps.clock.timeZone
  const now = deps.clock.now()
  const earliest: Instant = addMinutes(now, -14 * 24 * 60)
  return tx
    .select({ pitch: pitches, strain: packets.strain, batchName: batches.name })
    .from(pitches)
    .innerJoin(packets, eq(packets.id, pitches.packetId))
    .innerJoin(batches, eq(batches.id, pitches.batchId))
    .where(and(gte(pitches.outcomeWantedAt, earliest), lte(pitches.outcomeWantedAt, now), unreported(tx)))
    .all()
    .flatMap(({ pitch, strain, batchName }) => {
      if (!outcomeAsked(pitch.outcomeWantedAt, on, zone)) return []
      const notice = {
        kind: 'packet-outcome-wanted' as const,
        memberId: pitch.memberId,
        about: { type: 'pitch', id: pitch.id } as const,
        dedupeKey: `packet-outcome-wanted:${pitch.id}`,
        facts: { pitchId: pitch.id, strain, batchName, pitchedOn: dayAt(pitch.at, zone) },
      }
      return queueNotice(tx, deps, notice) ?? []
    })
}

/** Why a question about a pitch need not be sent any more. */
export function pitchAnswered(tx: Tx, pitchId: string): boolean {
  const row = tx
    .select({ id: pitchOutcomes.id })
    .from(pitchOutcomes)
    .where(eq(pitchOutcomes.pitchId, pitchId))
    .limit(1)
    .get()
  return row !== undefined
}

/** Tells stewards, and whoever has a packet of it, that a lot was flagged. */
export function tellOfFlag(deps: Deps, tx: Tx, lotId: string) {
  const lot = tx.select().from(yeastLots).where(eq(yeastLots.id, lotId)).get()
  if (!lot) return
  const here = tx
    .select({ id: packets.id, ownerId: packets.ownerId, shared: packets.shared })
    .from(packets)
    .where(and(eq(packets.lotId, lotId), AT_HAND))
    .orderBy(packets.createdAt, packets.id)
    .all()
  const stewards = tx
    .select({ id: members.id })
    .from(members)
    .where(and(inArray(members.role, ['steward', 'admin']), eq(members.status, 'active')))
    .all()
  const shared = here.find((packet) => packet.shared)
  const told = new Map<string, { packetId?: string; yours: boolean }>()
  for (const { id } of stewards) told.set(id, { ...(shared && { packetId: shared.id }), yours: false })
  for (const { id, ownerId } of here) told.set(ownerId, { packetId: id, yours: true })
  for (const [memberId, facts] of told)
    queueNotice(tx, deps, {
      kind: 'packet-lot-flagged',
      memberId,
      dedupeKey: `packet-lot-flagged:${lotId}:${lot.version}:${memberId}`,
      ...(facts.packetId && { about: { type: 'packet', id: facts.packetId } as const }),
      facts: { ...facts, strain: lot.strain, lotCode: lot.lotCode ?? undefined, failures: FAILURES_TO_FLAG },
    })
}
