import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { Problem } from '#shared/http/problem'
import { ask, everyEndpoint } from '#tests/support/every-endpoint'
import { person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

/** A digest of every row of every table but the ones that requests are counted in. */
function contents(app: TestApp): string {
  const sqlite = app.db.$client
  const tables = sqlite
    .prepare(`SELECT name FROM sqlite_schema WHERE type = 'table' AND name NOT IN ('sessions', 'throttles')`)
    .pluck()
    .all() as string[]
  const hash = createHash('sha256')
  for (const table of tables.sort())
    hash.update(JSON.stringify(sqlite.prepare(`SELECT * FROM "${table}"`).all()))
  return hash.digest('hex')
}

const long = 'x'.repeat(60_000)
const BODIES: [name: string, body: unknown][] = [
  ['nothing', {}],
  ['an unknown field', { thereIsNoSuchField: 1 }],
  ['a list', []],
  ['numbers out of all range', { quantity: 1e308, grams: -1, volumeLitres: 9e99, from: 5, to: null }],
  ['objects for scalars', { kindId: { $gt: '' }, name: ['a'], email: {}, from: {}, at: [] }],
  ['very long text', { name: long, note: long, reason: long, summary: long }],
]

describe('bad input to every writing endpoint gets a problem with a path, and writes nothing', () => {
  const app = testApp()
  const admin = person(app, 'Kit Harrow', 'admin')
  const writing = everyEndpoint.filter(
    (spec) => spec.method !== 'GET' && spec.body && spec.path !== '/session',
  )

  it.each(writing)('$name', async (spec) => {
    let before = contents(app)
    for (const [name, body] of BODIES) {
      const reply = await ask(admin.agent, spec).type('json').send(JSON.stringify(body))
      if (reply.status < 300) {
        // An empty body may be all that an act needs, but not on a thing that is not there.
        expect(name).toBe('nothing')
        before = contents(app)
        continue
      }
      expect(reply.status, `${name}: ${reply.text}`).toBeGreaterThanOrEqual(400)
      expect(reply.status, `${name}: ${reply.text}`).toBeLessThan(500)
      expect(reply.type).toBe('application/problem+json')
      const problem = Problem.parse(reply.body)
      if (reply.status === 400) for (const error of problem.errors ?? []) expect(error.path).not.toBe('')
      if (problem.code === 'invalid') expect(problem.errors?.length).toBeGreaterThan(0)
    }
    expect(contents(app)).toBe(before)
  })

  const listing = everyEndpoint.filter((spec) => spec.method === 'GET' && !spec.file)
  it.each(listing)('$name: strange questions', async (spec) => {
    for (const query of [
      'limit=-1',
      'cursor=%00',
      'limit=1&limit=2',
      'from=yesterday',
      'noSuchThing=1',
      '__proto__[a]=1',
    ]) {
      const reply = await admin.agent.get(`/api${spec.path.replace(/:\w+/g, 'nothing-has-this-id')}?${query}`)
      expect(reply.status, query).toBeLessThan(500)
      expect(reply.status, query).toBeGreaterThanOrEqual(400)
    }
  })
})
