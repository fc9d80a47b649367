import { describe, expect, it } from 'vitest'
import type { Lot, ShoppingList } from '#shared/larder/contract'
import { write } from '#server/db/open'
import { expiringLots, lowStock } from '#server/services/larder/low-stock'
import { releaseReservations, reservationsOf, reserveIngredients } from '#server/services/larder/reservations'
import { addBatch } from '#tests/support/batch-rows'
import { draw, makeIngredient, makeLot } from '#tests/support/larder'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'
import { day } from '#shared/time/day'

describe('what planned batches need', () => {
  it('is held back, drawn down by the batch itself, and let go', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const honey = makeIngredient(app)
    const lot = makeLot(app, sam, honey)
    const batch = addBatch(app, ada)
    const stock = async () =>
      ((await ada.agent.get(`/api/ingredients/${honey.id}`)).body as { stock: object }).stock
    const need = { ingredientId: honey.id, quantity: 400 }
    const short = write(app.db, (tx) =>
      reserveIngredients(app.deps, tx, batch, [
        { ...need, neededOn: day('2031-06-01') },
        { ...need, quantity: 200 },
      ]),
    )
    expect(short).toEqual([])
    expect(reservationsOf(app.db, batch)).toEqual([
      { ingredientId: honey.id, quantity: 600, neededOn: '2031-06-01' },
    ])
    expect(await stock()).toMatchObject({ reserved: 600, free: 400, usable: 1000 })
    await draw(ada, lot, 250, batch)
    expect(await stock()).toMatchObject({ reserved: 350, free: 400, usable: 750 })
    const slip = (await draw(ada, lot, 400, batch)).body as { id: string }
    expect(await stock()).toMatchObject({ reserved: 0, free: 350 })
    await ada.agent.post(`/api/moves/${slip.id}/undo`).send({})
    expect(await stock()).toMatchObject({ reserved: 350, free: 400 })
    write(app.db, (tx) => releaseReservations(tx, batch))
    expect(await stock()).toMatchObject({ reserved: 0, free: 750 })
  })

  it('goes on the shopping list where the larder lacks it', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const honey = makeIngredient(app, { name: 'Heather honey' })
    makeLot(app, sam, honey)
    const needs = [{ ingredientId: honey.id, quantity: 700 }]
    write(app.db, (tx) => reserveIngredients(app.deps, tx, addBatch(app, ada), needs))
    const short = write(app.db, (tx) => reserveIngredients(app.deps, tx, addBatch(app, bo), needs))
    expect(short).toEqual([{ ingredientId: honey.id, short: 400 }])
    const list = (await ada.agent.get('/api/shopping-list')).body as ShoppingList
    expect(list.items).toMatchObject([{ name: 'Heather honey', usable: 1000, reserved: 1400, toBuy: 400 }])
  })
})

describe('what the desk is told', () => {
  it('names what runs low, the emptiest first, and what should be used', () => {
    const app = testApp()
    const { sam } = people(app)
    const par = { parLevel: 100 }
    const half = makeIngredient(app, { name: 'Half', ...par })
    makeIngredient(app, { name: 'Gone', ...par })
    const full = makeIngredient(app, { name: 'Full', ...par })
    makeLot(app, sam, half, { quantity: 50 })
    const put = (bestBefore: string) =>
      makeLot(app, sam, full, { quantity: 100, bestBefore: bestBefore as Lot['bestBefore'] })
    put('2031-05-20')
    put('2031-05-01')
    put('2032-05-01')
    expect(lowStock(app.deps).map((line) => [line.name, line.state, line.toBuy])).toEqual([
      ['Gone', 'out', 100],
      ['Half', 'low', 50],
    ])
    expect(expiringLots(app.deps).map((lot) => [lot.name, lot.state])).toEqual([
      ['Full', 'past'],
      ['Full', 'soon'],
    ])
  })
})
