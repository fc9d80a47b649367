import { describe, expect, it } from 'vitest'
import type { Stocktake } from '#shared/larder/contract'
import { moves, stocktakes } from '#server/db/schema/larder'
import { draw, makeIngredient, makeLot } from '#tests/support/larder'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

function shelf() {
  const app = testApp()
  const cast = people(app)
  const honey = makeIngredient(app)
  const caps = makeIngredient(app, { unit: 'each', kind: 'closure' })
  const jar = makeLot(app, cast.sam, honey, { shelf: 'A1' })
  const box = makeLot(app, cast.sam, caps, { quantity: 200, costMinor: 400 })
  return { app, ...cast, jar, box }
}

describe('a stocktake', () => {
  it('recounts the shelf in one go and says what was different', async () => {
    const { ada, sam, jar, box } = shelf()
    const lines = [
      { lotId: jar.id, seen: 1000, counted: 950 },
      { lotId: box.id, seen: 200, counted: 200 },
    ]
    expect((await ada.agent.post('/api/stocktakes').send({ lines })).status).toBe(403)
    const made = await sam.agent.post('/api/stocktakes').send({ lines, note: 'Spring count' })
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({
      note: 'Spring count',
      counted: 2,
      different: 1,
      valueMinor: -60,
      by: { id: sam.id },
      lines: [
        { lotId: jar.id, seen: 1000, counted: 950, difference: -50, valueMinor: -60, shelf: 'A1' },
        { lotId: box.id, difference: 0, valueMinor: 0 },
      ],
    })
    const { id } = made.body as Stocktake
    expect((await sam.agent.get(`/api/stocktakes/${id}`)).body).toEqual(made.body)
    expect((await sam.agent.get('/api/stocktakes')).body).toMatchObject({ items: [{ id, different: 1 }] })
    expect((await ada.agent.get(`/api/stocktakes/${id}`)).status).toBe(403)
    expect((await ada.agent.get('/api/me/tab')).body).toMatchObject({ balanceMinor: 0 })
  })

  it('is refused line by line when a lot moved meanwhile, and then nothing is written', async () => {
    const { app, ada, sam, jar, box } = shelf()
    await draw(ada, jar, 70)
    const before = app.db.select().from(moves).all().length
    const reply = await sam.agent.post('/api/stocktakes').send({
      lines: [
        { lotId: box.id, seen: 200, counted: 190 },
        { lotId: jar.id, seen: 1000, counted: 1000 },
      ],
    })
    expect(reply.status).toBe(409)
    expect(reply.body).toMatchObject({
      code: 'wrong-state',
      lines: [{ index: 1, lotId: jar.id, seen: 1000, remaining: 930 }],
    })
    expect(app.db.select().from(moves).all()).toHaveLength(before)
    expect(app.db.select().from(stocktakes).all()).toEqual([])
  })

  it('refuses a lot twice, half a cap, a lot that is not there, and no lines at all', async () => {
    const { sam, jar, box } = shelf()
    const refused = async (lines: object[]) => {
      const reply = await sam.agent.post('/api/stocktakes').send({ lines })
      expect(reply.status).toBe(400)
      return (reply.body as { errors: { path: string }[] }).errors.map((error) => error.path)
    }
    const line = { lotId: jar.id, seen: 1000, counted: 1 }
    expect(await refused([line, line])).toEqual(['lines'])
    expect(await refused([{ lotId: box.id, seen: 200, counted: 1.5 }])).toEqual(['lines.0.counted'])
    expect(await refused([line, { ...line, lotId: 'nothing' }])).toEqual(['lines.1.lotId'])
    expect(await refused([{ ...line, counted: -1 }])).toEqual(['lines.0.counted'])
    expect(await refused([])).toEqual(['lines'])
  })
})
