import { blocksUntil, type Hold, spareByDay } from '#shared/loans/availability'
import { type Desk, DESK_ROWS_MAX } from '#shared/loans/desk-contract'
import { collectBy, daysLate } from '#shared/loans/lateness'
import { delayedBy } from '#shared/loans/risk'
import { suggestItems } from '#shared/loans/suggestion'
import { addDays, type CalendarDay, earlierDay, laterDay } from '#shared/time/day'
import { prepared } from '../db/prepared.ts'
import type { Deps } from '../deps.ts'
import { expiringLots, lowStock } from './larder/low-stock.ts'
import {
  DESK_ITEMS,
  DESK_LOANS,
  DESK_POOLS,
  DESK_WAITING,
  type DeskItemRow,
  type DeskLoanRow,
  type DeskPoolRow,
} from './desk-queries.ts'
import { poolKey } from './loans/shelf.ts'

type Rows<K extends keyof Desk> = Desk[K] extends (infer Row)[] ? Row : never

/** The steward's queue: four statements, however much there is to do. */
export function readDesk(deps: Deps): Desk {
  const today = deps.clock.today()
  const all = prepared<object, DeskLoanRow>(deps.db, DESK_LOANS).all({ today })
  const items = prepared<object, DeskItemRow>(deps.db, DESK_ITEMS).all({ today })
  const pools = readPools(deps)
  const due = all.filter(({ status, to }) => status === 'out' && to <= today)
  return {
    today,
    approvals: cut(approvals(all, pools, today)),
    collections: cut(collections(deps, all, items, today)),
    returns: cut(due.filter(({ to }) => to === today).map((row) => asDeskLoan(row, today))),
    overdue: cut(
      due
        .filter(({ to }) => to < today)
        .sort(byDue)
        .map((row) => asDeskLoan(row, today)),
    ),
    atRisk: cut(
      all.flatMap((row) =>
        row.atRisk === 1 && row.reason ? [{ ...asDeskLoan(row, today), reason: row.reason }] : [],
      ),
    ),
    washing: cut(washing(deps, items, today)),
    faults: cut(openFaults(items)),
    waiting: prepared<object, Rows<'waiting'>>(deps.db, DESK_WAITING).all({ limit: DESK_ROWS_MAX }),
    lowStock: cut(
      lowStock(deps).map(({ left, parLevel, ...row }) => ({
        ...row,
        remaining: left,
        parLevel: parLevel ?? 0,
      })),
    ),
    expiring: cut(expiringLots(deps).flatMap((lot) => (lot.useBy ? [{ ...lot, useBy: lot.useBy }] : []))),
  }
}

const cut = <T>(rows: T[]): T[] => rows.slice(0, DESK_ROWS_MAX)
const byDue = (a: DeskLoanRow, b: DeskLoanRow) => (a.to < b.to ? -1 : a.to > b.to ? 1 : 0)

const asDeskLoan = (row: DeskLoanRow, today: CalendarDay): Rows<'returns'> => ({
  ...row,
  atRisk: row.atRisk === 1,
  daysLate: daysLate(row, today),
})

interface PoolOnDesk {
  serviceable: number
  loans: DeskPoolRow[]
  holds: Hold[]
}

const emptyPool = (): PoolOnDesk => ({ serviceable: 0, loans: [], holds: [] })

function readPools(deps: Deps): Map<string, PoolOnDesk> {
  const today = deps.clock.today()
  const pools = new Map<string, PoolOnDesk>()
  for (const row of prepared<object, DeskPoolRow>(deps.db, DESK_POOLS).all({})) {
    const key = poolKey(row.kindId, row.wild)
    const pool = pools.get(key) ?? emptyPool()
    pools.set(key, pool)
    if (row.id === '') {
      pool.serviceable = row.serviceable
      continue
    }
    pool.loans.push(row)
    pool.holds.push({ from: row.from, blocksUntil: blocksUntil(row, row.turnaroundDays, today) })
  }
  return pools
}

/** Requests and extensions, the earliest collection first, each with what it would take and whom it would delay. */
function approvals(
  all: readonly DeskLoanRow[],
  pools: Map<string, PoolOnDesk>,
  today: CalendarDay,
): Rows<'approvals'>[] {
  return all.flatMap((row) => {
    const question =
      row.status === 'requested' ? 'request' : row.extensionTo === null ? undefined : 'extension'
    if (question === undefined) return []
    const pool = pools.get(poolKey(row.kindId, row.wild)) ?? emptyPool()
    const delayed =
      row.extensionTo === null
        ? []
        : delayedBy(row.loanId, row.extensionTo, pool.loans, pool.serviceable, today)
    return {
      ...asDeskLoan(row, today),
      question,
      extensionTo: row.extensionTo,
      askedAt: row.extensionAskedAt ?? row.requestedAt,
      freeAfter: freeAfter(row, pool, today),
      delays: pool.loans
        .filter(({ id }) => delayed.includes(id))
        .map(({ id, memberName, from }) => ({ loanId: id, memberName, kindName: row.kindName, from })),
    }
  })
}

/** What would still be free on the busiest of the days in question, this loan counted. */
function freeAfter(row: DeskLoanRow, pool: PoolOnDesk, today: CalendarDay): number {
  const own = pool.loans.find(({ id }) => id === row.loanId)
  if (!own) return 0
  const until = blocksUntil(own, own.turnaroundDays, today)
  const longer = row.extensionTo === null ? until : addDays(row.extensionTo, own.turnaroundDays)
  const added = { from: addDays(until, 1), blocksUntil: longer }
  const days = { from: own.from, to: laterDay(until, longer) }
  return Math.max(0, Math.min(...spareByDay(pool.serviceable, [...pool.holds, added], days)))
}

/** What to hand out today, each with the item to take from the shelf. */
function collections(
  deps: Deps,
  all: readonly DeskLoanRow[],
  items: readonly DeskItemRow[],
  today: CalendarDay,
): Rows<'collections'>[] {
  const rows = all.filter(({ status, from }) => status === 'approved' && from <= today)
  const shelves = new Map<string, Map<string, DeskItemRow>>()
  for (const item of items) {
    const key = poolKey(item.kindId, item.wild)
    const shelf = shelves.get(key) ?? new Map<string, DeskItemRow>()
    // Of several rows of one item, a blocking fault is the one that counts.
    if (item.blocking === 1 || !shelf.has(item.itemId)) shelf.set(item.itemId, item)
    shelves.set(key, shelf)
  }
  const suggested = new Map<string, DeskItemRow>()
  for (const key of new Set(rows.map((row) => poolKey(row.kindId, row.wild)))) {
    const queue = rows.filter((row) => poolKey(row.kindId, row.wild) === key)
    const shelf = shelves.get(key) ?? new Map<string, DeskItemRow>()
    const choice = [...shelf.values()].map((item) => ({
      id: item.itemId,
      tag: item.tag,
      hygiene: item.hygiene,
      sanitisedUntil: item.sanitisedUntil ?? undefined,
      usable: item.status === 'in-service' && item.blocking !== 1,
      out: item.out === 1,
    }))
    const ids = queue.map(({ loanId }) => loanId)
    const given = suggestItems(ids, choice, queue[0]?.needsSanitised === 1, deps.clock.now())
    for (const [loanId, itemId] of given) {
      const item = shelf.get(itemId)
      if (item) suggested.set(loanId, item)
    }
  }
  return rows.map((row) => {
    const item = suggested.get(row.loanId)
    return {
      ...asDeskLoan(row, today),
      collectBy: collectBy({ from: row.from, approvedOn: row.approvedOn ?? row.from }),
      suggestedItemId: item?.itemId ?? null,
      suggestedTag: item?.tag ?? null,
      suggestedShelf: item?.shelf ?? null,
    }
  })
}

/** Dirty things, and things to sanitise for who comes by tomorrow: what is wanted soonest first. */
function washing(deps: Deps, items: readonly DeskItemRow[], today: CalendarDay): Rows<'washing'>[] {
  const tomorrow = addDays(today, 1)
  const now = deps.clock.now()
  const soon = (item: DeskItemRow) =>
    item.wantedOn !== null && earlierDay(item.wantedOn, tomorrow) === item.wantedOn
  const unsanitised = (item: DeskItemRow) =>
    item.needsSanitised === 1 &&
    soon(item) &&
    (item.hygiene !== 'sanitised' || (item.sanitisedUntil !== null && item.sanitisedUntil <= now))
  const once = new Map(items.map((item) => [item.itemId, item]))
  return [...once.values()]
    .filter((item) => item.status === 'in-service' && item.out === 0)
    .filter((item) => item.hygiene === 'dirty' || unsanitised(item))
    .sort((a, b) =>
      (a.wantedOn ?? '9') < (b.wantedOn ?? '9') ? -1 : (a.wantedOn ?? '9') > (b.wantedOn ?? '9') ? 1 : 0,
    )
    .map((item) => ({ ...item, wild: item.wild === 1, needsSanitised: item.needsSanitised === 1 }))
}

/** Open faults, those that block first, then the oldest. */
function openFaults(items: readonly DeskItemRow[]): Rows<'faults'>[] {
  return items
    .flatMap((item) => {
      const { faultId, summary, reportedAt, blocking } = item
      if (faultId === null || summary === null || reportedAt === null) return []
      return { ...item, faultId, summary, reportedAt, blocking: blocking === 1 }
    })
    .sort((a, b) => Number(b.blocking) - Number(a.blocking) || (a.reportedAt < b.reportedAt ? -1 : 1))
}
