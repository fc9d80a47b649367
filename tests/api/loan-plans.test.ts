import { beforeAll, describe, expect, it } from 'vitest'
import { emptyImage } from '#server/db/image'
import { openDb, type Sqlite } from '#server/db/open'
import { calendarSql } from '#server/services/calendar'
import { DESK_ITEMS, DESK_LOANS, DESK_POOLS, DESK_WAITING } from '#server/services/desk-queries'
import {
  HOLDS_OF_ALL,
  HOLDS_OF_KINDS,
  HOLDS_OF_POOL,
  KINDS_TO_BOOK,
  OWN_LOANS,
} from '#server/services/loans/shelf-queries'
import { insertItem, insertKind, insertMember } from '#tests/support/rows'

let sqlite: Sqlite
const bind = {
  kindId: 'k',
  kindIds: '["k"]',
  wild: 0,
  memberId: 'm',
  from: '2031-05-01',
  to: '2031-05-31',
  today: '2031-05-06',
  now: '2031-05-06T10:00:00.000Z',
  shortFrom: '2031-03-01',
  longFrom: '2029-05-01',
  limit: 200,
}
const plan = (sql: string) =>
  (sqlite.prepare(`EXPLAIN QUERY PLAN ${sql}`).all(bind) as { detail: string }[]).map(({ detail }) => detail)

/** Steps that read a table of loans (by its name or the alias `l` or `o`). */
const loanSteps = (steps: string[]) => steps.filter((step) => /^(SEARCH|SCAN) (loans|l|o)\b/.test(step))

// Enough history behind a small present for the planner to prefer what it would prefer in earnest.
beforeAll(() => {
  sqlite = openDb(emptyImage()).$client
  insertMember(sqlite, 'm')
  for (const kind of ['k', 'other']) {
    insertKind(sqlite, kind)
    for (let index = 0; index < 10; index += 1) insertItem(sqlite, { id: `${kind}${index}`, kindId: kind })
  }
  sqlite.exec(`
    WITH RECURSIVE n (i) AS (SELECT 0 UNION ALL SELECT i + 1 FROM n WHERE i < 5000)
    INSERT INTO loans (id, kind_id, item_id, member_id, from_on, to_on, turnaround_days, blocks_until_on, blocking, status,
      requested_at, requested_by, out_at, returned_on, created_at, updated_at)
    SELECT 'past' || i, CASE WHEN i % 2 THEN 'k' ELSE 'other' END, CASE WHEN i % 2 THEN 'k1' ELSE 'other1' END, 'm',
      date('2031-05-01', '-' || (i % 3000 + 20) || ' days'), date('2031-05-01', '-' || (i % 3000 + 10) || ' days'), 1,
      date('2031-05-01', '-' || (i % 3000 + 9) || ' days'), 0, 'returned', 'x', 'm', 'x',
      date('2031-05-01', '-' || (i % 3000 + 10) || ' days'), 'x', 'x'
    FROM n;
    ANALYZE`)
})

describe('how the questions asked all day are answered', () => {
  it.each([
    ['availability of a kind', HOLDS_OF_POOL, ['loans_hold', 'loans_due']],
    ['availability of all kinds', HOLDS_OF_ALL, ['loans_shelf', 'loans_due']],
    ['a booking', HOLDS_OF_KINDS, ['loans_hold', 'loans_due']],
  ])('%s: from covering indexes alone', (_, sql, indexes) => {
    const steps = plan(sql)
    const loans = loanSteps(steps)
    expect(loans).toHaveLength(2)
    for (const [at, index] of indexes.entries())
      expect(loans[at]).toMatch(new RegExp(`^SEARCH loans USING COVERING INDEX ${index} \\(`))
    expect(steps.filter((step) => /SCAN loans|TEMP B-TREE/.test(step))).toEqual([])
  })

  it('a pool is sought by kind, pool and the first day that matters', () => {
    expect(loanSteps(plan(HOLDS_OF_POOL))[0]).toContain('(kind_id=? AND wild=? AND blocks_until_on>?)')
  })

  it.each([
    ['the desk’s loans', DESK_LOANS],
    ['the desk’s items', DESK_ITEMS],
    ['the desk’s pools', DESK_POOLS],
    ['who waits', DESK_WAITING],
    ['kinds to book', KINDS_TO_BOOK],
    ['a member’s own loans', OWN_LOANS],
    ['the month of everyone', calendarSql({ member: false, kind: false })],
    ['the month of a member', calendarSql({ member: true, kind: false })],
    ['the month of a kind', calendarSql({ member: false, kind: true })],
  ])('%s: no table of loans is walked from end to end', (_, sql) => {
    // What is at risk has an index that holds nothing else: walking that is reading the answer.
    const walked = loanSteps(plan(sql)).filter(
      (step) => step.startsWith('SCAN') && !step.endsWith('INDEX loans_at_risk'),
    )
    expect(walked).toEqual([])
  })

  it('the guard looks only at what holds a place', () => {
    const guard = sqlite
      .prepare("SELECT sql FROM sqlite_schema WHERE name = 'loans_guard_insert'")
      .pluck()
      .get() as string
    const body = guard.slice(guard.indexOf('SELECT 1 FROM ('), guard.lastIndexOf(') >= ('))
    const steps = plan(
      `${body.replaceAll('NEW.kind_id', "'k'").replaceAll('NEW.wild', '0').replaceAll('NEW.id', "'n'").replaceAll('NEW.from_on', '@from').replaceAll('NEW.blocks_until_on', '@to')}) >= 1`,
    )
    expect(loanSteps(steps).length).toBeGreaterThan(0)
    for (const step of loanSteps(steps))
      expect(step).toMatch(/^SEARCH loans USING COVERING INDEX loans_hold \(kind_id=\? AND wild=\?/)
  })
})
