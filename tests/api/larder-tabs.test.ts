import { describe, expect, it } from 'vitest'
import type { Tab } from '#shared/larder/tab-contract'
import { addBatch } from '#tests/support/batch-rows'
import { draw, makeIngredient, makeLot } from '#tests/support/larder'
import { people, person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

const tabOf = async (who: { agent: { get: (path: string) => PromiseLike<{ body: unknown }> } }, query = '') =>
  (await who.agent.get(`/api/me/tab${query}`)).body as Tab

describe('a tab', () => {
  it('starts even', async () => {
    const { ada } = people(testApp())
    expect(await tabOf(ada)).toMatchObject({ currency: 'GBP', balanceMinor: 0, items: [] })
  })

  it('says what was drawn, for which batch, and what was owed after each', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const honey = makeIngredient(app, { name: 'Lime honey' })
    const lot = makeLot(app, sam, honey)
    await draw(ada, lot, 500, addBatch(app, ada))
    app.clock.advance({ days: 2 })
    await draw(ada, lot, 70)
    const steward = person(app, 'Sol Tarn', 'steward')
    const settled = await steward.agent
      .post(`/api/members/${ada.id}/settlements`)
      .send({ amountMinor: 600, method: 'cash', note: 'In the tin' })
    expect(settled.status).toBe(201)
    expect(settled.body).toMatchObject({ amountMinor: 600, balanceMinor: 84 })
    const tab = await tabOf(ada)
    expect(tab).toMatchObject({ balanceMinor: 84, openingMinor: 0 })
    expect(tab.items.map((i) => [i.kind, i.amountMinor, i.balanceMinor, i.batchName])).toEqual([
      ['settlement', -600, 84, null],
      ['draw', 84, 684, null],
      ['draw', 600, 600, 'Windfall cyser'],
    ])
    const later = await tabOf(ada, '?from=2031-05-07')
    expect(later).toMatchObject({ openingMinor: 600, balanceMinor: 84 })
    expect(later.items).toHaveLength(2)
    expect((await tabOf(ada, '?to=2031-05-06')).items).toHaveLength(1)
  })

  it('is its member’s and the stewards’, without the batch for the latter; for others it is not there', async () => {
    const app = testApp()
    const { ada, bo, sam, kit } = people(app)
    await draw(ada, makeLot(app, sam, makeIngredient(app)), 100, addBatch(app, ada))
    const path = `/api/members/${ada.id}/tab`
    expect((await bo.agent.get(path)).status).toBe(404)
    expect((await ada.agent.get(path)).body).toMatchObject({ items: [{ batchName: 'Windfall cyser' }] })
    for (const steward of [sam, kit]) {
      const seen = await steward.agent.get(path)
      expect(seen.body).toMatchObject({
        memberName: 'Ada Marsh',
        balanceMinor: 120,
        items: [{ batchId: null, batchName: null }],
      })
    }
    expect((await sam.agent.get('/api/members/nobody/tab')).status).toBe(404)
    expect((await bo.agent.get('/api/tabs')).status).toBe(403)
    expect((await sam.agent.get('/api/tabs')).body).toMatchObject({
      items: [{ memberId: ada.id, balanceMinor: 120 }],
    })
  })

  it('is settled by stewards only, and only with an amount that makes sense', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const settle = (who: typeof ada, body: object, id = ada.id) =>
      who.agent.post(`/api/members/${id}/settlements`).send(body)
    expect((await settle(ada, { amountMinor: 5, method: 'cash' })).status).toBe(403)
    expect((await settle(bo, { amountMinor: 5, method: 'cash' })).status).toBe(403)
    for (const body of [
      { amountMinor: 0, method: 'cash' },
      { amountMinor: -5, method: 'cash' },
      { amountMinor: 0, method: 'correction' },
      { amountMinor: 1.5, method: 'cash' },
      { amountMinor: 5, method: 'card' },
      { amountMinor: 1e12, method: 'cash' },
    ])
      expect((await settle(sam, body)).status, JSON.stringify(body)).toBe(400)
    expect((await settle(sam, { amountMinor: 5, method: 'cash' }, 'nobody')).status).toBe(404)
    expect((await settle(sam, { amountMinor: 500, method: 'in-kind' })).body).toMatchObject({
      balanceMinor: -500,
    })
    expect((await settle(sam, { amountMinor: -500, method: 'correction' })).body).toMatchObject({
      balanceMinor: 0,
    })
    for (const sql of ['UPDATE settlements SET amount_minor = 1', 'DELETE FROM settlements'])
      expect(() => app.db.$client.exec(sql)).toThrow('SETTLEMENTS_ONLY_GROW')
  })

  it('takes as many statements for a hundred draws as for one', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const lot = makeLot(app, sam, makeIngredient(app))
    await draw(ada, lot, 1)
    app.statements()
    await tabOf(ada)
    const few = app.statements().length
    for (let i = 0; i < 100; i++) await draw(ada, lot, 1)
    app.statements()
    const tab = await tabOf(ada)
    expect(app.statements().length).toBe(few)
    expect(tab.items).toHaveLength(101)
    expect(few).toBeLessThanOrEqual(6)
  })
})
