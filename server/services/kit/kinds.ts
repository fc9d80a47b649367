import { and, asc, eq, gt, inArray, isNotNull, isNull, like, or, sql, type SQL } from 'drizzle-orm'
import type { Page } from '#shared/http/paging'
import { isInducted } from '#shared/kit/induction'
import type { Kind, KindPatch, KindRequest } from '#shared/kit/kind-contract'
import type { KindCategory } from '#shared/kit/vocabulary'
import { inductions, items, kinds } from '../../db/schema/kit.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { addItemEvent } from './item-events.ts'
import { poolChanged } from './pool-changed.ts'
import { containing } from './like.ts'

type Reader = Pick<SignedIn, 'id'>

interface KindQuery {
  category?: KindCategory | undefined
  q?: string | undefined
  retired?: boolean | undefined
  limit: number
  cursor?: string | undefined
}

export function listKinds(deps: Deps, user: Reader, query: KindQuery): Page<Kind> {
  const after = query.cursor ? String(decodeCursor(query.cursor, 1)[0]) : undefined
  const part = query.q && containing(query.q)
  const rows = selectKinds(
    deps,
    deps.db,
    user,
    and(
      query.retired ? isNotNull(kinds.retiredAt) : isNull(kinds.retiredAt),
      query.category && eq(kinds.category, query.category),
      part ? or(like(kinds.name, part), like(kinds.description, part)) : undefined,
      after === undefined ? undefined : gt(kinds.name, after),
    ),
    query.limit + 1,
  )
  return pageFrom(rows, query.limit, (kind) => [kind.name])
}

/** @throws AppError `not-found` */
export function readKind(deps: Deps, user: Reader, id: string, db: Db | Tx = deps.db): Kind {
  const [kind] = selectKinds(deps, db, user, eq(kinds.id, id), 1)
  if (!kind) throw notFound('That kind of kit')
  return kind
}

/** Kinds with their counts and the reader's induction; one statement however many. */
function selectKinds(deps: Deps, db: Db | Tx, user: Reader, where: SQL | undefined, limit: number): Kind[] {
  const today = deps.clock.today()
  return db
    .select({
      kind: kinds,
      total: db.$count(
        items,
        and(eq(items.kindId, kinds.id), inArray(items.status, ['in-service', 'repair'])),
      ),
      serviceable: sql<number>`(select count(*) from serviceable_items s
        where s.kind_id = ${kinds.id} and s.wild = ${kinds.wildOnly})`,
      induction: inductions,
    })
    .from(kinds)
    .leftJoin(inductions, and(eq(inductions.kindId, kinds.id), eq(inductions.memberId, user.id)))
    .where(where)
    .orderBy(asc(kinds.name))
    .limit(limit)
    .all()
    .map(({ kind, total, serviceable, induction }) => ({
      ...kind,
      retired: kind.retiredAt !== null,
      items: { total, serviceable },
      inducted: !kind.needsInduction || isInducted(induction ?? undefined, today),
      inductionExpiresOn: induction?.expiresOn ?? null,
    }))
}

/** What a kind starts from when nothing else is said. */
const USUAL = { turnaroundDays: 1, maxLoanDays: 28, maxAheadDays: 180, maxPerMember: 2 }

/** @throws AppError `invalid` when the name is taken */
export function addKind(deps: Deps, user: Reader, request: KindRequest): Kind {
  const id = newId()
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    refuseTakenName(tx, request.name)
    tx.insert(kinds)
      .values({ ...USUAL, ...request, ...settled({ ...request }), id, createdAt: now, updatedAt: now })
      .run()
    return readKind(deps, user, id, tx)
  })
}

/**
 * Changes a kind. Making it wild-only moves its items to the wild pool; the other way they stay where they are, one by one.
 * @throws AppError `stale`, `invalid` when the name is taken
 */
export function changeKind(
  deps: Deps,
  user: Reader,
  id: string,
  version: number,
  { retired, ...patch }: KindPatch,
): Kind {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const before = tx.select().from(kinds).where(eq(kinds.id, id)).get()
    if (!before) throw notFound('That kind of kit')
    if (patch.name && patch.name.toLowerCase() !== before.name.toLowerCase()) refuseTakenName(tx, patch.name)
    const changed = tx
      .update(kinds)
      .set({
        ...patch,
        ...settled({ ...before, ...patch }),
        ...(retired !== undefined && { retiredAt: retired ? (before.retiredAt ?? now) : null }),
        updatedAt: now,
        version: version + 1,
      })
      .where(and(eq(kinds.id, id), eq(kinds.version, version)))
      .run()
    if (changed.changes === 0)
      throw new AppError('stale', 'This kind was changed elsewhere. Load it again, then make your change.')
    if (patch.wildOnly && !before.wildOnly) {
      makeItemsWild(deps, tx, user, id)
      poolChanged(tx, deps, id)
    }
    return readKind(deps, user, id, tx)
  })
}

/** An induction that is not needed does not run out; what is not a hydrometer is not checked in water. */
function settled(kind: Partial<KindRequest>) {
  return {
    inductionMonths: kind.needsInduction ? (kind.inductionMonths ?? null) : null,
    calibrationMonths: kind.markedForTemperatureC == null ? null : (kind.calibrationMonths ?? null),
  }
}

function makeItemsWild(deps: Deps, tx: Tx, user: Reader, kindId: string) {
  const now = deps.clock.now()
  const turned = tx
    .update(items)
    .set({ wild: true, updatedAt: now, version: sql`${items.version} + 1` })
    .where(and(eq(items.kindId, kindId), eq(items.wild, false)))
    .returning({ id: items.id })
    .all()
  for (const { id } of turned)
    addItemEvent(tx, { itemId: id, event: 'became-wild', actorId: user.id, happenedAt: now })
}

function refuseTakenName(tx: Tx, name: string) {
  if (tx.select({ id: kinds.id }).from(kinds).where(eq(kinds.name, name)).get())
    throw invalidField('name', 'There is a kind of that name already.')
}
