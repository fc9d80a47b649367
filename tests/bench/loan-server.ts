import express from 'express'
import { createApp } from '#server/app'
import { openDb } from '#server/db/open'
import { prepared } from '#server/db/prepared'
import { DESK_LOANS } from '#server/services/desk-queries'
import { HOLDS_OF_ALL, HOLDS_OF_POOL } from '#server/services/loans/shelf-queries'
import { addDays } from '#shared/time/day'
import { openSession } from '#tests/support/people'
import { SESSION_SECRET, type TestApp } from '#tests/support/test-app'
import { BENCH_TODAY, benchDeps, memberId } from './loan-file.ts'

// The real application and, beside it on the same port, bare Express handlers that only run the main statement of the same
// question: no session, no rules, no checks. Started by loans.ts in a process of its own.
const [file = ''] = process.argv.slice(2)
const db = openDb(file)
const deps = benchDeps(db)
const bind = {
  kindId: 'kind-7',
  wild: 0,
  from: BENCH_TODAY,
  to: addDays(BENCH_TODAY, 30),
  today: BENCH_TODAY,
  now: deps.clock.now(),
  memberId: memberId(50),
}
db.$client.exec('CREATE TABLE IF NOT EXISTS bench_rows (id INTEGER PRIMARY KEY, body TEXT) STRICT')
const bareWrite = db.$client.prepare('INSERT INTO bench_rows (body) VALUES (?)')

const bare = express()
bare.use('/bare', express.json())
bare.get('/bare/kind', (_req, res) => res.json(prepared<object, object>(db, HOLDS_OF_POOL).all(bind)))
bare.get('/bare/all', (_req, res) => res.json(prepared<object, object>(db, HOLDS_OF_ALL).all(bind)))
bare.get('/bare/desk', (_req, res) =>
  res.json(prepared<object, object>(db, DESK_LOANS).all({ today: BENCH_TODAY })),
)
bare.get('/bare/constant', (_req, res) => res.json({ ok: true }))
bare.post('/bare/write', (req, res) =>
  res.status(201).json({ id: bareWrite.run(JSON.stringify(req.body)).lastInsertRowid }),
)
bare.get('/bare/rss', (_req, res) => res.json({ rssMiB: process.memoryUsage().rss / 1024 / 1024 }))
bare.use(createApp(deps, { sessionSecret: SESSION_SECRET }))

const host = { db, deps, clock: deps.clock } as unknown as TestApp
const cookies = {
  member: openSession(host, memberId(50), 'member'),
  steward: openSession(host, memberId(1), 'steward'),
}
const server = bare.listen(0, () => {
  const address = server.address()
  const port = typeof address === 'object' && address ? address.port : 0
  process.stdout.write(`${JSON.stringify({ port, cookies })}\n`)
})
