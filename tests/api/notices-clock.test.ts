import { beforeAll, describe, expect, it } from 'vitest'
import { eq } from 'drizzle-orm'
import { addDays, day, daysBetween, type CalendarDay } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'
import { loans } from '#server/db/schema/loans'
import { letters } from '#server/db/schema/notices'
import { queueNotices } from '#server/jobs/queue-notices'
import { testClock } from '#tests/support/clock'
import { seeded, type Random } from '#tests/support/random'
import { insertItem, insertKind, insertMember } from '#tests/support/rows'
import { testApp, type TestApp } from '#tests/support/test-app'

/**
 * Two years of the real job over the real tables, around nine each day and now and then between, with the process down for
 * random spans. What should arrive is worked out here from the loans alone, with each zone's offsets written down (IANA tz data).
 */
const START = '2031-01-01'
const DAYS = 731
const LOANS = 80
const OFFSET_HOURS: Record<string, number[]> = {
  'Europe/London': [0, 1],
  'America/New_York': [-5, -4],
  'Australia/Lord_Howe': [10.5, 11],
  UTC: [0],
}
const ZONES = Object.keys(OFFSET_HOURS)

interface Plan {
  id: string
  from: CalendarDay
  to: CalendarDay
  /** Hour of the day at which it was approved, two days before `from`; at which it goes out and comes back. */
  hour: number
  backOn: CalendarDay
}

const clockFaces = new Map(
  ZONES.map((zone) => [
    zone,
    new Intl.DateTimeFormat('sv-SE', { timeZone: zone, dateStyle: 'short', timeStyle: 'short' }),
  ]),
)

/** The millisecond at which clocks in the zone show this hour: the offset under which they really do. */
function at(on: CalendarDay, hour: number, zone: string): number {
  const shown = `${on} ${String(hour).padStart(2, '0')}:00`
  const utc = Date.parse(`${on}T${String(hour).padStart(2, '0')}:00:00Z`)
  const moments = (OFFSET_HOURS[zone] ?? []).map((offset) => utc - offset * 3_600_000)
  const right = moments.find((ms) => clockFaces.get(zone)?.format(ms) === shown)
  if (right === undefined) throw new Error(`no clock in ${zone} shows ${shown}`)
  return right
}

/** Reminders with nothing down: day by day from the rules in words, not from the code under test. */
function expected(plan: Plan): Map<CalendarDay, string> {
  const letters = new Map<CalendarDay, string>()
  letters.set(addDays(plan.from, -1), 'loan-collect-tomorrow')
  for (let on = plan.from; on <= plan.backOn; on = addDays(on, 1)) {
    // Out from `hour` on its first day and back at `hour` on its last: nine o'clock must fall between.
    if (on === plan.from && plan.hour >= 9) continue
    if (on === plan.backOn && plan.hour <= 9) continue
    const late = daysBetween(plan.to, on)
    if (late === -3) letters.set(on, 'loan-due-soon')
    if (late === 0) letters.set(on, 'loan-due-today')
    if (late === 1 || late === 3 || late === 7 || (late > 7 && late % 7 === 0))
      letters.set(on, 'loan-overdue')
  }
  return letters
}

function plans(random: Random): Plan[] {
  return Array.from({ length: LOANS }, (_, index) => {
    const from = addDays(day(START), random.int(3, DAYS - 100))
    const to = addDays(from, random.int(0, 40))
    const backOn = addDays(
      to,
      random.chance(0.4) ? random.int(1, 60) : -Math.min(random.int(0, 4), daysBetween(from, to)),
    )
    return { id: `l${index}`, from, to, hour: random.pick([7, 8, 10, 13, 18]), backOn }
  })
}

/** Spans in which nothing runs: minutes to five days, about one in nine days. */
function downtimes(random: Random, zone: string): [from: number, to: number][] {
  const spans: [number, number][] = []
  for (let n = 0; n < DAYS; n++)
    if (random.chance(1 / 9)) {
      const from = at(addDays(day(START), n), random.int(0, 23), zone) + random.int(0, 59) * 60_000
      spans.push([from, from + random.pick([5, 60, 300, 1440, 3000, 7200]) * 60_000])
    }
  return spans
}

function prepare(zone: string, all: Plan[]): TestApp {
  const app = testApp({ clock: testClock(`${START}T00:00:00.000Z`, zone) })
  const sqlite = app.db.$client
  insertMember(sqlite, 'ada')
  for (const { id } of all) {
    insertKind(sqlite, `kind-${id}`)
    insertItem(sqlite, { id: `it-${id}`, kindId: `kind-${id}` })
  }
  return app
}

const iso = (ms: number) => new Date(ms).toISOString() as Instant

/** What people do to the loans, in order of time. */
function acts(app: TestApp, zone: string, all: Plan[]): { ms: number; act: () => void }[] {
  const change = (id: string, set: Partial<typeof loans.$inferInsert>) =>
    app.db.update(loans).set(set).where(eq(loans.id, id)).run()
  return all
    .flatMap((plan) => {
      const approvedMs = at(addDays(plan.from, -2), plan.hour, zone)
      const outMs = at(plan.from, plan.hour, zone)
      // Same day in and out: back an hour after it went.
      const backMs = at(plan.backOn, plan.hour, zone) + (plan.backOn === plan.from ? 3_600_000 : 0)
      return [
        { ms: approvedMs, act: () => approve(app, plan, iso(approvedMs)) },
        {
          ms: outMs,
          act: () =>
            change(plan.id, { status: 'out', itemId: `it-${plan.id}`, outAt: iso(outMs), outBy: 'ada' }),
        },
        {
          ms: backMs,
          act: () =>
            change(plan.id, {
              status: 'returned',
              blocking: false,
              returnedAt: iso(backMs),
              returnedOn: plan.backOn,
              returnedBy: 'ada',
              returnCondition: 'ok',
            }),
        },
      ]
    })
    .sort((a, b) => a.ms - b.ms)
}

function approve(app: TestApp, plan: Plan, now: Instant) {
  app.db
    .insert(loans)
    .values({
      id: plan.id,
      kindId: `kind-${plan.id}`,
      memberId: 'ada',
      fromOn: plan.from,
      toOn: plan.to,
      turnaroundDays: 1,
      blocksUntilOn: addDays(plan.to, 1),
      blocking: true,
      status: 'approved',
      requestedAt: now,
      requestedBy: 'ada',
      decidedAt: now,
      decidedBy: 'ada',
      approvedOn: addDays(plan.from, -2),
      createdAt: now,
      updatedAt: now,
    })
    .run()
}

/** Moments at which the job runs: a minute before nine by the local clock, nine, a minute after, and two more in each day. */
function ticks(random: Random, zone: string): number[] {
  const all: number[] = []
  for (let n = 0; n < DAYS; n++) {
    const nine = at(addDays(day(START), n), 9, zone)
    for (let minute = -1; minute <= 1; minute++) all.push(nine + minute * 60_000)
    for (let extra = 0; extra < 2; extra++) all.push(nine + random.int(-540, 890) * 60_000)
  }
  return all.sort((a, b) => a - b)
}

interface Sent {
  loanId: string
  kind: string
  on: CalendarDay
  ms: number
}

function live(zone: string, seed: number) {
  const random = seeded(seed)
  const all = plans(random)
  const app = prepare(zone, all)
  const down = downtimes(random, zone)
  const isDown = (ms: number) => down.some(([from, to]) => ms >= from && ms < to)
  const up = ticks(random, zone).filter((ms) => !isDown(ms))
  const todo = acts(app, zone, all)
  let next = 0
  for (const ms of up) {
    for (; next < todo.length && (todo[next]?.ms ?? Infinity) <= ms; next++) todo[next]?.act()
    app.clock.set(iso(ms))
    queueNotices(app.deps)
    app.statements()
  }
  const sent: Sent[] = app.db
    .select()
    .from(letters)
    .all()
    .map((letter) => ({
      loanId: letter.aboutId ?? '',
      kind: letter.kind,
      on: letter.dedupeKey.split(':').at(-1) as CalendarDay,
      ms: Date.parse(letter.queuedAt),
    }))
  return { all, up, sent, down }
}

describe.each(ZONES)('two years of reminders in %s', (zone) => {
  let run: ReturnType<typeof live>
  beforeAll(() => {
    run = live(zone, 20_310 + ZONES.indexOf(zone))
  })

  it('has enough of everything to mean something', () => {
    expect(run.down.length).toBeGreaterThan(50)
    for (const kind of ['loan-collect-tomorrow', 'loan-due-soon', 'loan-due-today', 'loan-overdue'])
      expect(run.sent.filter((letter) => letter.kind === kind).length).toBeGreaterThan(20)
  })

  it('writes none on a wrong day and none twice', () => {
    const seen = new Set<string>()
    const wrong = run.sent.filter((letter) => {
      const plan = run.all.find(({ id }) => id === letter.loanId)
      const key = `${letter.loanId} ${letter.on}`
      const twice = seen.has(key)
      seen.add(key)
      return twice || !plan || expected(plan).get(letter.on) !== letter.kind
    })
    expect(wrong).toEqual([])
  })

  it('writes each at nine by the local clock, or at the first run after a span in which nothing ran', () => {
    const off = run.sent.filter(({ on, ms }) => {
      const nine = at(on, 9, zone)
      const first = run.up.find((tick) => tick >= nine)
      return ms !== first
    })
    expect(off).toEqual([])
  })

  it('leaves out only what a newer one, or the end of the loan, overtook while nothing ran', () => {
    const missing = run.all.flatMap((plan) => {
      const due = [...expected(plan)].map(([on, kind]) => ({ on, kind, nine: at(on, 9, zone) }))
      return due.filter(({ on, nine, kind }) => {
        if (run.sent.some((letter) => letter.loanId === plan.id && letter.on === on)) return false
        const first = run.up.find((tick) => tick >= nine) ?? Infinity
        const newer = due.some((other) => other.nine > nine && other.nine <= first)
        const outMs = at(plan.from, plan.hour, zone)
        const backMs = at(plan.backOn, plan.hour, zone)
        const over = kind === 'loan-collect-tomorrow' ? outMs <= first : backMs <= first
        return !newer && !over
      })
    })
    expect(missing).toEqual([])
  })
})
