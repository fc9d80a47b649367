import type { Statement } from 'better-sqlite3'
import { beforeEach, describe, expect, it } from 'vitest'
import { emptyImage } from '#server/db/image'
import { openDb, type Sqlite } from '#server/db/open'
import { blocksUntil } from '#shared/loans/availability'
import { addDays, type CalendarDay, day, daysBetween, laterDay } from '#shared/time/day'
import { dayRange } from '#shared/time/day-range'
import { seeded, type Random } from '#tests/support/random'
import { insertKind, insertItem, insertMember } from '#tests/support/rows'

const NOW = '2031-01-01T10:00:00.000Z'
const FIRST = day('2031-01-01')
const nth = (number: number) => addDays(FIRST, number)

interface Row {
  id: string
  kind: string
  wild: 0 | 1
  from: CalendarDay
  to: CalendarDay
  status: 'requested' | 'approved' | 'out' | 'returned' | 'declined' | 'cancelled' | 'lapsed'
  item: string | null
  turnaround: number
  until: CalendarDay
  blocking: 0 | 1
}

const isLive = (status: Row['status']): status is 'requested' | 'approved' | 'out' =>
  status === 'requested' || status === 'approved' || status === 'out'

const COLUMNS = `id, kind_id, wild, from_on, to_on, status, item_id, turnaround_days, blocks_until_on, blocking, member_id,
  requested_at, requested_by, approved_on, out_at, returned_on, created_at, updated_at`
const VALUES = `@id, @kind, @wild, @from, @to, @status, @item, @turnaround, @until, @blocking, 'm', '${NOW}', 'm',
  CASE WHEN @status IN ('approved', 'out') THEN @from END, CASE WHEN @status IN ('out', 'returned') THEN '${NOW}' END,
  CASE WHEN @status = 'returned' THEN @from END, '${NOW}', '${NOW}'`

function loan(over: Partial<Row> & { id: string }): Row {
  const row: Row = {
    kind: 'k',
    wild: 0,
    from: nth(10),
    to: nth(14),
    status: 'requested',
    item: null,
    turnaround: 1,
    until: nth(15),
    blocking: 1,
    ...over,
  }
  row.until = over.until ?? addDays(row.to, row.turnaround)
  row.blocking = over.blocking ?? (isLive(row.status) ? 1 : 0)
  return row
}

function shelf(items: number): Sqlite {
  const sqlite = openDb(emptyImage()).$client
  insertMember(sqlite, 'm')
  insertKind(sqlite, 'k')
  for (let index = 0; index < items; index += 1) insertItem(sqlite, { id: `i${index}`, kindId: 'k' })
  return sqlite
}

const insert = (sqlite: Sqlite, row: Row, how = 'INSERT') =>
  sqlite.prepare(`${how} INTO loans (${COLUMNS}) VALUES (${VALUES})`).run(row).changes

const liveIds = (sqlite: Sqlite) =>
  sqlite.prepare('SELECT id FROM loans WHERE blocking = 1 ORDER BY id').pluck().all()

describe('the guard against double booking', () => {
  let sqlite: Sqlite
  beforeEach(() => {
    sqlite = shelf(1)
    insert(sqlite, loan({ id: 'first' }))
  })

  it.each([
    'INSERT',
    'INSERT OR IGNORE',
    'INSERT OR REPLACE',
    'INSERT OR FAIL',
    'INSERT OR ROLLBACK',
    'REPLACE',
  ])('holds against %s', (how) => {
    expect(() => insert(sqlite, loan({ id: 'second', from: nth(15), to: nth(20) }), how)).toThrow('KIND_FULL')
    expect(liveIds(sqlite)).toEqual(['first'])
    expect(insert(sqlite, loan({ id: 'second', from: nth(16), to: nth(20) }), how)).toBe(1)
  })

  it('holds against several rows at once, and undoes all of them', () => {
    const rows = [
      loan({ id: 'a', from: nth(20), to: nth(22) }),
      loan({ id: 'b', from: nth(22), to: nth(24) }),
    ]
    const values = rows.map(
      (row) => `('${row.id}', 'k', 0, '${row.from}', '${row.to}', 'requested', NULL, 1, '${row.until}',
      1, 'm', '${NOW}', 'm', NULL, NULL, NULL, '${NOW}', '${NOW}')`,
    )
    const statement = (how: string) => `${how} INTO loans (${COLUMNS}) VALUES ${values.join(', ')}`
    for (const how of ['INSERT', 'INSERT OR IGNORE', 'INSERT OR REPLACE'])
      expect(() => sqlite.exec(statement(how))).toThrow('KIND_FULL')
    expect(liveIds(sqlite)).toEqual(['first'])
    const select = `INSERT INTO loans (${COLUMNS}) SELECT id || '2', kind_id, wild, from_on, to_on, status, item_id,
      turnaround_days, blocks_until_on, blocking, member_id, requested_at, requested_by, approved_on, out_at, returned_on,
      created_at, updated_at FROM loans`
    expect(() => sqlite.exec(select)).toThrow('KIND_FULL')
  })

  it.each(['UPDATE', 'UPDATE OR IGNORE', 'UPDATE OR REPLACE', 'UPDATE OR FAIL'])(
    'holds against %s: moving, lengthening, reviving, changing kind',
    (how) => {
      insertKind(sqlite, 'other')
      insertItem(sqlite, { id: 'o', kindId: 'other' })
      insert(sqlite, loan({ id: 'later', from: nth(20), to: nth(22) }))
      insert(sqlite, loan({ id: 'gone', status: 'cancelled', from: nth(12), to: nth(13) }))
      insert(sqlite, loan({ id: 'else', kind: 'other' }))
      const move = `${how} loans SET from_on = '${nth(15)}' WHERE id = 'later'`
      const lengthen = `${how} loans SET to_on = '${nth(19)}', blocks_until_on = '${nth(20)}' WHERE id = 'first'`
      const revive = `${how} loans SET status = 'requested', blocking = 1 WHERE id = 'gone'`
      const change = `${how} loans SET kind_id = 'k' WHERE id = 'else'`
      for (const statement of [move, lengthen, revive, change])
        expect(() => sqlite.exec(statement), statement).toThrow('KIND_FULL')
      sqlite.exec(`${how} loans SET from_on = '${nth(16)}' WHERE id = 'later'`)
      expect(sqlite.prepare("SELECT from_on FROM loans WHERE id = 'later'").pluck().get()).toBe(nth(16))
    },
  )

  it('holds against an upsert', () => {
    insert(sqlite, loan({ id: 'gone', status: 'cancelled' }))
    const upsert = (row: Row) =>
      sqlite
        .prepare(
          `INSERT INTO loans (${COLUMNS}) VALUES (${VALUES}) ON CONFLICT (id) DO UPDATE SET status = excluded.status,
           blocking = excluded.blocking, from_on = excluded.from_on, to_on = excluded.to_on,
           blocks_until_on = excluded.blocks_until_on`,
        )
        .run(row)
    expect(() => upsert(loan({ id: 'gone' }))).toThrow('KIND_FULL')
    expect(upsert(loan({ id: 'gone', from: nth(16), to: nth(17) })).changes).toBe(1)
    expect(upsert(loan({ id: 'first', from: nth(9), to: nth(12) })).changes).toBe(1)
  })

  it('takes no shorter block than the rule says, nor a live loan that blocks nothing', () => {
    const short = loan({ id: 's', from: nth(30), to: nth(34), until: nth(33) })
    for (const how of ['INSERT', 'INSERT OR REPLACE', 'INSERT OR FAIL'])
      expect(() => insert(sqlite, short, how)).toThrow(/CHECK/)
    expect(insert(sqlite, short, 'INSERT OR IGNORE')).toBe(0)
    expect(() => insert(sqlite, loan({ id: 'n', from: nth(30), to: nth(34), blocking: 0 }))).toThrow(/CHECK/)
    expect(() => insert(sqlite, loan({ id: 'b', from: nth(30), to: nth(29), until: nth(30) }))).toThrow(
      /CHECK/,
    )
    expect(() => sqlite.exec("UPDATE loans SET blocking = 0 WHERE id = 'first'")).toThrow(/CHECK/)
    expect(() => sqlite.exec("UPDATE loans SET from_on = '2031-02-30' WHERE id = 'first'")).toThrow(/CHECK/)
  })

  it('lets a late loan roll to today and its turnaround, and by no other way past what is promised', () => {
    sqlite.exec(
      `UPDATE loans SET status = 'out', approved_on = from_on, out_at = '${NOW}', item_id = 'i0' WHERE id = 'first'`,
    )
    insert(sqlite, loan({ id: 'next', from: nth(16), to: nth(18), status: 'approved' }))
    const roll = (until: CalendarDay) =>
      sqlite.prepare("UPDATE loans SET blocks_until_on = ? WHERE id = 'first'").run(until)
    expect(() => roll(nth(17))).toThrow('KIND_FULL')
    sqlite.prepare('UPDATE loan_rolls SET rolled_on = ?').run(nth(16))
    expect(() => roll(nth(18))).toThrow('KIND_FULL')
    expect(roll(nth(17)).changes).toBe(1)
    // Over-full now; what is promised may still be collected and given back, but nothing more is promised.
    sqlite.exec("UPDATE loans SET note = 'still here' WHERE id = 'next'")
    expect(() => insert(sqlite, loan({ id: 'more', from: nth(17), to: nth(17) }))).toThrow('KIND_FULL')
    expect(() =>
      sqlite.exec(`UPDATE loans SET to_on = '${nth(19)}', blocks_until_on = '${nth(20)}' WHERE id = 'first'`),
    ).toThrow('KIND_FULL')
  })

  it('puts one item in one pair of hands, of the kind and pool that was lent', () => {
    insertItem(sqlite, { id: 'i1', kindId: 'k' })
    insertItem(sqlite, { id: 'w', kindId: 'k', wild: true })
    insertKind(sqlite, 'other')
    insertItem(sqlite, { id: 'o', kindId: 'other' })
    insert(sqlite, loan({ id: 'second' }))
    const hand = (id: string, item: string, how = 'UPDATE') =>
      sqlite.exec(
        `${how} loans SET status = 'out', approved_on = from_on, out_at = '${NOW}', item_id = '${item}' WHERE id = '${id}'`,
      )
    hand('first', 'i0')
    for (const how of ['UPDATE', 'UPDATE OR REPLACE', 'UPDATE OR IGNORE'])
      expect(() => hand('second', 'i0', how)).toThrow('ITEM_OUT')
    expect(() =>
      insert(sqlite, loan({ id: 'third', from: nth(40), to: nth(41), status: 'out', item: 'i0' }), 'REPLACE'),
    ).toThrow('ITEM_OUT')
    expect(() => hand('second', 'w')).toThrow('WRONG_ITEM')
    expect(() => hand('second', 'o')).toThrow('WRONG_ITEM')
    hand('second', 'i1')
    expect(liveIds(sqlite)).toEqual(['first', 'second'])
  })

  it('keeps what happened as it was written', () => {
    sqlite.exec(
      `INSERT INTO loan_events (loan_id, event, at, by_id) VALUES ('first', 'requested', '${NOW}', 'm')`,
    )
    expect(() => sqlite.exec("UPDATE loan_events SET event = 'approved'")).toThrow('HISTORY_IS_KEPT')
  })
})

/** The rule of the house in plain loops over days, with no index, no SQL and no cleverness. */
class NaiveShelf {
  readonly loans = new Map<string, Row>()
  readonly items = new Map<string, { kind: string; wild: 0 | 1; inService: boolean; faulty: boolean }>()
  rolledOn: CalendarDay = day('1970-01-01')

  serviceable(kind: string, wild: 0 | 1): number {
    return [...this.items.values()].filter(
      (item) => item.kind === kind && item.wild === wild && item.inService && !item.faulty,
    ).length
  }

  /** Whether every day the row newly blocks has an item to spare. */
  admits(next: Row, before?: Row): boolean {
    if (next.blocking === 0) return true
    const others = [...this.loans.values()].filter(
      (row) => row.id !== next.id && row.blocking === 1 && row.kind === next.kind && row.wild === next.wild,
    )
    const serviceable = this.serviceable(next.kind, next.wild)
    return dayRange({ from: next.from, to: next.until }).every((on) => {
      const had =
        before !== undefined &&
        before.blocking === 1 &&
        before.kind === next.kind &&
        before.wild === next.wild &&
        before.from <= on &&
        on <= before.until
      return had || others.filter((row) => row.from <= on && on <= row.until).length < serviceable
    })
  }

  itemIsOut = (item: string, but: string) =>
    [...this.loans.values()].some((row) => row.id !== but && row.status === 'out' && row.item === item)
}

const OPERATIONS = 100_000
const SEED = 20310101

describe('a hundred thousand random operations', () => {
  it(`leave the database and the naive rule in full agreement (seed ${SEED})`, () => {
    const random = seeded(SEED)
    const sqlite = shelf(0)
    const naive = new NaiveShelf()
    const kinds = ['k', 'l', 'm']
    insertKind(sqlite, 'l')
    insertKind(sqlite, 'm')
    for (let index = 0; index < 12; index += 1) {
      const item = { kind: random.pick(kinds), wild: random.chance(0.2) ? 1 : 0 } as const
      naive.items.set(`x${index}`, { ...item, inService: true, faulty: false })
      insertItem(sqlite, { id: `x${index}`, kindId: item.kind, wild: item.wild === 1 })
    }
    const tally = history(sqlite, naive, random, OPERATIONS)
    expect(tally.disagreements).toEqual([])
    expect(tally.accepted).toBeGreaterThan(OPERATIONS / 5)
    expect(tally.refused).toBeGreaterThan(OPERATIONS / 10)
    expect(snapshot(sqlite)).toEqual(naiveSnapshot(naive))
  }, 120_000)
})

interface Tally {
  accepted: number
  refused: number
  disagreements: string[]
}

const prepared = new Map<string, Statement>()
const run = (sqlite: Sqlite, sql: string, bind: object = {}) => {
  let statement = prepared.get(sql)
  if (!statement) prepared.set(sql, (statement = sqlite.prepare(sql)))
  return statement.run(bind)
}

const UPDATE_SET = `kind_id = @kind, wild = @wild, from_on = @from, to_on = @to, status = @status, item_id = @item,
  turnaround_days = @turnaround, blocks_until_on = @until, blocking = @blocking, approved_on = CASE WHEN @status IN ('approved', 'out') THEN @from END,
  out_at = CASE WHEN @status IN ('out', 'returned') THEN '${NOW}' END,
  returned_on = CASE WHEN @status = 'returned' THEN @from END`
const COLUMN_OF: Record<string, string> = {
  kind: 'kind_id',
  from: 'from_on',
  to: 'to_on',
  item: 'item_id',
  turnaround: 'turnaround_days',
  until: 'blocks_until_on',
}
const UPSERT_SET = UPDATE_SET.replaceAll(
  /@(kind|wild|from|to|status|item|turnaround|until|blocking)/g,
  (_, name: string) => `excluded.${COLUMN_OF[name] ?? name}`,
)

function history(sqlite: Sqlite, naive: NaiveShelf, random: Random, operations: number): Tally {
  prepared.clear()
  const tally: Tally = { accepted: 0, refused: 0, disagreements: [] }
  let next = 0
  let today = FIRST
  for (let step = 0; step < operations; step += 1) {
    const dice = random.next()
    if (dice < 0.45) {
      const rows = Array.from({ length: random.chance(0.1) ? 2 : 1 }, () =>
        randomLoan(naive, random, today, `n${(next += 1)}`),
      )
      if (random.chance(0.05)) rows[0] = { ...rows[0]!, id: anyId(naive, random) ?? rows[0]!.id }
      attempt(step, rows)
    } else if (dice < 0.85) {
      const id = anyId(naive, random)
      const before = id === undefined ? undefined : naive.loans.get(id)
      if (before) change(step, before, randomChange(naive, random, today, before))
    } else if (dice < 0.88) {
      const id = anyId(naive, random)
      if (id !== undefined) {
        run(sqlite, 'DELETE FROM loans WHERE id = @id', { id })
        naive.loans.delete(id)
        tally.accepted += 1
      }
    } else if (dice < 0.97) {
      shelve(random.pick([...naive.items.keys()]))
    } else {
      today = addDays(today, 1)
      roll()
      forget()
    }
  }
  return tally

  /** INSERT in one of its forms; a statement takes all of its rows or none. */
  function attempt(step: number, rows: Row[]) {
    const form = random.pick(['INSERT', 'INSERT OR IGNORE', 'INSERT OR REPLACE', 'INSERT OR FAIL', 'upsert'])
    const known = rows.some((row) => naive.loans.has(row.id))
    if (known && (form === 'INSERT' || form === 'INSERT OR FAIL')) return
    const plain = form === 'upsert' ? 'INSERT' : form
    const held = new Map(naive.loans)
    let expected = true
    let skipped = false
    for (const row of rows) {
      const before = naive.loans.get(row.id)
      // The guard looks at every row before a conflict clause does.
      expected &&= naive.admits(row) && !(row.status === 'out' && naive.itemIsOut(row.item ?? '', row.id))
      if (!expected) break
      if (before && form === 'INSERT OR IGNORE') skipped = true
      else naive.loans.set(row.id, row)
    }
    if (!expected) {
      naive.loans.clear()
      for (const [id, row] of held) naive.loans.set(id, row)
    }
    const tail = form === 'upsert' ? ` ON CONFLICT (id) DO UPDATE SET ${UPSERT_SET}` : ''
    settle(step, form, expected, rows, () => {
      const values = rows.map((_, index) => `(${VALUES.replaceAll(/@(\w+)/g, `@$1${index}`)})`).join(', ')
      const bind = Object.assign(
        {},
        ...rows.map((row, index) =>
          Object.fromEntries(Object.entries(row).map(([key, value]) => [`${key}${index}`, value])),
        ),
      ) as object
      const { changes } = run(sqlite, `${plain} INTO loans (${COLUMNS}) VALUES ${values}${tail}`, bind)
      return skipped ? changes === rows.length - 1 : changes >= rows.length
    })
  }

  function change(step: number, before: Row, after: Row) {
    const form = random.pick(['UPDATE', 'UPDATE OR IGNORE', 'UPDATE OR REPLACE', 'UPDATE OR FAIL'])
    const goesOut =
      after.status === 'out' &&
      (before.status !== 'out' || before.item !== after.item || before.kind !== after.kind)
    const expected = naive.admits(after, before) && !(goesOut && naive.itemIsOut(after.item ?? '', after.id))
    if (expected) naive.loans.set(after.id, after)
    settle(
      step,
      form,
      expected,
      [after],
      () => run(sqlite, `${form} loans SET ${UPDATE_SET} WHERE id = @id`, after).changes === 1,
    )
  }

  function shelve(id: string) {
    const item = naive.items.get(id)!
    if (random.chance(0.5)) {
      item.inService = !item.inService
      run(sqlite, `UPDATE items SET status = '${item.inService ? 'in-service' : 'repair'}' WHERE id = @id`, {
        id,
      })
    } else if (item.faulty) {
      item.faulty = false
      run(
        sqlite,
        `UPDATE faults SET resolved_at = '${NOW}', resolved_by = 'm' WHERE item_id = @id AND resolved_at IS NULL`,
        {
          id,
        },
      )
    } else {
      item.faulty = random.chance(0.5)
      run(
        sqlite,
        `INSERT INTO faults (id, item_id, summary, severity, blocking, reported_at, reported_by)
         VALUES (hex(randomblob(8)), @id, 'odd', 'minor', ${item.faulty ? 1 : 0}, '${NOW}', 'm')`,
        { id },
      )
    }
    tally.accepted += 1
  }

  function roll() {
    naive.rolledOn = today
    run(sqlite, 'UPDATE loan_rolls SET rolled_on = @today', { today })
    for (const row of naive.loans.values())
      if (row.status === 'out' && row.to < today)
        row.until = laterDay(row.until, addDays(today, row.turnaround))
    run(
      sqlite,
      `UPDATE loans SET blocks_until_on = date(@today, '+' || turnaround_days || ' days')
       WHERE status = 'out' AND to_on < @today AND blocks_until_on < date(@today, '+' || turnaround_days || ' days')`,
      { today },
    )
    tally.accepted += 1
  }

  /** Loans long over go from both sides, so that plain loops stay quick. */
  function forget() {
    const before = addDays(today, -2)
    for (const row of naive.loans.values())
      if (row.to < before && row.status !== 'out') naive.loans.delete(row.id)
    run(sqlite, "DELETE FROM loans WHERE to_on < @before AND status <> 'out'", { before })
  }

  function settle(step: number, form: string, expected: boolean, rows: Row[], act: () => boolean) {
    let accepted: boolean
    try {
      accepted = act()
    } catch (error) {
      if (!/KIND_FULL|ITEM_OUT/.test(String(error))) throw error
      accepted = false
    }
    if (accepted) tally.accepted += 1
    else tally.refused += 1
    if (accepted !== expected && tally.disagreements.length < 5)
      tally.disagreements.push(`step ${step}: ${form} ${JSON.stringify(rows)} expected ${expected}`)
  }
}

function anyId(naive: NaiveShelf, random: Random): string | undefined {
  return naive.loans.size === 0 ? undefined : random.pick([...naive.loans.keys()])
}

function dates(random: Random, today: CalendarDay) {
  const from = addDays(today, random.int(-3, 40))
  return { from, to: addDays(from, random.int(0, 9)) }
}

function randomLoan(naive: NaiveShelf, random: Random, today: CalendarDay, id: string): Row {
  const [item, place] = random.pick([...naive.items])
  const status = random.pick(['requested', 'requested', 'approved', 'out', 'cancelled', 'returned'] as const)
  const range = dates(random, today)
  const turnaround = random.int(0, 3)
  return settled(naive, { id, kind: place.kind, wild: place.wild, status, item, turnaround, ...range })
}

/** Dates moved or stretched, state changed, pool changed: what code, right or wrong, might write. */
function randomChange(naive: NaiveShelf, random: Random, today: CalendarDay, before: Row): Row {
  const way = random.int(0, 3)
  if (way === 0) return settled(naive, { ...before, ...dates(random, today) })
  if (way === 1)
    return settled(naive, {
      ...before,
      to: addDays(before.from, daysBetween(before.from, before.to) + random.int(0, 4)),
    })
  if (way === 2)
    return settled(naive, {
      ...before,
      status: random.pick(['requested', 'approved', 'out', 'cancelled', 'declined', 'returned'] as const),
    })
  const [item, place] = random.pick([...naive.items])
  return settled(naive, { ...before, kind: place.kind, wild: place.wild, item })
}

/** Fills in what follows from the rest, as the services do. */
function settled(naive: NaiveShelf, row: Omit<Row, 'until' | 'blocking'>): Row {
  const blocking = isLive(row.status) ? 1 : 0
  const until = isLive(row.status)
    ? blocksUntil({ status: row.status, to: row.to }, row.turnaround, naive.rolledOn)
    : addDays(row.to, row.turnaround)
  return { ...row, blocking, until }
}

function snapshot(sqlite: Sqlite) {
  return sqlite
    .prepare(
      `SELECT id, kind_id AS kind, wild, from_on AS "from", to_on AS "to", status, item_id AS item,
       turnaround_days AS turnaround, blocks_until_on AS until, blocking FROM loans ORDER BY id`,
    )
    .all()
}

const naiveSnapshot = (naive: NaiveShelf) => [...naive.loans.values()].sort((a, b) => (a.id < b.id ? -1 : 1))
