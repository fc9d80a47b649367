import { eq } from 'drizzle-orm'
import { beforeEach, describe, expect, it } from 'vitest'
import type { Loan } from '#shared/loans/contract'
import type { Waiting } from '#shared/loans/waiting-contract'
import { letters } from '#server/db/schema/notices'
import { runLoanRound } from '#server/services/loans/round'
import { askFor, inDays, makeShelf } from '#tests/support/makers/loans'
import { comeBack, people, person, type Person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

let app: TestApp
let cast: ReturnType<typeof people>
let cy: Person
let shelf: ReturnType<typeof makeShelf>
let held: Loan
beforeEach(async () => {
  app = testApp()
  cast = people(app)
  cy = person(app, 'Cy Orchard')
  shelf = makeShelf(app, cast.sam, 1, { turnaroundDays: 0 })
  held = await askFor(cast.bo, want(5, 9))
})

const want = (from: number, to: number) => ({
  kindId: shelf.kind.id,
  from: inDays(app, from),
  to: inDays(app, to),
})
const wait = async (who: Person, from: number, to: number) => {
  const reply = await who.agent.post('/api/waiting').send(want(from, to))
  expect(reply.status, reply.text).toBe(201)
  // So that nobody is first by the toss of an id.
  app.clock.advance({ seconds: 1 })
  return reply.body as Waiting
}
const mine = async (who: Person) =>
  ((await who.agent.get('/api/waiting')).body as { items: Waiting[] }).items.map(({ state }) => state)
const free = async (who: Person, on: number) =>
  (
    (
      await who.agent.get(
        `/api/kinds/${shelf.kind.id}/availability?from=${inDays(app, on)}&to=${inDays(app, on)}`,
      )
    ).body as { minFree: number }
  ).minFree
const letGo = () => cast.bo.agent.post(`/api/loans/${held.id}/cancel`).send({})
const offers = (who: Person) =>
  app.db
    .select()
    .from(letters)
    .where(eq(letters.memberId, who.id))
    .all()
    .filter(({ kind }) => kind === 'waiting-offer')

describe('the waiting list', () => {
  it('offers what comes free to the first in line, and keeps it from everyone else', async () => {
    await wait(cast.ada, 5, 6)
    await wait(cy, 5, 6)
    expect(await mine(cast.ada)).toEqual(['waiting'])
    await letGo()
    expect([await mine(cast.ada), await mine(cy)]).toEqual([['offered'], ['waiting']])
    expect([await free(cast.ada, 5), await free(cy, 5)]).toEqual([1, 0])
    expect((await cy.agent.post('/api/loans').send(want(5, 6))).status).toBe(409)
    expect((await cast.ada.agent.post('/api/loans').send(want(5, 6))).status).toBe(201)
    expect(await mine(cast.ada)).toEqual([])
    expect([offers(cast.ada).length, offers(cy).length]).toEqual([1, 0])
  })

  it('asks the next when an offer is not taken within a day', async () => {
    await wait(cast.ada, 5, 6)
    await wait(cy, 5, 6)
    await letGo()
    app.clock.advance({ hours: 23, minutes: 59 })
    runLoanRound(app.deps)
    expect(await mine(cy)).toEqual(['waiting'])
    app.clock.advance({ minutes: 1 })
    expect(await free(cy, 5)).toBe(1)
    runLoanRound(app.deps)
    runLoanRound(app.deps)
    expect([await mine(cast.ada), await mine(cy)]).toEqual([[], ['offered']])
    expect(offers(cy)).toHaveLength(1)
  })

  it('passes over who does not fit, without losing their place', async () => {
    await askFor(cast.bo, want(12, 13))
    await wait(cast.ada, 8, 12)
    await wait(cy, 5, 6)
    await letGo()
    expect([await mine(cast.ada), await mine(cy)]).toEqual([['waiting'], ['offered']])
  })

  it('offers at once what is free after all', async () => {
    expect(await wait(cast.ada, 1, 2)).toMatchObject({ state: 'offered', kindName: shelf.kind.name })
  })

  it('offers what a new item makes free', async () => {
    await wait(cast.ada, 5, 6)
    await cast.sam.agent.post('/api/items').send({ tag: 'NEW-1', kindId: shelf.kind.id, hygiene: 'clean' })
    runLoanRound(app.deps)
    expect(await mine(cast.ada)).toEqual(['offered'])
  })

  it('is left by whoever is in it, and an offer goes to the next', async () => {
    const place = await wait(cast.ada, 5, 6)
    await wait(cy, 5, 6)
    await letGo()
    expect((await cy.agent.delete(`/api/waiting/${place.id}`)).status).toBe(404)
    expect((await cast.ada.agent.delete(`/api/waiting/${place.id}`)).status).toBe(204)
    expect([await mine(cast.ada), await mine(cy)]).toEqual([[], ['offered']])
    expect((await cast.ada.agent.delete('/api/waiting/nothing')).status).toBe(404)
  })

  it('ends with the days that were waited for', async () => {
    await wait(cast.ada, 5, 6)
    app.clock.advance({ days: 6 })
    comeBack(app, cast.ada)
    runLoanRound(app.deps)
    expect(await mine(cast.ada)).toEqual([])
  })

  it('takes nobody twice for the same, nor for more than ten things, nor past a limit', async () => {
    const code = async (from: number, to: number) =>
      ((await cast.ada.agent.post('/api/waiting').send(want(from, to))).body as { code?: string }).code
    await wait(cast.ada, 5, 6)
    expect(await code(5, 6)).toBe('wrong-state')
    expect(await code(-1, 2)).toBe('invalid')
    expect(await code(3, 2)).toBe('invalid')
    expect(await code(1, 300)).toBe('over-limit')
    for (let other = 0; other < 9; other += 1) await wait(cast.ada, 5, 7 + other)
    expect(await code(6, 7)).toBe('over-limit')
  })

  it('shows stewards everyone, and members themselves', async () => {
    await wait(cast.ada, 5, 6)
    await wait(cy, 5, 6)
    const all = (await cast.sam.agent.get('/api/waiting?member=all')).body as { items: Waiting[] }
    expect(all.items.map(({ memberName }) => memberName)).toEqual(['Ada Marsh', 'Cy Orchard'])
    expect((await cy.agent.get('/api/waiting?member=all')).status).toBe(403)
  })
})
