import { existsSync, mkdirSync, renameSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { pino } from 'pino'
import { openDb, type Db } from '#server/db/open'
import type { Deps } from '#server/deps'
import { testClock } from '#tests/support/clock'
import { addDays, type CalendarDay, day } from '#shared/time/day'
import { seeded, type Random } from '#tests/support/random'

const MEMBERS = 2000
const KINDS = 150
const ITEMS = 1500
/** What is on loan, approved or asked for: the same in every file, whatever the history behind it. */
const LIVE = 2400

/** The day the files stand still on. */
export const BENCH_TODAY = day('2031-05-06')
const AT = `${BENCH_TODAY}T08:00:00.000Z`
export const kindId = (index: number) => `kind-${index}`
export const memberId = (index: number) => `member-${index}`

/** What the services of the benchmark are given: a clock that stands still, and no log. */
export const benchDeps = (db: Db): Deps => ({
  db,
  clock: testClock(`${BENCH_TODAY}T10:00:00.000Z`),
  log: pino({ level: 'silent' }),
  appUrl: 'http://localhost',
  uploadsDir: '.cache/bench/uploads',
  mailFrom: 'bench@barmhouse.example',
  demo: false,
  mailAlive: () => true,
  mailCaught: false,
})

/** A file with so many loans of the past ten years behind the same present; made once, kept under .cache. */
export function loanFile(history: number): string {
  const folder = join(process.cwd(), '.cache', 'bench')
  const file = join(folder, `loans-${history}-v2.db`)
  if (existsSync(file)) return file
  mkdirSync(folder, { recursive: true })
  const making = `${file}.making`
  rmSync(making, { force: true })
  const db = openDb(making)
  fill(db, history)
  db.$client.pragma('optimize')
  db.$client.pragma('wal_checkpoint(TRUNCATE)')
  db.$client.close()
  renameSync(making, file)
  return file
}

function fill(db: Db, history: number) {
  const sqlite = db.$client
  const random = seeded(200_000)
  sqlite.transaction(() => {
    const member = sqlite.prepare(
      `INSERT INTO members (id, name, email, role, status, created_at, updated_at)
       VALUES (?, ?, ?, ?, 'active', '${AT}', '${AT}')`,
    )
    for (let index = 0; index < MEMBERS; index += 1)
      member.run(
        memberId(index),
        `Member ${index}`,
        `m${index}@barmhouse.example`,
        index < 10 ? 'steward' : 'member',
      )
    const kind = sqlite.prepare(
      `INSERT INTO kinds (id, name, category, capacity_litres, turnaround_days, max_loan_days, max_ahead_days, max_per_member,
       created_at, updated_at) VALUES (?, ?, ?, 4.5, ?, 60, 180, 100, '${AT}', '${AT}')`,
    )
    const categories = ['vessel', 'instrument', 'transfer', 'closure', 'heating', 'other'] as const
    for (let index = 0; index < KINDS; index += 1)
      kind.run(kindId(index), `Kind ${index}`, random.pick(categories), random.int(0, 2))
    const item = sqlite.prepare(
      `INSERT INTO items (id, tag, kind_id, status, hygiene, created_at, updated_at) VALUES (?, ?, ?, ?, ?, '${AT}', '${AT}')`,
    )
    for (let index = 0; index < ITEMS; index += 1)
      item.run(
        `item-${index}`,
        `T-${index}`,
        kindId(index % KINDS),
        random.chance(0.97) ? 'in-service' : 'repair',
        random.chance(0.97) ? 'clean' : 'dirty',
      )
    sqlite.exec(`UPDATE loan_rolls SET rolled_on = '${BENCH_TODAY}'`)
    past(db, random, history)
    present(db, random)
  })()
}

const INSERT = `
INSERT INTO loans (id, kind_id, item_id, member_id, from_on, to_on, turnaround_days, blocks_until_on, blocking, status,
  requested_at, requested_by, approved_on, out_at, returned_at, returned_on, created_at, updated_at)
SELECT @id, @kindId, @itemId, @memberId, @from, @to, turnaround_days, date(@until, '+' || turnaround_days || ' days'),
  @blocking, @status, '${AT}', @memberId, CASE WHEN @status <> 'requested' THEN @from END,
  CASE WHEN @status IN ('out', 'returned') THEN '${AT}' END, CASE WHEN @status = 'returned' THEN '${AT}' END,
  CASE WHEN @status = 'returned' THEN @to END, '${AT}', '${AT}'
FROM kinds WHERE id = @kindId`

function past(db: Db, random: Random, history: number) {
  const insert = db.$client.prepare(INSERT)
  for (let index = 0; index < history; index += 1) {
    const item = index % ITEMS
    const from = addDays(BENCH_TODAY, -random.int(40, 3650))
    const to = addDays(from, random.int(0, 34))
    insert.run({
      id: `past-${index}`,
      kindId: kindId(item % KINDS),
      itemId: `item-${item}`,
      memberId: memberId(random.int(0, MEMBERS - 1)),
      from,
      to,
      until: to,
      blocking: 0,
      status: 'returned',
    })
  }
}

/** Out, some of it late; approved, some for today; asked for. What the shelf has no room for is left out. */
function present(db: Db, random: Random) {
  const insert = db.$client.prepare(INSERT)
  let made = 0
  for (let index = 0; index < LIVE * 2 && made < LIVE; index += 1) {
    const item = random.int(0, ITEMS - 1)
    const out = index < 900
    const from: CalendarDay = addDays(BENCH_TODAY, out ? -random.int(1, 30) : random.int(0, 120))
    const to: CalendarDay = out ? addDays(BENCH_TODAY, random.int(-3, 40)) : addDays(from, random.int(0, 28))
    const row = {
      id: `live-${index}`,
      kindId: kindId(item % KINDS),
      itemId: out ? `item-${item}` : null,
      memberId: memberId(random.int(0, MEMBERS - 1)),
      from,
      to: to < from ? from : to,
      until: to < BENCH_TODAY ? BENCH_TODAY : to,
      blocking: 1,
      status: out ? 'out' : random.chance(0.9) ? 'approved' : 'requested',
    }
    try {
      insert.run(row)
      made += 1
    } catch (error) {
      if (!/KIND_FULL|ITEM_OUT/.test(String(error))) throw error
    }
  }
}
