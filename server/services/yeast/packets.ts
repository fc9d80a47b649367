import { and, eq } from 'drizzle-orm'
import type { Packet, PacketCopy, PacketPatch, PacketRequest } from '#shared/yeast/contract'
import { toMilli } from '#shared/yeast/amount'
import { dateFaults } from '#shared/yeast/dates'
import { lotKey } from '#shared/yeast/lot-key'
import type { PacketMove } from '#shared/yeast/vocabulary'
import type { CalendarDay } from '#shared/time/day'
import { packetMoves, packets, packetStorage, yeastLots } from '../../db/schema/yeast.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { mayChange, packetReply, visiblePacket, type Loaded } from './fridge.ts'
import { settleLot } from './lots.ts'

export const readPacket = (deps: Deps, user: SignedIn, packetId: string): Packet =>
  packetReply(visiblePacket(deps.db, user.id, packetId), user, deps.clock.today())

/** Puts a packet in the fridge. */
export function addPacket(deps: Deps, user: SignedIn, request: PacketRequest): Packet {
  const { storage, initialGrams, initialMl, remainingGrams, remainingMl, ...facts } = request
  const initial = initialGrams ?? initialMl ?? 0
  const added = {
    ...facts,
    lotCode: facts.lotCode ?? null,
    madeOn: facts.madeOn ?? null,
    bestBefore: facts.bestBefore ?? null,
    openedOn: facts.openedOn ?? null,
    place: facts.place ?? null,
    unit: initialGrams === undefined ? ('ml' as const) : ('g' as const),
    initialMilli: toMilli(initial),
    leftMilli: toMilli(remainingGrams ?? remainingMl ?? initial),
    storage,
    copiedFromId: null,
  }
  return write(deps.db, (tx) => insertPacket(deps, tx, user, added))
}

/** A fresh packet like one that was here before: full and sealed, with its own dates. */
export function copyPacket(deps: Deps, user: SignedIn, packetId: string, request: PacketCopy): Packet {
  return write(deps.db, (tx) => {
    const { packet } = visiblePacket(tx, user.id, packetId)
    const { strain, form, use, unit, initialMilli, place, shared } = packet
    const last = packet.storage.at(-1)?.storage ?? 'fridge'
    return insertPacket(deps, tx, user, {
      ...{ strain, form, use, unit, initialMilli, leftMilli: initialMilli, place, note: '', openedOn: null },
      lotCode: request.lotCode ?? null,
      madeOn: request.madeOn ?? null,
      bestBefore: request.bestBefore ?? null,
      shared: request.shared ?? shared,
      storage: request.storage ?? last,
      copiedFromId: packet.id,
    })
  })
}

type NewPacket = Pick<
  Loaded['packet'],
  'strain' | 'form' | 'use' | 'lotCode' | 'madeOn' | 'bestBefore' | 'openedOn' | 'unit' | 'initialMilli'
> &
  Pick<Loaded['packet'], 'shared' | 'place' | 'note' | 'copiedFromId'> & {
    leftMilli: number
    storage: Loaded['packet']['storage'][number]['storage']
  }

function insertPacket(deps: Deps, tx: Tx, user: SignedIn, added: NewPacket): Packet {
  const { leftMilli, storage, ...facts } = added
  const today = deps.clock.today()
  const now = deps.clock.now()
  refuseDates(facts, today)
  const id = newId()
  const lotId = lotFor(deps, tx, id, facts)
  const stamps = { createdAt: now, updatedAt: now }
  tx.insert(packets)
    .values({ ...facts, id, lotId, ownerId: user.id, remainingMilli: 0, ...stamps })
    .run()
  tx.insert(packetStorage)
    .values({ packetId: id, from: facts.madeOn ?? today, storage, recordedBy: user.id, createdAt: now })
    .run()
  moveAmount(deps, tx, user, { packetId: id, reason: 'added', changeMilli: leftMilli })
  return packetReply(visiblePacket(tx, user.id, id), user, today)
}

/** The lot these facts belong to; made when they are the first of it. */
function lotFor(
  deps: Deps,
  tx: Tx,
  packetId: string,
  facts: Pick<NewPacket, 'strain' | 'form' | 'lotCode'>,
): string {
  const { strain, form, lotCode } = facts
  const key = lotKey(facts) ?? `packet:${packetId}`
  const known = tx.select({ id: yeastLots.id }).from(yeastLots).where(eq(yeastLots.lotKey, key)).get()
  if (known) return known.id
  const id = newId()
  const now = deps.clock.now()
  tx.insert(yeastLots)
    .values({ id, lotKey: key, strain, form, lotCode, createdAt: now, updatedAt: now })
    .run()
  return id
}

function refuseDates(facts: Parameters<typeof dateFaults>[0], today: CalendarDay) {
  const errors = dateFaults(facts, today)
  if (errors.length > 0)
    throw new AppError('invalid', errors[0]?.message ?? 'Those days do not agree.', { errors })
}

interface Move {
  packetId: string
  reason: PacketMove
  changeMilli: number
  pitchId?: string
  note?: string
}

/** Adds a move; what is left follows it. The database refuses one below nothing. */
export function moveAmount(deps: Deps, tx: Tx, user: SignedIn, move: Move) {
  tx.insert(packetMoves)
    .values({ id: newId(), memberId: user.id, createdAt: deps.clock.now(), ...move })
    .run()
}

/**
 * A packet this member may change.
 * @throws AppError `not-found`, `forbidden` for another's shared one
 */
export function changeablePacket(tx: Deps['db'] | Tx, user: SignedIn, packetId: string): Loaded {
  const loaded = visiblePacket(tx, user.id, packetId)
  if (!mayChange(user, loaded.packet))
    throw new AppError('forbidden', `This packet is ${loaded.ownerName}’s. Ask them, or a steward.`)
  return loaded
}

/**
 * Changes a packet. A new place is added to its history; a new amount is a recount.
 * @throws AppError `not-found`, `forbidden`, `invalid`, `stale`
 */
export function changePacket(
  deps: Deps,
  user: SignedIn,
  packetId: string,
  version: number,
  patch: PacketPatch,
): Packet {
  const { storage, movedOn, remainingGrams, remainingMl, ...given } = patch
  const today = deps.clock.today()
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const { packet } = changeablePacket(tx, user, packetId)
    const { storage: _history, ...before } = packet
    const after = { ...before, ...given }
    refuseDates(after, today)
    if (patch.shared === false && packet.ownerId !== user.id)
      throw new AppError('forbidden', 'Only its owner can make a packet personal.')
    const lotId = lotFor(deps, tx, packetId, after)
    const changed = tx
      .update(packets)
      .set({ ...given, lotId, updatedAt: now, version: version + 1 })
      .where(and(eq(packets.id, packetId), eq(packets.version, version)))
      .run()
    if (changed.changes === 0)
      throw new AppError('stale', 'This packet was changed elsewhere. Load it again, then make your change.')
    if (storage) recordPlace(deps, tx, user, packet, { storage, from: movedOn ?? today })
    else if (movedOn) throw invalidField('storage', 'Say where it was moved to.')
    recount(deps, tx, user, packet, { remainingGrams, remainingMl })
    if (lotId !== packet.lotId) for (const lot of [packet.lotId, lotId]) settleLot(deps, tx, lot)
    return packetReply(visiblePacket(tx, user.id, packetId), user, today)
  })
}

type Place = Loaded['packet']['storage'][number]

/** A move counts from its day; a second one on the same day corrects the first, and staying put is no move. */
function recordPlace(deps: Deps, tx: Tx, user: SignedIn, packet: Loaded['packet'], place: Place) {
  if (place.from > deps.clock.today()) throw invalidField('movedOn', 'It cannot have been moved after today.')
  const first = packet.storage[0]
  if (packet.madeOn && place.from < packet.madeOn)
    throw invalidField('movedOn', 'It was moved before it was made.')
  const before = packet.storage.findLast(({ from }) => from <= place.from) ?? first
  if (before?.storage === place.storage) return
  tx.insert(packetStorage)
    .values({ packetId: packet.id, ...place, recordedBy: user.id, createdAt: deps.clock.now() })
    .onConflictDoUpdate({
      target: [packetStorage.packetId, packetStorage.from],
      set: { storage: place.storage, recordedBy: user.id, createdAt: deps.clock.now() },
    })
    .run()
}

function recount(
  deps: Deps,
  tx: Tx,
  user: SignedIn,
  packet: Loaded['packet'],
  { remainingGrams, remainingMl }: Pick<PacketPatch, 'remainingGrams' | 'remainingMl'>,
) {
  const wrong = packet.unit === 'g' ? remainingMl : remainingGrams
  if (wrong !== undefined)
    throw invalidField(
      packet.unit === 'g' ? 'remainingMl' : 'remainingGrams',
      `This packet is counted in ${packet.unit === 'g' ? 'grams' : 'millilitres'}.`,
    )
  const left = remainingGrams ?? remainingMl
  if (left === undefined) return
  const milli = toMilli(left)
  if (milli > packet.initialMilli)
    throw invalidField(
      packet.unit === 'g' ? 'remainingGrams' : 'remainingMl',
      'That is more than was in it. Add a second packet instead.',
    )
  const changeMilli = milli - packet.remainingMilli
  if (changeMilli !== 0) moveAmount(deps, tx, user, { packetId: packet.id, reason: 'recounted', changeMilli })
}

/** Throws away what is left of a packet. */
export function discardPacket(deps: Deps, user: SignedIn, packetId: string, note = ''): Packet {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const { packet } = changeablePacket(tx, user, packetId)
    if (packet.discardedAt) throw new AppError('wrong-state', 'It is thrown away already.')
    tx.update(packets)
      .set({ discardedAt: now, updatedAt: now, version: packet.version + 1 })
      .where(eq(packets.id, packetId))
      .run()
    if (packet.remainingMilli > 0) {
      const changeMilli = -packet.remainingMilli
      moveAmount(deps, tx, user, { packetId, reason: 'thrown-away', changeMilli, note })
    }
    return packetReply(visiblePacket(tx, user.id, packetId), user, deps.clock.today())
  })
}
