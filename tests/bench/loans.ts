import { spawn } from 'node:child_process'
import { copyFileSync } from 'node:fs'
import { Agent, request } from 'node:http'
import { join } from 'node:path'
import { pathToFileURL } from 'node:url'
import { openDb } from '#server/db/open'
import { prepared } from '#server/db/prepared'
import type { Deps } from '#server/deps'
import type { SignedIn } from '#server/http/sessions'
import { readDesk } from '#server/services/desk'
import { DESK_LOANS } from '#server/services/desk-queries'
import { bookLoan } from '#server/services/loans/book'
import { kindAvailability, shelfAvailability } from '#server/services/loans/shelf'
import { HOLDS_OF_ALL, HOLDS_OF_POOL } from '#server/services/loans/shelf-queries'
import { addDays } from '#shared/time/day'
import { seeded } from '#tests/support/random'
import { BENCH_TODAY, benchDeps, kindId, loanFile, memberId } from './loan-file.ts'

const HISTORY = 200_000
const CONNECTIONS = 10
const SECONDS = 3
const month = { from: BENCH_TODAY, to: addDays(BENCH_TODAY, 30) }

interface Spread {
  p50: number
  p99: number
}

function spread(times: number[]): Spread {
  const sorted = times.sort((a, b) => a - b)
  const at = (share: number) =>
    sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * share))] ?? Number.NaN
  return { p50: at(0.5), p99: at(0.99) }
}

/** Time of one call after another, in microseconds. */
function inProcess(runs: number, work: (run: number) => unknown): Spread {
  for (let run = 0; run < runs / 5; run += 1) work(run)
  const times: number[] = []
  for (let run = 0; run < runs; run += 1) {
    const started = performance.now()
    work(run)
    times.push((performance.now() - started) * 1000)
  }
  return spread(times)
}

/** A copy, so that what is written here does not age the file. */
function depsOn(history: number): { deps: Deps; statements: () => number; file: string } {
  const file = join('.cache', 'bench', `run-${history}.db`)
  copyFileSync(loanFile(history), file)
  let count = 0
  const db = openDb(file, { onStatement: (sql) => void (sql.startsWith('--') || (count += 1)) })
  const plain = openDb(file)
  const counted = benchDeps(db)
  return {
    deps: benchDeps(plain),
    file,
    statements: () => {
      const before = count
      kindAvailability(counted, memberId(50), 'kind-7', month)
      return count - before
    },
  }
}

const user: SignedIn = { id: memberId(50), name: '', email: '', role: 'member', status: 'active' }

/** What each question costs in the process, beside the statement it rests on. */
function services(deps: Deps) {
  const { db } = deps
  const bind = {
    kindId: 'kind-7',
    wild: 0,
    ...month,
    today: BENCH_TODAY,
    now: deps.clock.now(),
    memberId: user.id,
  }
  const random = seeded(7)
  let asked = 0
  const request = () => {
    const from = addDays(BENCH_TODAY, random.int(1, 150))
    return { kindId: kindId(asked++ % 150), from, to: addDays(from, random.int(0, 6)) }
  }
  const insert = db.$client.prepare(`
    INSERT INTO loans (id, kind_id, member_id, from_on, to_on, turnaround_days, blocks_until_on, blocking, status,
      requested_at, requested_by, created_at, updated_at)
    SELECT hex(randomblob(12)), id, @memberId, @from, @to, turnaround_days, date(@to, '+' || turnaround_days || ' days'), 1,
      'requested', @now, @memberId, @now, @now FROM kinds WHERE id = @kindId`)
  const refused = (act: () => unknown) => {
    try {
      return act()
    } catch {
      return undefined
    }
  }
  return {
    'availability of a kind, a month': {
      raw: inProcess(3000, () => prepared<object, object>(db, HOLDS_OF_POOL).all(bind)),
      handler: inProcess(3000, (run) => kindAvailability(deps, user.id, kindId(run % 150), month)),
    },
    'availability of all kinds, a month': {
      raw: inProcess(300, () => prepared<object, object>(db, HOLDS_OF_ALL).all(bind)),
      handler: inProcess(300, () => shelfAvailability(deps, user.id, month)),
    },
    desk: {
      raw: inProcess(300, () => prepared<object, object>(db, DESK_LOANS).all({ today: BENCH_TODAY })),
      handler: inProcess(300, () => readDesk(deps)),
    },
    'loan request': {
      raw: inProcess(400, () =>
        refused(() => insert.run({ ...request(), memberId: user.id, now: deps.clock.now() })),
      ),
      handler: inProcess(400, () => refused(() => bookLoan(deps, user, request()))),
    },
  }
}

interface Target {
  path: string
  method?: 'GET' | 'POST'
  cookie?: string
  body?: () => object
}

/** Ten connections for three seconds: answers a second, their times in milliseconds and their statuses. */
async function load(port: number, target: Target) {
  const agent = new Agent({ keepAlive: true, maxSockets: CONNECTIONS })
  const times: number[] = []
  const statuses = new Map<number, number>()
  const until = performance.now() + SECONDS * 1000
  const one = () =>
    new Promise<void>((resolve, reject) => {
      const text = target.body ? JSON.stringify(target.body()) : ''
      const started = performance.now()
      const headers = {
        ...(target.cookie && { cookie: target.cookie }),
        ...(text && { 'content-type': 'application/json', 'content-length': Buffer.byteLength(text) }),
      }
      const req = request(
        { agent, port, path: target.path, method: target.method ?? 'GET', headers },
        (res) => {
          res.resume()
          res.on('end', () => {
            times.push(performance.now() - started)
            statuses.set(res.statusCode ?? 0, (statuses.get(res.statusCode ?? 0) ?? 0) + 1)
            resolve()
          })
        },
      )
      req.on('error', reject)
      req.end(text)
    })
  const connection = async () => {
    while (performance.now() < until) await one()
  }
  await Promise.all(Array.from({ length: CONNECTIONS }, connection))
  agent.destroy()
  return { perSecond: times.length / SECONDS, ...spread(times), statuses: Object.fromEntries(statuses) }
}

interface Started {
  port: number
  cookies: { member: string; steward: string }
  stop: () => void
}

function startServer(file: string): Promise<Started> {
  const script = new URL('./loan-server.ts', import.meta.url).pathname
  const child = spawn(process.execPath, ['--import', 'tsx', script, file], {
    stdio: ['ignore', 'pipe', 'inherit'],
  })
  return new Promise((resolve, reject) => {
    child.once('exit', (code) => reject(new Error(`the bench server stopped with ${code}`)))
    child.stdout.once('data', (line: Buffer) =>
      resolve({ ...(JSON.parse(line.toString()) as Omit<Started, 'stop'>), stop: () => child.kill() }),
    )
  })
}

async function overHttp(file: string) {
  const { port, cookies, stop } = await startServer(file)
  const query = `from=${month.from}&to=${month.to}`
  const random = seeded(11)
  const body = () => {
    const from = addDays(BENCH_TODAY, random.int(1, 150))
    return { kindId: kindId(random.int(0, 149)), from, to: addDays(from, random.int(0, 6)) }
  }
  const pairs: [name: string, ours: Target, bare: Target][] = [
    [
      'availability of a kind, a month',
      { path: `/api/kinds/kind-7/availability?${query}`, cookie: cookies.member },
      { path: '/bare/kind' },
    ],
    [
      'availability of all kinds, a month',
      { path: `/api/availability?${query}`, cookie: cookies.member },
      { path: '/bare/all' },
    ],
    ['desk', { path: '/api/desk', cookie: cookies.steward }, { path: '/bare/desk' }],
    [
      'loan request',
      { path: '/api/loans', method: 'POST', cookie: cookies.member, body },
      { path: '/bare/write', method: 'POST', body },
    ],
  ]
  console.log(`\nOver HTTP, ${CONNECTIONS} connections for ${SECONDS} s each (requests/s, p50/p99 ms)`)
  const constant = await load(port, { path: '/bare/constant' })
  console.log(`  bare Express, constant JSON: ${constant.perSecond.toFixed(0)}/s`)
  for (const [name, ours, bare] of pairs) {
    const other = await load(port, bare)
    const own = await load(port, ours)
    const share = ((100 * own.perSecond) / other.perSecond).toFixed(0)
    console.log(
      `  ${name}: ${own.perSecond.toFixed(0)}/s (${own.p50.toFixed(1)}/${own.p99.toFixed(1)}), ` +
        `bare ${other.perSecond.toFixed(0)}/s (${other.p50.toFixed(1)}/${other.p99.toFixed(1)}): ${share} %, ` +
        JSON.stringify(own.statuses),
    )
  }
  const rss = (await (await fetch(`http://localhost:${port}/bare/rss`)).json()) as { rssMiB: number }
  console.log(`  server memory: ${rss.rssMiB.toFixed(0)} MiB`)
  stop()
}

/** `npm run bench`, the loans part: a file of 200,000 loans, and one with a 64th of the history behind the same present. */
export async function run() {
  const started = performance.now()
  const full = depsOn(HISTORY)
  const small = depsOn(HISTORY / 64)
  console.log(`Loans: files ready after ${((performance.now() - started) / 1000).toFixed(1)} s`)
  const big = services(full.deps)
  const little = services(small.deps)
  console.log(`In the process, p50/p99 µs, ${HISTORY} loans of history; growth from a 64th of it`)
  for (const name of Object.keys(big) as (keyof typeof big)[]) {
    const { raw, handler } = big[name]
    const us = ({ p50, p99 }: Spread) => `${p50.toFixed(0)}/${p99.toFixed(0)}`
    console.log(
      `  ${name}: ${us(handler)}, raw statement ${us(raw)}: ×${(handler.p50 / raw.p50).toFixed(1)}; ` +
        `history ×64 costs ×${(handler.p50 / little[name].handler.p50).toFixed(2)}`,
    )
  }
  console.log(`  statements of a kind's availability, without the session: ${full.statements()}`)
  await overHttp(full.file)
}

if (import.meta.url === pathToFileURL(process.argv[1] ?? '').href) await run()
