import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtempSync } from 'node:fs'
import { Agent, createServer, request, type Server } from 'node:http'
import { type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, describe, expect, it } from 'vitest'
import { testClock } from '#tests/support/clock'
import { inDays, makeShelf } from '#tests/support/makers/loans'
import { person, type Person } from '#tests/support/people'
import { SESSION_SECRET, testApp, type TestApp } from '#tests/support/test-app'

const REQUESTS = 200
const ROUNDS = 20
const closing: (() => void)[] = []
afterEach(() => {
  for (const close of closing.splice(0)) close()
})

interface Outcome {
  status: number
  code: string | undefined
  ms: number
}

/** One real request over a kept-alive connection. */
function post(agent: Agent, port: number, cookie: string, body: object): Promise<Outcome> {
  const text = JSON.stringify(body)
  const started = performance.now()
  return new Promise((resolve, reject) => {
    const req = request(
      {
        agent,
        port,
        method: 'POST',
        path: '/api/loans',
        headers: { cookie, 'content-type': 'application/json', 'content-length': Buffer.byteLength(text) },
      },
      (res) => {
        const parts: Buffer[] = []
        res.on('data', (part: Buffer) => parts.push(part))
        res.on('end', () => {
          const reply = JSON.parse(Buffer.concat(parts).toString()) as { code?: string }
          resolve({ status: res.statusCode ?? 0, code: reply.code, ms: performance.now() - started })
        })
      },
    )
    req.on('error', reject)
    req.end(text)
  })
}

/** Everyone asks for the last item of a fresh kind at once, each round anew; gives back how long the answers took. */
async function race(app: TestApp, ports: number[]): Promise<number[]> {
  const steward = person(app, 'Sam Tolliver', 'steward')
  const members: Person[] = Array.from({ length: 20 }, (_, index) => person(app, `Member ${index}`))
  const agent = new Agent({ keepAlive: true, maxSockets: REQUESTS })
  closing.push(() => agent.destroy())
  const times: number[] = []
  for (let round = 0; round < ROUNDS; round += 1) {
    const { kind } = makeShelf(app, steward, 1, { maxPerMember: 9 })
    const wanted = { kindId: kind.id, from: inDays(app, 1), to: inDays(app, 1 + (round % 5)) }
    const outcomes = await Promise.all(
      Array.from({ length: REQUESTS }, (_, index) =>
        post(agent, ports[index % ports.length]!, members[index % members.length]!.cookie, wanted),
      ),
    )
    expect(
      outcomes.filter(({ status }) => status === 201),
      `round ${round}`,
    ).toHaveLength(1)
    const refused = outcomes.filter(({ status, code }) => status === 409 && code === 'not-available')
    expect(refused, `round ${round}`).toHaveLength(REQUESTS - 1)
    const held = app.db.$client.prepare('SELECT count(*) FROM loans WHERE kind_id = ?').pluck().get(kind.id)
    expect(held).toBe(1)
    times.push(...outcomes.map(({ ms }) => ms))
  }
  return times.sort((a, b) => a - b)
}

const say = (what: string, times: number[]) => {
  const at = (share: number) => times[Math.floor(times.length * share)]?.toFixed(0)
  process.stdout.write(`${what}: p50 ${at(0.5)} ms, p99 ${at(0.99)} ms with ${REQUESTS} at once\n`)
}

describe(`${REQUESTS} people ask for the last item at the same moment, ${ROUNDS} times`, () => {
  it('one gets it and all others are told it is not available', async () => {
    const app = testApp()
    const server: Server = createServer(app.app)
    await new Promise<void>((resolve) => server.listen(0, resolve))
    closing.push(() => server.close())
    say('one process', await race(app, [(server.address() as AddressInfo).port]))
  }, 120_000)

  it('the same with two servers on one database file', async () => {
    const file = join(mkdtempSync(join(tmpdir(), 'barmhouse-race-')), 'race.db')
    const app = testApp({ file, clock: testClock(new Date().toISOString()) })
    const ports = await Promise.all([freePort(), freePort()])
    await Promise.all(ports.map((port) => startServer(file, port)))
    say('two processes', await race(app, ports))
  }, 180_000)
})

async function freePort(): Promise<number> {
  const server = createServer()
  await new Promise<void>((resolve) => server.listen(0, resolve))
  const { port } = server.address() as AddressInfo
  await new Promise((resolve) => server.close(resolve))
  return port
}

/** The real server, as it is run, in a process of its own. */
async function startServer(file: string, port: number): Promise<ChildProcess> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], {
    env: {
      ...process.env,
      NODE_ENV: 'test',
      PORT: String(port),
      APP_URL: `http://localhost:${port}`,
      DATABASE_FILE: file,
      UPLOADS_DIR: mkdtempSync(join(tmpdir(), 'barmhouse-uploads-')),
      SESSION_SECRET,
      DEMO: '0',
      LOG_LEVEL: 'silent',
    },
    stdio: ['ignore', 'ignore', 'pipe'],
  })
  closing.push(() => child.kill('SIGKILL'))
  let said = ''
  child.stderr.on('data', (part: Buffer) => (said += part.toString()))
  for (let tries = 0; tries < 200; tries += 1) {
    if (child.exitCode !== null) throw new Error(`the server stopped: ${said}`)
    const up = await fetch(`http://localhost:${port}/healthz`).then(
      ({ ok }) => ok,
      () => false,
    )
    if (up) return child
    await new Promise((resolve) => setTimeout(resolve, 100))
  }
  throw new Error(`the server did not come up: ${said}`)
}
