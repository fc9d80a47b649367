import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { describe, expect, it } from 'vitest'
import type { Ingredient, Lot, Move, ShoppingList } from '#shared/larder/contract'
import { lots, moves } from '#server/db/schema/larder'
import { addBatch } from '#tests/support/batch-rows'
import { draw, makeIngredient, makeLot, move } from '#tests/support/larder'
import { people, person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

const items = <T>(reply: { body: unknown }) => (reply.body as { items: T[] }).items

describe('the catalogue', () => {
  it('is kept by stewards and read by everyone, with allergens and composition', async () => {
    const { ada, sam } = people(testApp())
    const meadowsweet = {
      name: 'Wheat malt',
      unit: 'g',
      kind: 'malt',
      allergens: ['sulphites', 'cereals-with-gluten', 'sulphites'],
      composition: { waterFraction: 0.04, solubleFraction: 0.8, fermentableFraction: 0.75 },
      parLevel: 2000,
    }
    expect((await ada.agent.post('/api/ingredients').send(meadowsweet)).status).toBe(403)
    const made = await sam.agent.post('/api/ingredients').send(meadowsweet)
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({
      ...meadowsweet,
      allergens: ['cereals-with-gluten', 'sulphites'],
      stock: { remaining: 0, state: 'out', dateState: 'undated' },
      version: 1,
    })
    const { id } = made.body as Ingredient
    expect((await ada.agent.get(`/api/ingredients/${id}`)).body).toEqual(made.body)
    const same = await sam.agent.post('/api/ingredients').send({ name: 'WHEAT malt', unit: 'g' })
    expect(same.body).toMatchObject({ code: 'invalid', errors: [{ path: 'name' }] })
  })

  it('changes by version and never its unit', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const path = `/api/ingredients/${makeIngredient(app).id}`
    expect((await sam.agent.patch(path).send({ parLevel: 5 })).status).toBe(428)
    expect((await ada.agent.patch(path).set('If-Match', '"1"').send({ parLevel: 5 })).status).toBe(403)
    const changed = await sam.agent.patch(path).set('If-Match', '"1"').send({ parLevel: 5, note: null })
    expect(changed.body).toMatchObject({ parLevel: 5, version: 2 })
    expect(changed.get('etag')).toBe('"2"')
    expect((await sam.agent.patch(path).set('If-Match', '"1"').send({ parLevel: 6 })).status).toBe(412)
    const unit = await sam.agent.patch(path).set('If-Match', '"2"').send({ unit: 'ml' })
    expect(unit.body).toMatchObject({ code: 'invalid', errors: [{ path: 'unit' }] })
  })

  it('finds by name, group and state, page by page, in the same number of statements', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const honey = makeIngredient(app, { name: 'Ling honey', parLevel: 500 })
    makeIngredient(app, { name: 'Crown cap', unit: 'each', kind: 'closure', parLevel: 100 })
    makeIngredient(app, { name: 'Bentonite', kind: 'fining' })
    makeLot(app, sam, honey, { quantity: 600, bestBefore: '2031-05-20' as Lot['bestBefore'] })
    const names = async (query: string) =>
      items<Ingredient>(await ada.agent.get(`/api/ingredients?${query}`)).map((found) => found.name)
    expect(await names('')).toEqual(['Bentonite', 'Crown cap', 'Ling honey'])
    expect(await names('q=HON')).toEqual(['Ling honey'])
    expect(await names('group=bottling')).toEqual(['Crown cap'])
    expect(await names('state=low')).toEqual(['Crown cap'])
    expect(await names('state=soon')).toEqual(['Ling honey'])
    const first = (await ada.agent.get('/api/ingredients?limit=2')).body as { nextCursor: string }
    expect(await names(`limit=2&cursor=${first.nextCursor}`)).toEqual(['Ling honey'])
    app.statements()
    await ada.agent.get('/api/ingredients')
    const few = app.statements().length
    for (let i = 0; i < 40; i++) makeLot(app, sam, makeIngredient(app))
    app.statements()
    await ada.agent.get('/api/ingredients')
    expect(app.statements().length).toBe(few)
  })
})

describe('a lot', () => {
  it('is put on the shelf whole, carries the allergens of what it is, and says who put it there', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const eggs = makeIngredient(app, { name: 'Egg white', kind: 'fining', allergens: ['eggs'] })
    const body = {
      ingredientId: eggs.id,
      quantity: 250.5,
      costMinor: 310,
      bestBefore: '2031-05-10',
      shelf: 'F1',
    }
    const made = await ada.agent.post('/api/lots').send(body)
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({
      ...body,
      remaining: 250.5,
      valueMinor: 310,
      currency: 'GBP',
      allergens: ['eggs'],
      dateState: 'soon',
      openedOn: null,
      addedBy: { name: 'Ada Marsh' },
    })
    expect((await bo.agent.get(`/api/lots/${(made.body as Lot).id}`)).text).not.toContain(ada.email)
  })

  it('refuses half a piece, another currency, a day to come and an ingredient that is not there', async () => {
    const app = testApp()
    const { ada } = people(app)
    const cap = makeIngredient(app, { unit: 'each', kind: 'closure' })
    const base = { ingredientId: cap.id, quantity: 10 }
    const refused = async (more: object) =>
      (await ada.agent.post('/api/lots').send({ ...base, ...more })).body as { errors: { path: string }[] }
    expect((await refused({ quantity: 0.5 })).errors[0]?.path).toBe('quantity')
    expect((await refused({ quantity: 0 })).errors[0]?.path).toBe('quantity')
    expect((await refused({ currency: 'EUR' })).errors[0]?.path).toBe('currency')
    expect((await refused({ openedOn: '2031-05-07' })).errors[0]?.path).toBe('openedOn')
    expect((await refused({ bestBefore: '2031-02-30' })).errors[0]?.path).toBe('bestBefore')
    expect((await refused({ ingredientId: 'nothing' })).errors[0]?.path).toBe('ingredientId')
    expect((await refused({ costMinor: 12.5 })).errors[0]?.path).toBe('costMinor')
    expect(app.db.select().from(lots).all()).toEqual([])
  })

  it('is corrected by the one who added it and by stewards; its cost only while none of it has gone', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app))
    const patch = (who: typeof ada, version: number, body: object) =>
      who.agent.patch(`/api/lots/${lot.id}`).set('If-Match', `"${version}"`).send(body)
    expect((await patch(bo, 1, { shelf: 'B1' })).status).toBe(403)
    expect((await patch(ada, 1, { shelf: 'B1', costMinor: 900 })).body).toMatchObject({
      shelf: 'B1',
      costMinor: 900,
      valueMinor: 900,
      version: 2,
    })
    expect((await draw(bo, lot, 100)).body).toMatchObject({ costMinor: 90 })
    const late = await patch(sam, 3, { costMinor: 100 })
    expect(late.body).toMatchObject({ code: 'wrong-state' })
    expect((await patch(sam, 2, { shelf: null })).status).toBe(412)
    expect((await patch(sam, 3, { shelf: null })).body).toMatchObject({ shelf: null, costMinor: 900 })
  })

  it('is opened by the first draw, and then keeps for its time', async () => {
    const app = testApp()
    const { ada } = people(app)
    const juice = makeIngredient(app, { unit: 'ml', kind: 'juice', keepsOpenedDays: 5 })
    const lot = makeLot(app, ada, juice, { bestBefore: '2031-12-31' as Lot['bestBefore'] })
    await draw(ada, lot, 200)
    expect((await ada.agent.get(`/api/lots/${lot.id}`)).body).toMatchObject({
      openedOn: '2031-05-06',
      useBy: '2031-05-11',
      dateState: 'soon',
      remaining: 800,
    })
  })

  it('is listed first expiring first or by shelf, page by page, empty ones left out', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const honey = makeIngredient(app)
    const put = (bestBefore: string | null, shelf: string) =>
      makeLot(app, sam, honey, { bestBefore: bestBefore as Lot['bestBefore'], shelf })
    const late = put('2032-01-01', 'A1')
    const undated = put(null, 'A2')
    const soon = put('2031-05-20', 'A3')
    const gone = put('2031-05-15', 'A0')
    await draw(ada, gone, 1000)
    const ids = async (query: string) =>
      items<Lot>(await ada.agent.get(`/api/lots?${query}`)).map((lot) => lot.id)
    expect(await ids(`ingredientId=${honey.id}`)).toEqual([soon.id, late.id, undated.id])
    expect(await ids('sort=shelf')).toEqual([late.id, undated.id, soon.id])
    expect(await ids('empty=1')).toHaveLength(4)
    expect(await ids('state=soon')).toEqual([soon.id])
    const first = (await ada.agent.get('/api/lots?limit=2')).body as { nextCursor: string }
    expect(await ids(`limit=2&cursor=${first.nextCursor}`)).toEqual([undated.id])
  })
})

describe('drawing', () => {
  it('takes from the lot, puts the cost on the tab, and names the allergens', async () => {
    const app = testApp()
    const { ada } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app, { allergens: ['sulphites'] }))
    const reply = await draw(ada, lot, 70)
    expect(reply.status).toBe(201)
    expect(reply.body).toMatchObject({
      reason: 'draw',
      quantity: 70,
      delta: -70,
      remaining: 930,
      costMinor: 84,
      currency: 'GBP',
      allergens: ['sulphites'],
      by: { id: ada.id },
    })
  })

  it('says what is left when there is not enough', async () => {
    const app = testApp()
    const { ada } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app), { quantity: 50 })
    const reply = await draw(ada, lot, 70)
    expect(reply.status).toBe(409)
    expect(reply.body).toMatchObject({ code: 'not-enough', remaining: 50, unit: 'g' })
    expect(app.db.select().from(moves).all()).toHaveLength(1)
  })

  it('answers the same key once', async () => {
    const app = testApp()
    const { ada } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app))
    const send = () => draw(ada, lot, 70).set('Idempotency-Key', 'one draw')
    const [first, again] = [await send(), await send()]
    expect(again.body).toEqual(first.body)
    expect(again.get('idempotency-replayed')).toBe('true')
    expect((await ada.agent.get(`/api/lots/${lot.id}`)).body).toMatchObject({ remaining: 930 })
  })

  it('goes into one’s own batch and no other', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app))
    const mine = addBatch(app, ada)
    expect((await draw(ada, lot, 10, mine)).body).toMatchObject({ batchId: mine })
    expect((await draw(bo, lot, 10, mine)).status).toBe(404)
    const seen = items<Move>(await bo.agent.get(`/api/lots/${lot.id}/moves`))
    expect(seen.map((m) => [m.reason, m.batchId, m.by, m.costMinor])).toEqual([
      ['draw', null, null, 0],
      ['opening', null, null, 0],
    ])
  })

  it('spreads over lots first expiring first, or takes nothing', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const honey = makeIngredient(app)
    const put = (bestBefore: string, quantity: number) =>
      makeLot(app, sam, honey, { bestBefore: bestBefore as Lot['bestBefore'], quantity })
    const old = put('2031-05-01', 500)
    const second = put('2031-09-01', 100)
    const first = put('2031-06-01', 40)
    const take = (quantity: number) => ada.agent.post(`/api/ingredients/${honey.id}/draws`).send({ quantity })
    const reply = (await take(100)).body as { moves: Move[]; costMinor: number }
    expect(reply.moves.map((m) => [m.lotId, m.quantity])).toEqual([
      [first.id, 40],
      [second.id, 60],
    ])
    expect(reply.costMinor).toBe(1200 + 720)
    expect((await take(41)).body).toMatchObject({ code: 'not-enough', remaining: 40 })
    expect((await ada.agent.get(`/api/lots/${old.id}`)).body).toMatchObject({ remaining: 500 })
  })

  it.each([
    [{ reason: 'draw', quantity: 0 }, 'quantity'],
    [{ reason: 'draw', quantity: -5 }, 'quantity'],
    [{ reason: 'draw', quantity: 0.0001 }, 'quantity'],
    [{ reason: 'draw', quantity: '70' }, 'quantity'],
    [{ reason: 'draw', quantity: 1e308 }, 'quantity'],
    [{ reason: 'draw', quantity: 1, costMinor: 1 }, 'costMinor'],
    [{ reason: 'waste', quantity: 1, batchId: 'b' }, 'batchId'],
    [{ reason: 'steal', quantity: 1 }, 'reason'],
    [{ reason: 'opening', quantity: 1 }, 'reason'],
    [{ reason: 'draw', quantity: 1, memberId: 'someone' }, 'memberId'],
  ])('refuses %o', async (body, path) => {
    const app = testApp()
    const { ada } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app))
    const reply = await ada.agent.post(`/api/lots/${lot.id}/moves`).send(body)
    expect(reply.status).toBe(400)
    expect((reply.body as { errors: { path: string }[] }).errors[0]?.path).toBe(path)
    expect(app.db.select().from(moves).all()).toHaveLength(1)
  })

  it('is not for a suspended member, who can still look', async () => {
    const app = testApp()
    const { sam } = people(app)
    const paused = person(app, 'Paused Penn', 'member', 'suspended')
    const lot = makeLot(app, sam, makeIngredient(app))
    expect((await draw(paused, lot, 1)).body).toMatchObject({ code: 'suspended' })
    expect((await paused.agent.get('/api/lots')).status).toBe(200)
    expect((await paused.agent.get('/api/me/tab')).status).toBe(200)
  })
})

describe('fifty people at one jar', () => {
  it('lets 14 draws of 70 g out of 1000 g and leaves 20 g', async () => {
    const app = testApp()
    const { sam } = people(app)
    const crowd = Array.from({ length: 50 }, (_, index) => person(app, `Guest ${index}`))
    const lot = makeLot(app, sam, makeIngredient(app))
    const server = createServer(app.app)
    await new Promise<void>((resolve) => server.listen(0, resolve))
    const address = `http://localhost:${(server.address() as AddressInfo).port}/api/lots/${lot.id}/moves`
    try {
      const statuses = await Promise.all(
        crowd.map(async (guest) => {
          const reply = await fetch(address, {
            method: 'POST',
            headers: { 'Content-Type': 'application/json', Cookie: guest.cookie },
            body: JSON.stringify({ reason: 'draw', quantity: 70 }),
          })
          await reply.text()
          return reply.status
        }),
      )
      expect(statuses.filter((status) => status === 201)).toHaveLength(14)
      expect(statuses.filter((status) => status === 409)).toHaveLength(36)
    } finally {
      server.close()
    }
    expect((await sam.agent.get(`/api/lots/${lot.id}`)).body).toMatchObject({ remaining: 20, valueMinor: 24 })
  })
})

describe('topping up, wasting and recounting', () => {
  it('mixes prices and charges nobody', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const lot = makeLot(app, sam, makeIngredient(app))
    expect((await move(ada, lot, { reason: 'top-up', quantity: 500, costMinor: 300 })).body).toMatchObject({
      delta: 500,
      remaining: 1500,
      costMinor: 0,
    })
    expect((await draw(bo, lot, 150)).body).toMatchObject({ costMinor: 150 })
    await move(bo, lot, { reason: 'waste', quantity: 350, note: 'Spilt' })
    expect((await ada.agent.get(`/api/lots/${lot.id}`)).body).toMatchObject({
      remaining: 1000,
      valueMinor: 1000,
    })
    expect((await bo.agent.get('/api/me/tab')).body).toMatchObject({ balanceMinor: 150 })
  })

  it('leaves recounts to stewards', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app))
    const recount = { reason: 'recount' as const, quantity: 940 }
    expect((await move(ada, lot, recount)).body).toMatchObject({ status: 403, code: 'forbidden' })
    expect((await move(sam, lot, recount)).body).toMatchObject({
      reason: 'recount',
      quantity: 940,
      delta: -60,
      remaining: 940,
      costMinor: 0,
    })
    expect((await move(sam, lot, { reason: 'recount', quantity: 0 })).body).toMatchObject({ remaining: 0 })
  })
})

describe('a slip', () => {
  it('is undone by its maker within a quarter of an hour, as a move of its own', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app))
    const slip = (await draw(ada, lot, 700)).body as Move
    expect(slip.undoUntil).toBe('2031-05-06T10:15:00.000Z')
    const undo = (who: typeof ada, id = slip.id) => who.agent.post(`/api/moves/${id}/undo`).send({})
    expect((await undo(bo)).status).toBe(404)
    expect((await undo(sam)).status).toBe(404)
    const back = await undo(ada)
    expect(back.status).toBe(201)
    expect(back.body).toMatchObject({ undoes: slip.id, delta: 700, remaining: 1000, costMinor: -840 })
    expect((await undo(ada)).body).toMatchObject({ code: 'wrong-state' })
    expect((await undo(ada, (back.body as Move).id)).body).toMatchObject({ code: 'wrong-state' })
    expect((await ada.agent.get('/api/me/tab')).body).toMatchObject({ balanceMinor: 0 })
    const history = items<Move>(await ada.agent.get(`/api/lots/${lot.id}/moves`))
    expect(history.map((m) => [m.delta, m.undone])).toEqual([
      [700, false],
      [-700, true],
      [1000, false],
    ])
    const late = (await draw(ada, lot, 5)).body as Move
    app.clock.advance({ minutes: 16 })
    expect((await undo(ada, late.id)).body).toMatchObject({ code: 'wrong-state' })
  })
})

describe('the ledger in the database', () => {
  const insert = `INSERT INTO moves (id, lot_id, reason, delta_milli, value_minor, charge_minor, after_milli, member_id, at)
    VALUES (?, ?, 'draw', ?, 0, 0, ?, ?, '2031-05-06T10:00:00.000Z')`

  it('refuses what buggy code would try', () => {
    const app = testApp()
    const { ada } = people(app)
    const lot = makeLot(app, ada, makeIngredient(app), { quantity: 1 })
    const sqlite = app.db.$client
    const run = (sql: string, ...values: unknown[]) => sqlite.prepare(sql).run(...values)
    for (const form of ['INSERT', 'INSERT OR IGNORE', 'INSERT OR REPLACE', 'INSERT OR FAIL'])
      expect(() => run(insert.replace('INSERT', form), form, lot.id, -1001, 0, ada.id)).toThrow('LOT_SHORT')
    expect(() => run(insert, 'm', lot.id, -1, 1000, ada.id)).toThrow('LOT_LEDGER')
    for (const sql of [
      'UPDATE moves SET delta_milli = 5',
      "UPDATE moves SET note = 'changed'",
      "UPDATE OR IGNORE moves SET member_id = 'x'",
      'DELETE FROM moves',
      'UPDATE lots SET remaining_milli = 9999',
      'UPDATE lots SET quantity_milli = 9999',
      "INSERT OR REPLACE INTO moves SELECT seq, 'new', lot_id, reason, 2, value_minor, charge_minor, 1002, member_id, NULL, NULL, NULL, NULL, at FROM moves",
    ])
      expect(() => run(sql), sql).toThrow(/MOVES_ONLY_GROW|LOT_LEDGER|LOT_SHORT/)
    expect(sqlite.prepare('SELECT remaining_milli FROM lots').pluck().get()).toBe(1000)
    expect(sqlite.prepare('SELECT count(*) FROM moves').pluck().get()).toBe(1)
  })

  it('adds up a lot and lists stock by searching indexes', () => {
    const { db } = testApp()
    const plan = (sql: string) =>
      (db.$client.prepare(`EXPLAIN QUERY PLAN ${sql}`).all() as { detail: string }[])
        .map((step) => step.detail)
        .join('\n')
    expect(plan("SELECT sum(delta_milli) FROM moves WHERE lot_id = 'x'")).toMatch(
      /SEARCH moves USING COVERING INDEX moves_lot/,
    )
    expect(plan("SELECT sum(charge_minor) FROM moves WHERE member_id = 'x'")).toMatch(
      /SEARCH moves USING COVERING INDEX moves_member/,
    )
    expect(
      plan("SELECT id FROM lots WHERE remaining_milli > 0 AND ingredient_id = 'x' ORDER BY use_by"),
    ).toBe('SEARCH lots USING INDEX lots_stock (ingredient_id=?)')
  })
})

describe('the shopping list', () => {
  it('fills up to the par level, counts nothing past its date, and estimates at the last price', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const dap = makeIngredient(app, { name: 'Yeast food', kind: 'nutrient', parLevel: 200 })
    makeIngredient(app, { name: 'Nobody keeps this' })
    makeLot(app, sam, dap, { quantity: 40, costMinor: 100 })
    app.clock.advance({ minutes: 1 })
    makeLot(app, sam, dap, { quantity: 100, costMinor: 300, bestBefore: '2031-05-05' as Lot['bestBefore'] })
    const list = (await ada.agent.get('/api/shopping-list')).body as ShoppingList
    expect(list.items).toHaveLength(1)
    expect(list.items[0]).toMatchObject({
      name: 'Yeast food',
      usable: 40,
      past: 100,
      toBuy: 160,
      estimateMinor: 480,
    })
    const csv = await ada.agent.get('/api/shopping-list.csv')
    expect(csv.type).toBe('text/csv')
    expect(csv.text).toContain('Yeast food,Yeast food,160,g,40,0,200,4.80,GBP')
  })
})
