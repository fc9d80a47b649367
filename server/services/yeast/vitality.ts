import { and, eq, gt, isNotNull, lte, or, sql } from 'drizzle-orm'
import type { Alternative, FridgePacket, Strain, Vitality } from '#shared/yeast/contract'
import { fromMilli } from '#shared/yeast/amount'
import { dateState } from '#shared/yeast/dates'
import { alternativesTo, byLikelihood, likelihoodRank } from '#shared/yeast/ranking'
import { lotStanding, type LotStanding } from '#shared/yeast/lot-evidence'
import { packetVitality, type Question } from '#shared/yeast/vitality'
import type { DateState, PacketState } from '#shared/yeast/vocabulary'
import type { DrinkUse, YeastForm } from '#shared/brewing/vocabulary'
import { addDays, type CalendarDay } from '#shared/time/day'
import type { Page } from '#shared/http/paging'
import { packets } from '../../db/schema/yeast.ts'
import type { Db, Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { invalidField } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import {
  AT_HAND,
  loadPackets,
  lotHistories,
  packetReply,
  visiblePacket,
  visibleTo,
  type Loaded,
  type LotHistory,
} from './fridge.ts'

const NOTHING: LotHistory = { state: 'sound', note: null, reports: [], pitches: 0, shown: [] }

/** Asks the rule about many packets at once; each lot is worked out once. */
function judge(db: Db | Tx, loaded: readonly Loaded[], question: Question) {
  const lots = [...new Map(loaded.map(({ lot }) => [lot.id, lot])).values()]
  const histories = lotHistories(db, lots, question.timeZone)
  const standings = new Map<string, LotStanding>()
  for (const [id, { reports }] of histories) standings.set(id, lotStanding(reports, question.on))
  return loaded.map((one) => {
    const { packet, lot } = one
    const history = histories.get(lot.id) ?? NOTHING
    const standing = standings.get(lot.id)
    const answer = packetVitality(packet, fromMilli(packet.remainingMilli), history, question, standing)
    return { ...one, id: packet.id, use: packet.use, history, ...answer }
  })
}

type Judged = ReturnType<typeof judge>[number]

interface ListQuery {
  limit: number
  cursor?: string | undefined
  use?: DrinkUse | undefined
  form?: YeastForm | undefined
  mine?: boolean | undefined
  flagged?: boolean | undefined
  date?: DateState | undefined
  state: PacketState
}

/** The fridge, likeliest to start first. The order is worked out, not stored, so the page is cut here. */
export function listPackets(deps: Deps, user: SignedIn, query: ListQuery): Page<FridgePacket> {
  const today = deps.clock.today()
  const gone = or(isNotNull(packets.discardedAt), lte(packets.remainingMilli, 0))
  const loaded = loadPackets(
    deps.db,
    and(
      query.mine ? eq(packets.ownerId, user.id) : visibleTo(user.id),
      query.state === 'at-hand' ? AT_HAND : query.state === 'gone' ? gone : undefined,
      query.use && eq(packets.use, query.use),
      query.form && eq(packets.form, query.form),
      // Written on the packet's own column, so that it holds without the join too.
      query.flagged
        ? sql`${packets.lotId} in (select id from yeast_lots where state in ('flagged', 'withdrawn'))`
        : undefined,
    ),
  ).filter(({ packet }) => !query.date || dateState(packet, today) === query.date)
  const judged = judge(deps.db, loaded, { on: today, timeZone: deps.clock.timeZone }).sort(byLikelihood)
  const page = pageFrom(afterCursor(judged, query.cursor), query.limit, (row) => [
    likelihoodRank(row),
    row.id,
  ])
  return { ...page, items: page.items.map((row) => fridgeReply(row, user, today)) }
}

function afterCursor(judged: Judged[], cursor: string | undefined): Judged[] {
  if (!cursor) return judged
  const [rank, id] = decodeCursor(cursor, 2) as [number, string]
  return judged.filter((row) => {
    const own = likelihoodRank(row)
    return own < rank || (own === rank && row.id > id)
  })
}

const fridgeReply = (row: Judged, user: SignedIn, today: CalendarDay): FridgePacket => ({
  ...packetReply(row, user, today),
  viability: row.viability,
  verdict: row.verdict,
  reason: row.reason,
})

const FURTHEST_DAYS = 3652

interface VitalityQuery {
  on?: CalendarDay | undefined
  volumeLitres?: number | undefined
  og?: number | undefined
}

/** The answer for one packet: will it start, how much, what the lot did, and what else would serve. */
export function packetAnswer(deps: Deps, user: SignedIn, packetId: string, query: VitalityQuery): Vitality {
  const found = visiblePacket(deps.db, user.id, packetId)
  const { packet } = found
  const on = query.on ?? deps.clock.today()
  if (packet.madeOn && on < packet.madeOn) throw invalidField('on', 'That is before the packet was made.')
  if (on > addDays(deps.clock.today(), FURTHEST_DAYS))
    throw invalidField('on', 'Ask about the next ten years.')
  // One made after the asked day is no alternative then.
  const others = loadPackets(deps.db, and(visibleTo(user.id), AT_HAND)).filter(
    (other) => other.packet.id !== packetId && !(other.packet.madeOn && other.packet.madeOn > on),
  )
  const question = { on, timeZone: deps.clock.timeZone, ...query }
  const [answer, ...rest] = judge(deps.db, [found, ...others], { ...question, on })
  if (!answer) throw new Error('a packet that was found was not judged')
  return {
    on,
    viability: answer.viability,
    verdict: answer.verdict,
    reason: answer.reason,
    reasons: answer.reasons,
    pitch: answer.pitch,
    proving: answer.proving,
    evidence: { ...answer.evidence, reports: reportsOf(answer.history, user.id) },
    assumed: answer.assumed,
    alternatives: alternativesTo(answer, rest).map(alternativeReply),
  }
}

const reportsOf = (history: LotHistory, memberId: string) =>
  history.shown.slice(0, 50).map(({ memberId: by, ...report }) => ({ ...report, mine: by === memberId }))

const alternativeReply = ({ packet, verdict, viability, reason, pitch }: Judged): Alternative => ({
  id: packet.id,
  strain: packet.strain,
  form: packet.form,
  use: packet.use,
  place: packet.place,
  remaining: fromMilli(packet.remainingMilli),
  unit: packet.unit,
  verdict,
  viability,
  reason,
  grams: pitch.grams,
})

/** The newest packet of each strain and form that was ever here, by name: what a new one is copied from. */
export function listStrains(
  deps: Deps,
  user: SignedIn,
  query: { limit: number; cursor?: string | undefined },
): Page<Strain> {
  const after = query.cursor ? (decodeCursor(query.cursor, 2) as [string, string]) : undefined
  const key = sql<string>`lower(${packets.strain})`
  const storage = sql<Strain['storage']>`(select s.storage from packet_storage s
    where s.packet_id = ${packets.id} order by s.from_on desc limit 1)`
  const rows = deps.db
    .select({
      packetId: packets.id,
      strain: packets.strain,
      form: packets.form,
      use: packets.use,
      unit: packets.unit,
      initialMilli: packets.initialMilli,
      storage,
      lotCode: packets.lotCode,
      bestBefore: packets.bestBefore,
      shared: packets.shared,
      key,
      // SQLite takes the other columns from the row of this maximum.
      newest: sql<string>`max(${packets.createdAt})`,
    })
    .from(packets)
    .where(
      and(visibleTo(user.id), after && gt(sql`(${key}, ${packets.form})`, sql`(${after[0]}, ${after[1]})`)),
    )
    .groupBy(key, packets.form)
    .orderBy(key, packets.form)
    .limit(query.limit + 1)
    .all()
  const page = pageFrom(rows, query.limit, (row) => [row.key, row.form])
  return {
    ...page,
    items: page.items.map(({ initialMilli, ...row }) => ({ ...row, initial: fromMilli(initialMilli) })),
  }
}
