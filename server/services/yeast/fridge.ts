import { and, eq, gt, isNull, or, sql, type SQL } from 'drizzle-orm'
import type { Packet } from '#shared/yeast/contract'
import { fromMilli } from '#shared/yeast/amount'
import { dateState } from '#shared/yeast/dates'
import type { LotReport } from '#shared/yeast/lot-evidence'
import { storageOn } from '#shared/yeast/reasons'
import type { LotFacts } from '#shared/yeast/vitality'
import type { CalendarDay } from '#shared/time/day'
import { dayAt, instantMs, type Instant } from '#shared/time/instant'
import type { Storage } from '#shared/brewing/vocabulary'
import { roleCovers } from '#shared/people/vocabulary'
import { members } from '../../db/schema/people.ts'
import { packets, packetStorage, pitches, pitchOutcomes, yeastLots } from '../../db/schema/yeast.ts'
import type { Db, Tx } from '../../db/open.ts'
import { notFound } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'

export type PacketRow = typeof packets.$inferSelect
export type LotRow = typeof yeastLots.$inferSelect
export type PacketWithStorage = PacketRow & { storage: { from: CalendarDay; storage: Storage }[] }

/** A packet with its lot, owner and places, as loaded. */
export interface Loaded {
  packet: PacketWithStorage
  lot: LotRow
  ownerName: string
}

/** What a member may see: shared packets and their own. Not even a steward sees another's personal one. */
export const visibleTo = (memberId: string): SQL | undefined =>
  or(eq(packets.shared, true), eq(packets.ownerId, memberId))

/** What can still be pitched. */
export const AT_HAND: SQL | undefined = and(isNull(packets.discardedAt), gt(packets.remainingMilli, 0))

/** Packets with lot, owner and storage history: two statements, however many there are. */
export function loadPackets(db: Db | Tx, where: SQL | undefined): Loaded[] {
  const rows = db
    .select({ packet: packets, lot: yeastLots, ownerName: members.name })
    .from(packets)
    .innerJoin(yeastLots, eq(yeastLots.id, packets.lotId))
    .innerJoin(members, eq(members.id, packets.ownerId))
    .where(where)
    .all()
  const stays = db
    .select({ packetId: packetStorage.packetId, from: packetStorage.from, storage: packetStorage.storage })
    .from(packetStorage)
    .innerJoin(packets, eq(packets.id, packetStorage.packetId))
    .where(where)
    .orderBy(packetStorage.packetId, packetStorage.from)
    .all()
  const byPacket = grouped(stays, ({ packetId }) => packetId)
  return rows.map(({ packet, lot, ownerName }) => ({
    packet: {
      ...packet,
      storage: (byPacket.get(packet.id) ?? []).map(({ from, storage }) => ({ from, storage })),
    },
    lot,
    ownerName,
  }))
}

/**
 * One packet this member may see.
 * @throws AppError `not-found` for another's personal packet, whatever the reader's role
 */
export function visiblePacket(db: Db | Tx, memberId: string, packetId: string): Loaded {
  const [found] = loadPackets(db, and(eq(packets.id, packetId), visibleTo(memberId)))
  if (!found) throw notFound('That packet')
  return found
}

function grouped<Row>(rows: readonly Row[], keyOf: (row: Row) => string): Map<string, Row[]> {
  const groups = new Map<string, Row[]>()
  for (const row of rows) {
    const group = groups.get(keyOf(row))
    if (group) group.push(row)
    else groups.set(keyOf(row), [row])
  }
  return groups
}

export interface LotHistory extends LotFacts {
  /** The same reports with what only screens show. */
  shown: (Pick<LotReport, 'outcome' | 'hoursToActivity' | 'pitchedOn' | 'setAside'> & { memberId: string })[]
}

/** What pitches of some lots did, by lot: one statement. The last outcome of each pitch counts. */
export function lotHistories(
  db: Db | Tx,
  lots: readonly LotRow[],
  timeZone: string,
): Map<string, LotHistory> {
  const wanted = JSON.stringify(lots.map(({ id }) => id))
  const rows = db
    .select({
      lotId: packets.lotId,
      form: packets.form,
      at: pitches.at,
      memberId: pitches.memberId,
      survival: pitches.survival,
      cellsPerMl: pitches.cellsPerMl,
      rehydrated: pitches.rehydrated,
      mustTemperatureC: pitches.mustTemperatureC,
      outcome: pitchOutcomes.outcome,
      hoursToActivity: pitchOutcomes.hoursToActivity,
      reportedAt: pitchOutcomes.reportedAt,
    })
    .from(packets)
    .innerJoin(pitches, eq(pitches.packetId, packets.id))
    .leftJoin(
      pitchOutcomes,
      and(
        eq(pitchOutcomes.pitchId, pitches.id),
        eq(
          pitchOutcomes.ordinal,
          sql`(select max(later.ordinal) from pitch_outcomes later where later.pitch_id = ${pitches.id})`,
        ),
      ),
    )
    .where(sql`${packets.lotId} in (select value from json_each(${wanted}))`)
    .orderBy(pitches.at)
    .all()
  const byLot = grouped(rows, ({ lotId }) => lotId)
  return new Map(lots.map((lot) => [lot.id, historyOf(lot, byLot.get(lot.id) ?? [], timeZone)]))
}

type HistoryRow = Omit<LotReport, 'outcome' | 'hoursUntilReport' | 'pitchedOn' | 'setAside'> & {
  at: Instant
  memberId: string
  outcome: LotReport['outcome'] | null
  reportedAt: Instant | null
}

function historyOf(lot: LotRow, rows: readonly HistoryRow[], timeZone: string): LotHistory {
  const shown: LotHistory['shown'] = []
  const reports: LotReport[] = []
  for (const { at, memberId, outcome, reportedAt, ...row } of rows) {
    if (!outcome || !reportedAt) continue
    const pitchedOn = dayAt(at, timeZone)
    const setAside = outcome === 'none' && lot.clearedAt !== null && reportedAt <= lot.clearedAt
    const hoursUntilReport = Math.max(0, (instantMs(reportedAt) - instantMs(at)) / 3_600_000)
    reports.push({ ...row, outcome, hoursUntilReport, pitchedOn, setAside })
    shown.push({ outcome, hoursToActivity: row.hoursToActivity, pitchedOn, setAside, memberId })
  }
  return { state: lot.state, note: lot.decisionNote, reports, pitches: rows.length, shown: shown.reverse() }
}

/** Whether a member may change a packet they see: its owner may, a steward may while it is shared. */
export const mayChange = (user: SignedIn, packet: PacketRow) =>
  packet.ownerId === user.id || (packet.shared && roleCovers(user.role, 'steward'))

/** A packet as its reader sees it. */
export function packetReply({ packet, lot, ownerName }: Loaded, user: SignedIn, today: CalendarDay): Packet {
  const { storage, initialMilli, remainingMilli, unit, ownerId, ...rest } = packet
  const inGrams = unit === 'g'
  const initial = fromMilli(initialMilli)
  const remaining = fromMilli(remainingMilli)
  return {
    ...rest,
    dateState: dateState(packet, today) ?? null,
    storage: storageOn(packet, today).storage,
    storageHistory: storage,
    initialGrams: inGrams ? initial : null,
    initialMl: inGrams ? null : initial,
    remainingGrams: inGrams ? remaining : null,
    remainingMl: inGrams ? null : remaining,
    lot: lotReply(lot),
    ownerName,
    mine: ownerId === user.id,
    editable: mayChange(user, packet),
  }
}

export const lotReply = (lot: LotRow) => ({
  id: lot.id,
  state: lot.state,
  note: lot.decisionNote,
  version: lot.version,
})
