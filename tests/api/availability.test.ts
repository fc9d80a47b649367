import { describe, expect, it } from 'vitest'
import type { KindAvailability, ShelfAvailability } from '#shared/loans/contract'
import { askFor, inDays, makeLoan, makeShelf } from '#tests/support/makers/loans'
import { comeBack, people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

function setting(items = 2, facts = {}) {
  const app = testApp()
  const cast = people(app)
  const { kind, items: shelf } = makeShelf(app, cast.sam, items, {
    turnaroundDays: 1,
    maxPerMember: 9,
    ...facts,
  })
  const at = (days: number) => inDays(app, days)
  const free = async (from: number, to: number, who = cast.ada, query = '') => {
    const reply = await who.agent.get(
      `/api/kinds/${kind.id}/availability?from=${at(from)}&to=${at(to)}${query}`,
    )
    expect(reply.status, reply.text).toBe(200)
    return (reply.body as KindAvailability).days.map((day) => day.free)
  }
  const want = (from: number, to: number) => ({ kindId: kind.id, from: at(from), to: at(to) })
  return { app, ...cast, kind, shelf, at, free, want }
}

describe('the availability of a kind', () => {
  it('counts serviceable items less what is booked, turnaround included', async () => {
    const { ada, bo, free, want, kind, at } = setting()
    await askFor(bo, want(2, 3))
    await askFor(bo, want(4, 5))
    expect(await free(0, 8)).toEqual([2, 2, 1, 1, 0, 1, 1, 2, 2])
    const reply = await ada.agent.get(`/api/kinds/${kind.id}/availability?from=${at(2)}&to=${at(4)}`)
    expect(reply.body).toEqual({
      kindId: kind.id,
      from: at(2),
      to: at(4),
      minFree: 0,
      days: [
        { date: at(2), serviceable: 2, free: 1 },
        { date: at(3), serviceable: 2, free: 1 },
        { date: at(4), serviceable: 2, free: 0 },
      ],
    })
  })

  it.each([
    ['requested', [1, 0, 0, 0, 1]],
    ['approved', [1, 0, 0, 0, 1]],
    ['declined', [1, 1, 1, 1, 1]],
    ['cancelled', [1, 1, 1, 1, 1]],
  ] as const)('is changed by a loan that is %s', async (status, days) => {
    const { app, ada, sam, want, free } = setting(1)
    await makeLoan(app, { member: ada, steward: sam }, want(1, 2), status)
    expect(await free(0, 4)).toEqual(days)
  })

  it('is blocked by what is late until today and its turnaround, although nothing was written since', async () => {
    const { app, ada, bo, sam, want, free } = setting(1)
    await makeLoan(app, { member: ada, steward: sam }, want(0, 2), 'out')
    expect(await free(0, 5)).toEqual([0, 0, 0, 0, 1, 1])
    app.clock.advance({ days: 5 })
    const loans = () => app.db.$client.prepare('SELECT * FROM loans, loan_rolls').all()
    const before = loans()
    expect(await free(0, 4, bo)).toEqual([0, 0, 1, 1, 1])
    expect(loans()).toEqual(before)
    const late = await bo.agent.post('/api/loans').send(want(1, 1))
    expect(late.status).toBe(409)
    // The booking has rolled the late loan; the count is the same.
    expect(await free(0, 4, bo)).toEqual([0, 0, 1, 1, 1])
  })

  it('frees the days of an early return at once, the turnaround when the item is clean', async () => {
    const { app, ada, sam, want, free, shelf } = setting(1, { turnaroundDays: 2 })
    const loan = await makeLoan(app, { member: ada, steward: sam }, want(0, 9), 'out')
    app.clock.advance({ days: 3 })
    comeBack(app, sam, 'steward')
    await sam.agent.post(`/api/loans/${loan.id}/check-in`).send({ condition: 'ok', hygiene: 'dirty' })
    expect(await free(0, 4)).toEqual([0, 0, 0, 1, 1])
    await sam.agent.post(`/api/items/${shelf[0]!.id}/hygiene`).send({ state: 'clean' })
    expect(await free(0, 4)).toEqual([1, 1, 1, 1, 1])
  })

  it('counts neither what is in repair nor what has a blocking fault, and keeps wild items apart', async () => {
    const { sam, ada, free, shelf } = setting(3)
    expect(await free(0, 0)).toEqual([3])
    await ada.agent
      .post(`/api/items/${shelf[0]!.id}/faults`)
      .send({ summary: 'Chipped neck', blocking: true })
    expect(await free(0, 0)).toEqual([2])
    await ada.agent.post(`/api/items/${shelf[1]!.id}/faults`).send({ summary: 'Label worn', blocking: false })
    expect(await free(0, 0)).toEqual([2])
    await sam.agent.patch(`/api/items/${shelf[1]!.id}`).set('If-Match', '"1"').send({ status: 'repair' })
    expect(await free(0, 0)).toEqual([1])
    await sam.agent.patch(`/api/items/${shelf[2]!.id}`).set('If-Match', '"1"').send({ wild: true })
    expect(await free(0, 0)).toEqual([0])
    expect(await free(0, 0, ada, '&wild=true')).toEqual([1])
  })

  it('answers for 400 days and no more, and says what is wrong with other questions', async () => {
    const { ada, kind, at } = setting()
    const ask = (query: string) => ada.agent.get(`/api/kinds/${kind.id}/availability?${query}`)
    expect((await ask(`from=${at(0)}&to=${at(399)}`)).status).toBe(200)
    for (const [query, path] of [
      [`from=${at(0)}&to=${at(400)}`, 'to'],
      [`from=${at(1)}&to=${at(0)}`, 'to'],
      [`from=2031-02-30&to=${at(0)}`, 'from'],
      [`to=${at(0)}`, 'from'],
      [`from=${at(0)}&to=${at(0)}&wild=perhaps`, 'wild'],
      [`from=${at(0)}&to=${at(0)}&colour=blue`, 'colour'],
    ] as const) {
      const reply = await ask(query)
      expect(reply.status, query).toBe(400)
      expect((reply.body as { errors: { path: string }[] }).errors.map((error) => error.path)).toContain(path)
    }
    expect((await ada.agent.get(`/api/kinds/nothing/availability?from=${at(0)}&to=${at(0)}`)).status).toBe(
      404,
    )
  })

  it('takes as many statements for a busy kind as for an idle one', async () => {
    const { app, bo, free, want } = setting(30, { maxPerMember: 99 })
    app.statements()
    await free(0, 30)
    const idle = app.statements().length
    for (let loan = 0; loan < 25; loan += 1) await askFor(bo, want(loan % 5, 6 + (loan % 7)))
    app.statements()
    await free(0, 30)
    expect(app.statements()).toHaveLength(idle)
    expect(idle).toBeLessThanOrEqual(6)
  })
})

describe('the availability of every kind', () => {
  it('lists the free count of each kind by day, and only of the category asked for', async () => {
    const { app, ada, bo, sam, kind, want, at } = setting(2)
    const siphon = makeShelf(app, sam, 1, { name: 'Siphon', category: 'transfer' }).kind
    const empty = makeShelf(app, sam, 0, { name: 'Zester', category: 'other' }).kind
    await askFor(bo, want(1, 1))
    const get = async (query = '') =>
      ((await ada.agent.get(`/api/availability?from=${at(0)}&to=${at(3)}${query}`)).body as ShelfAvailability)
        .kinds
    expect(await get()).toEqual([
      { kindId: kind.id, name: kind.name, serviceable: 2, minFree: 1, free: [2, 1, 1, 2] },
      { kindId: siphon.id, name: 'Siphon', serviceable: 1, minFree: 1, free: [1, 1, 1, 1] },
      { kindId: empty.id, name: 'Zester', serviceable: 0, minFree: 0, free: [0, 0, 0, 0] },
    ])
    expect((await get('&category=transfer')).map(({ kindId }) => kindId)).toEqual([siphon.id])
    app.statements()
    await get()
    expect(app.statements().length).toBeLessThanOrEqual(6)
  })
})
