import { asc, desc, eq, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/sqlite-core'
import type { Fault, FaultReport } from '#shared/kit/fault-contract'
import { faults } from '../../db/schema/kit.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, notFound } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { addItemEvent } from './item-events.ts'
import { itemRow } from './item-rows.ts'
import { poolChanged } from './pool-changed.ts'

const reporter = alias(members, 'reporter')
const resolver = alias(members, 'resolver')

const selectFaults = (db: Db | Tx) =>
  db
    .select({ fault: faults, reportedByName: reporter.name, resolvedByName: resolver.name })
    .from(faults)
    .innerJoin(reporter, eq(reporter.id, faults.reportedBy))
    .leftJoin(resolver, eq(resolver.id, faults.resolvedBy))

const asReply = ({ fault, ...names }: ReturnType<ReturnType<typeof selectFaults>['all']>[number]): Fault => ({
  ...fault,
  ...names,
})

/** An item's faults: open ones first, then the newest. */
export const faultsOf = (db: Db | Tx, itemId: string): Fault[] =>
  selectFaults(db)
    .where(eq(faults.itemId, itemId))
    .orderBy(asc(sql`${faults.resolvedAt} is not null`), desc(faults.reportedAt), asc(faults.id))
    .limit(50)
    .all()
    .map(asReply)

function readFault(db: Db | Tx, id: string): Fault {
  const row = selectFaults(db).where(eq(faults.id, id)).get()
  if (!row) throw notFound('That fault')
  return asReply(row)
}

/** @throws AppError `not-found`, or `wrong-state` for an item that is gone */
export function reportFault(
  deps: Deps,
  user: Pick<SignedIn, 'id'>,
  idOrTag: string,
  report: FaultReport,
  db: Db | Tx = deps.db,
): Fault {
  const id = newId()
  const now = deps.clock.now()
  return write(db, (tx) => {
    const item = itemRow(tx, idOrTag)
    if (item.status === 'retired')
      throw new AppError('wrong-state', `${item.tag} has been retired; there is nothing left to mend.`)
    const severity = report.severity ?? (report.blocking ? 'major' : 'minor')
    tx.insert(faults)
      .values({ ...report, severity, id, itemId: item.id, reportedBy: user.id, reportedAt: now })
      .run()
    addItemEvent(tx, {
      itemId: item.id,
      event: 'fault-reported',
      actorId: user.id,
      happenedAt: now,
      aboutId: id,
      detail: { summary: report.summary, blocking: report.blocking, severity },
    })
    if (report.blocking) poolChanged(tx, deps, item.kindId)
    return readFault(tx, id)
  })
}

/** @throws AppError `not-found`, `wrong-state` when it is mended already */
export function resolveFault(deps: Deps, user: SignedIn, faultId: string, note: string | undefined): Fault {
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const fault = readFault(tx, faultId)
    if (fault.resolvedAt !== null)
      throw new AppError('wrong-state', `${fault.resolvedByName ?? 'Someone'} has settled that already.`)
    tx.update(faults)
      .set({ resolvedAt: now, resolvedBy: user.id, note: note ?? null })
      .where(eq(faults.id, faultId))
      .run()
    addItemEvent(tx, {
      itemId: fault.itemId,
      event: 'fault-resolved',
      actorId: user.id,
      happenedAt: now,
      aboutId: faultId,
      detail: { summary: fault.summary, ...(note !== undefined && { note }) },
    })
    if (fault.blocking) poolChanged(tx, deps, itemRow(tx, fault.itemId).kindId)
    return readFault(tx, faultId)
  })
}
