import { and, asc, eq, gt, isNull, lte, or, sql, type SQL } from 'drizzle-orm'
import { alias } from 'drizzle-orm/sqlite-core'
import { calibrationDueOn } from '#shared/kit/calibration'
import { hygieneAt } from '#shared/kit/hygiene'
import type { Item } from '#shared/kit/item-contract'
import type { HygieneState } from '#shared/kit/vocabulary'
import { roleCovers, type Role } from '#shared/people/vocabulary'
import { dayAt, type Instant } from '#shared/time/instant'
import { loans } from '../../db/schema/loans.ts'
import { faults, items, kinds } from '../../db/schema/kit.ts'
import { members } from '../../db/schema/people.ts'
import type { Db, Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { notFound } from '../../errors.ts'

export type ItemRow = typeof items.$inferSelect

/** Who reads: stewards see whose loan an item is on. */
export interface ItemReader {
  id: string
  role?: Role
}

/**
 * The id of the item with this id or tag. Ids are 16 characters and tags at most 12, so one is never taken for the other.
 * @throws AppError `not-found`
 */
export function itemIdOf(db: Db | Tx, idOrTag: string): string {
  const row = db.select({ id: items.id }).from(items).where(isItem(idOrTag)).get()
  if (!row) throw notFound('That item')
  return row.id
}

/** @throws AppError `not-found` */
export function itemRow(db: Db | Tx, idOrTag: string): ItemRow {
  const row = db.select().from(items).where(isItem(idOrTag)).get()
  if (!row) throw notFound('That item')
  return row
}

const isItem = (idOrTag: string) => or(eq(items.id, idOrTag), eq(items.tag, idOrTag))

/** Sanitised items whose time is up are clean: the filter says what the reply says. */
export function hygieneFilter(state: HygieneState, now: Instant): SQL | undefined {
  if (state === 'dirty') return eq(items.hygiene, 'dirty')
  if (state === 'sanitised') return and(eq(items.hygiene, 'sanitised'), gt(items.sanitisedUntil, now))
  return or(eq(items.hygiene, 'clean'), and(eq(items.hygiene, 'sanitised'), lte(items.sanitisedUntil, now)))
}

/** Items with their kind and what is open against them, by tag; one statement however many. */
export function selectItems(
  deps: Deps,
  db: Db | Tx,
  reader: ItemReader,
  where: SQL | undefined,
  limit: number,
): Item[] {
  const borrower = alias(members, 'borrower')
  const rows = db
    .select({
      item: items,
      kindName: kinds.name,
      calibrationMonths: kinds.calibrationMonths,
      calibratedByName: members.name,
      openFaults: db.$count(faults, and(eq(faults.itemId, items.id), isNull(faults.resolvedAt))),
      loan: { id: loans.id, dueOn: loans.toOn, borrowerId: borrower.id, borrowerName: borrower.name },
      serviceable: sql<number>`exists (select 1 from serviceable_items s where s.id = ${items.id})`,
    })
    .from(items)
    .innerJoin(kinds, eq(kinds.id, items.kindId))
    .leftJoin(members, eq(members.id, items.calibratedBy))
    .leftJoin(loans, and(eq(loans.itemId, items.id), eq(loans.status, 'out')))
    .leftJoin(borrower, eq(borrower.id, loans.memberId))
    .where(where)
    .orderBy(asc(items.tag))
    .limit(limit)
    .all()
  const now = deps.clock.now()
  const maySeeAll = reader.role !== undefined && roleCovers(reader.role, 'steward')
  return rows.map(({ item, loan, serviceable, calibrationMonths, calibratedByName, ...more }) => ({
    ...item,
    ...more,
    serviceable: serviceable === 1,
    hygiene: hygieneAt(item, now),
    out:
      loan.id !== null && loan.dueOn !== null
        ? {
            dueOn: loan.dueOn,
            overdue: loan.dueOn < deps.clock.today(),
            loanId: maySeeAll || loan.borrowerId === reader.id ? loan.id : null,
            borrowerName: maySeeAll ? loan.borrowerName : null,
          }
        : null,
    calibration:
      item.calibrationOffsetSg === null || item.calibratedOn === null
        ? null
        : {
            offsetSg: item.calibrationOffsetSg,
            calibratedOn: item.calibratedOn,
            waterTemperatureC: item.calibrationTemperatureC,
            calibratedByName,
          },
    calibrationDueOn:
      calibrationDueOn(
        { calibratedOn: item.calibratedOn, addedOn: dayAt(item.createdAt, deps.clock.timeZone) },
        calibrationMonths,
      ) ?? null,
  }))
}
