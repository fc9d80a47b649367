import { and, asc, desc, eq, gt, like, or } from 'drizzle-orm'
import type { Page } from '#shared/http/paging'
import type { Item, ItemDetail, ItemPatch, ItemRequest } from '#shared/kit/item-contract'
import { mayBecome } from '#shared/kit/item-lifecycle'
import type { HygieneState, ItemStatus } from '#shared/kit/vocabulary'
import { items, itemPhotos, kinds } from '../../db/schema/kit.ts'
import { loans } from '../../db/schema/loans.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { faultsOf } from './faults.ts'
import { addItemEvent } from './item-events.ts'
import { hygieneFilter, itemIdOf, itemRow, selectItems, type ItemReader } from './item-rows.ts'
import { poolChanged } from './pool-changed.ts'
import { containing } from './like.ts'

interface ItemQuery {
  kindId?: string | undefined
  hygiene?: HygieneState | undefined
  status?: ItemStatus | undefined
  q?: string | undefined
  limit: number
  cursor?: string | undefined
}

export function listItems(deps: Deps, user: ItemReader, query: ItemQuery): Page<Item> {
  const after = query.cursor ? String(decodeCursor(query.cursor, 1)[0]) : undefined
  const part = query.q && containing(query.q)
  const rows = selectItems(
    deps,
    deps.db,
    user,
    and(
      query.kindId === undefined ? undefined : eq(items.kindId, query.kindId),
      query.status && eq(items.status, query.status),
      query.hygiene && hygieneFilter(query.hygiene, deps.clock.now()),
      part ? or(like(items.tag, part), like(items.shelf, part), like(kinds.name, part)) : undefined,
      after === undefined ? undefined : gt(items.tag, after),
    ),
    query.limit + 1,
  )
  return pageFrom(rows, query.limit, (item) => [item.tag])
}

/** @throws AppError `not-found` */
export function readItem(deps: Deps, user: ItemReader, idOrTag: string, db: Db | Tx = deps.db): ItemDetail {
  const id = itemIdOf(db, idOrTag)
  const [item] = selectItems(deps, db, user, eq(items.id, id), 1)
  if (!item) throw notFound('That item')
  return { ...item, faults: faultsOf(db, id), photos: photosOf(db, id) }
}

const photosOf = (db: Db | Tx, itemId: string) =>
  db
    .select({ photo: itemPhotos, addedByName: members.name })
    .from(itemPhotos)
    .innerJoin(members, eq(members.id, itemPhotos.addedBy))
    .where(eq(itemPhotos.itemId, itemId))
    .orderBy(desc(itemPhotos.addedAt), asc(itemPhotos.id))
    .all()
    .map(({ photo, addedByName }) => ({ ...photo, addedByName }))

/**
 * Adds an item. Of a wild-only kind it is wild.
 * @throws AppError `invalid` when the tag is taken or the kind is not there
 */
export function addItem(deps: Deps, user: ItemReader, request: ItemRequest): ItemDetail {
  const id = newId()
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const kind = kindForItem(tx, request.kindId)
    refuseTakenTag(tx, request.tag)
    tx.insert(items)
      .values({ ...request, id, wild: kind.wildOnly || request.wild, createdAt: now, updatedAt: now })
      .run()
    addItemEvent(tx, {
      itemId: id,
      event: 'added',
      actorId: user.id,
      happenedAt: now,
      detail: { tag: request.tag },
    })
    poolChanged(tx, deps, kind.id)
    return readItem(deps, user, id, tx)
  })
}

/**
 * Changes an item, and writes each kind of change into its history.
 * @throws AppError `stale`, `wrong-state` for a status it cannot go to, `invalid` for a taken tag
 */
export function changeItem(
  deps: Deps,
  user: SignedIn,
  idOrTag: string,
  version: number,
  { reason, ...patch }: ItemPatch,
): ItemDetail {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const before = itemRow(tx, idOrTag)
    const kind = kindForItem(tx, patch.kindId ?? before.kindId)
    if (patch.tag !== undefined && patch.tag.toLowerCase() !== before.tag.toLowerCase())
      refuseTakenTag(tx, patch.tag)
    if (patch.status && !mayBecome(before.status, patch.status))
      throw new AppError('wrong-state', `An item that is ${before.status} cannot become ${patch.status}.`)
    if (kind.wildOnly && patch.wild === false)
      throw invalidField('wild', `Everything of the kind ${kind.name} is kept for wild cultures.`)
    const after = { ...before, ...patch, wild: kind.wildOnly || (patch.wild ?? before.wild) }
    const moves =
      after.status !== before.status || after.wild !== before.wild || after.kindId !== before.kindId
    if (moves) refuseWhileOut(tx, before)
    const changed = tx
      .update(items)
      .set({ ...patch, wild: after.wild, updatedAt: now, version: version + 1 })
      .where(and(eq(items.id, before.id), eq(items.version, version)))
      .run()
    if (changed.changes === 0)
      throw new AppError('stale', 'This item was changed elsewhere. Load it again, then make your change.')
    const event = { itemId: before.id, actorId: user.id, happenedAt: now }
    const why = { reason }
    if (after.status !== before.status)
      addItemEvent(tx, {
        ...event,
        event: 'status-changed',
        detail: { from: before.status, to: after.status, ...why },
      })
    if (after.wild !== before.wild)
      addItemEvent(tx, { ...event, event: after.wild ? 'became-wild' : 'no-longer-wild', detail: why })
    const fields = (['tag', 'kindId', 'shelf', 'note'] as const).filter(
      (name) => after[name] !== before[name],
    )
    if (fields.length > 0)
      addItemEvent(tx, {
        ...event,
        event: 'changed',
        detail: {
          fields: fields.join(', '),
          ...(fields.includes('tag') && { from: before.tag, to: after.tag }),
          ...why,
        },
      })
    if (moves) for (const kindId of new Set([before.kindId, after.kindId])) poolChanged(tx, deps, kindId)
    return readItem(deps, user, before.id, tx)
  })
}

function kindForItem(tx: Tx, kindId: string) {
  const kind = tx.select().from(kinds).where(eq(kinds.id, kindId)).get()
  if (!kind) throw invalidField('kindId', 'There is no such kind of kit.')
  return kind
}

/** What somebody has in their hands is taken back first: as it is, damaged or lost. */
function refuseWhileOut(tx: Tx, item: { id: string; tag: string }) {
  const out = tx
    .select({ id: loans.id })
    .from(loans)
    .where(and(eq(loans.itemId, item.id), eq(loans.status, 'out')))
    .get()
  if (out) throw new AppError('wrong-state', `${item.tag} is out on loan. Take it back first.`)
}

function refuseTakenTag(tx: Tx, tag: string) {
  if (tx.select({ id: items.id }).from(items).where(eq(items.tag, tag)).get())
    throw invalidField('tag', `${tag} is on another item already. Every tag is used once.`)
}
