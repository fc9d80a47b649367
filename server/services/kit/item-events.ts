import { and, desc, eq, lt } from 'drizzle-orm'
import { alias } from 'drizzle-orm/sqlite-core'
import type { Page } from '#shared/http/paging'
import type { ItemHistoryEntry } from '#shared/kit/item-contract'
import type { ItemEvent } from '#shared/kit/vocabulary'
import { roleCovers } from '#shared/people/vocabulary'
import type { Instant } from '#shared/time/instant'
import { itemEvents } from '../../db/schema/kit.ts'
import { members } from '../../db/schema/people.ts'
import type { Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { itemIdOf } from './item-rows.ts'

interface NewItemEvent {
  itemId: string
  event: ItemEvent
  /** Null when the house did it by itself. */
  actorId: string | null
  happenedAt: Instant
  aboutId?: string
  /** Whose loan it was; shown to stewards only. */
  borrowerId?: string
  /** What is undefined is left out. */
  detail?: Record<string, string | number | boolean | null | undefined>
}

/** Adds a line to an item's history; in the transaction of what it reports. */
export function addItemEvent(tx: Tx, { detail = {}, ...event }: NewItemEvent) {
  const said = Object.entries(detail).filter(([, value]) => value !== undefined)
  tx.insert(itemEvents)
    .values({ ...event, detail: Object.fromEntries(said) as Record<string, string> })
    .run()
}

/** An item's history, newest first. Who had it on loan is for stewards. */
export function readItemHistory(
  deps: Deps,
  user: SignedIn,
  idOrTag: string,
  query: { limit: number; cursor?: string | undefined },
): Page<ItemHistoryEntry> {
  const itemId = itemIdOf(deps.db, idOrTag)
  const before = query.cursor ? Number(decodeCursor(query.cursor, 1)[0]) : undefined
  const actor = alias(members, 'actor')
  const borrower = alias(members, 'borrower')
  const rows = deps.db
    .select({ entry: itemEvents, byName: actor.name, borrowerName: borrower.name })
    .from(itemEvents)
    .leftJoin(actor, eq(actor.id, itemEvents.actorId))
    .leftJoin(borrower, eq(borrower.id, itemEvents.borrowerId))
    .where(and(eq(itemEvents.itemId, itemId), before === undefined ? undefined : lt(itemEvents.id, before)))
    .orderBy(desc(itemEvents.id))
    .limit(query.limit + 1)
    .all()
  const mayKnow = user.status === 'active' && roleCovers(user.role, 'steward')
  const page = pageFrom(rows, query.limit, (row) => [row.entry.id])
  return {
    nextCursor: page.nextCursor,
    items: page.items.map(({ entry, byName, borrowerName }) => ({
      event: entry.event,
      at: entry.happenedAt,
      byName: entry.actorId === entry.borrowerId && !mayKnow ? null : byName,
      borrowerName: mayKnow ? borrowerName : null,
      aboutId: entry.event.startsWith('checked-') && !mayKnow ? null : entry.aboutId,
      detail: entry.detail,
    })),
  }
}
