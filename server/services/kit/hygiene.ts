import { eq, sql } from 'drizzle-orm'
import type { HygieneRequest, HygieneResult } from '#shared/kit/care-contract'
import { findAgent } from '#shared/kit/agents'
import { hygieneAt, hygieneWarnings, sanitisedUntil } from '#shared/kit/hygiene'
import { isKept } from '#shared/kit/item-lifecycle'
import { hygieneRecords, items, kinds } from '../../db/schema/kit.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import { newId } from '../../ids.ts'
import { addItemEvent } from './item-events.ts'
import { itemRow, type ItemReader } from './item-rows.ts'
import { readItem } from './items.ts'

/**
 * Records what state an item was put in, by whom, how and until when. What looks short is warned of, not refused: the
 * person at the sink knows the label.
 * @throws AppError `not-found`, `wrong-state` for a retired or lost item
 */
export function recordHygiene(
  deps: Deps,
  user: ItemReader,
  idOrTag: string,
  act: HygieneRequest,
  db: Db | Tx = deps.db,
): HygieneResult {
  const id = newId()
  const now = deps.clock.now()
  return write(db, (tx) => {
    const item = itemRow(tx, idOrTag)
    if (!isKept(item.status))
      throw new AppError('wrong-state', `${item.tag} is ${item.status}. Put it back in service first.`)
    const hours = tx
      .select({ hours: kinds.sanitisedHours })
      .from(kinds)
      .where(eq(kinds.id, item.kindId))
      .get()?.hours
    const until = act.state === 'sanitised' ? sanitisedUntil(now, hours ?? 24) : null
    const agent = act.agent === undefined ? undefined : (findAgent(act.agent)?.code ?? act.agent)
    tx.insert(hygieneRecords)
      .values({ ...act, agent, id, itemId: item.id, validUntil: until, recordedBy: user.id, recordedAt: now })
      .run()
    tx.update(items)
      .set({ hygiene: act.state, sanitisedUntil: until, updatedAt: now, version: sql`${items.version} + 1` })
      .where(eq(items.id, item.id))
      .run()
    addItemEvent(tx, {
      itemId: item.id,
      event: 'hygiene-recorded',
      actorId: user.id,
      happenedAt: now,
      aboutId: id,
      detail: { ...act, ...(agent !== undefined && { agent }), ...(until && { validUntil: until }) },
    })
    return { ...readItem(deps, user, item.id, tx), warnings: hygieneWarnings(act, hygieneAt(item, now)) }
  })
}
