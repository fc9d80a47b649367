import { describe, expect, it } from 'vitest'
import type { Batch } from '#shared/batches/contract'
import type { BatchStep } from '#shared/batches/plan-contract'
import { ask, cyserRequest, makeCyser, makeLarder, makeShelf } from '#tests/support/makers/batches'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

async function house(more: object = {}) {
  const app = testApp()
  const cast = people(app)
  makeShelf(app)
  const larder = makeLarder(app, cast.sam)
  const batch = await makeCyser(cast.ada, larder, more)
  const path = `/api/batches/${batch.id}`
  const save = (steps: unknown, version = 1) =>
    cast.ada.agent.put(`${path}/steps`).set('If-Match', `"${version}"`).send({ steps })
  return { app, larder, batch, path, save, ...cast }
}
const errorPaths = (reply: { body: unknown }) =>
  (reply.body as { errors: { path: string }[] }).errors.map((error) => error.path)

describe('a recipe', () => {
  it('is of the larder and of one’s own, and comes back with what each is made of', async () => {
    const { ada, larder, batch, path } = await house()
    expect(batch.recipe[0]).toMatchObject({
      name: 'Apple juice',
      ml: 3600,
      ingredientId: larder.juice,
      gramsPerUnit: 1.05,
      composition: { solubleFraction: 0.12 },
    })
    const recipe = [
      { name: 'Windfalls from the garden', grams: 900, composition: null },
      { ingredientId: larder.honey, grams: 500 },
    ]
    const changed = await ask<Batch>(ada.agent.patch(path).set('If-Match', '"1"').send({ recipe }))
    expect(changed.recipe.map(({ name, grams, ingredientId }) => [name, grams, ingredientId])).toEqual([
      ['Windfalls from the garden', 900, null],
      ['Heather honey', 500, larder.honey],
    ])
    expect(changed.usualFg).toBe(0.998)
  })

  it.each([
    [{ ingredientId: 'nothing', grams: 5 }, 'recipe.0.ingredientId'],
    [{ ingredientId: 'honey', ml: 5 }, 'recipe.0.ml'],
    [{ ingredientId: 'honey', grams: 0 }, 'recipe.0.grams'],
    [{ ingredientId: 'honey', grams: 5, ml: 5 }, 'recipe.0.grams'],
    [{ ingredientId: 'honey', name: 'Honey', grams: 5 }, 'recipe.0.ingredientId'],
    [{ ingredientId: 'honey', grams: 5, perBottle: true }, 'recipe.0.perBottle'],
    [{ grams: 5 }, 'recipe.0.ingredientId'],
    [{ name: 'Honey' }, 'recipe.0.grams'],
    [{ name: 'Honey', grams: 5, stage: 'later' }, 'recipe.0.stage'],
  ])('with a line %j is refused by its place', async (line, at) => {
    const { ada, larder } = await house()
    const named =
      'ingredientId' in line && line.ingredientId === 'honey' ? { ...line, ingredientId: larder.honey } : line
    const reply = await ada.agent
      .post('/api/batches')
      .send({ name: 'Odd', style: 'mead', volumeLitres: 5, recipe: [named] })
    expect(reply.status).toBe(400)
    expect(errorPaths(reply)).toEqual([at])
  })
})

describe('the steps of a batch', () => {
  it('are written as a whole; a step that keeps its id keeps its tick', async () => {
    const { ada, batch, path, save } = await house()
    const [first, , cooling] = batch.steps
    await ask(ada.agent.post(`${path}/steps/${first!.id}/done`).send({ note: 'Half a tablet, dissolved' }))
    const steps = [
      { id: first!.id, kind: 'prepare', title: 'Treat the water well', dayOffset: 0 },
      {
        id: cooling!.id,
        kind: 'prepare',
        title: 'Cool',
        dayOffset: 0,
        needs: [{ kindId: 'demijohn', untilStep: 2 }],
      },
      { kind: 'bottle', title: 'Bottle', dayOffset: 30, needs: [{ kindId: 'siphon', fromDays: -1 }] },
    ]
    const saved = await ask<{ version: number; steps: BatchStep[] }>(save(steps, 2))
    expect(saved.steps.map(({ title }) => title)).toEqual(['Treat the water well', 'Cool', 'Bottle'])
    expect(saved.steps[0]).toMatchObject({ id: first!.id, doneNote: 'Half a tablet, dissolved' })
    expect(saved.steps[1]?.needs[0]?.untilStepId).toBe(saved.steps[2]!.id)
    expect(await ask<Batch>(ada.agent.get(path))).toMatchObject({ version: saved.version })
    expect((await save(steps.slice(0, 1), 2)).status).toBe(412)
  })

  it.each([
    [[], 'steps'],
    [[{ kind: 'nap', title: 'Nap', dayOffset: 0 }], 'steps.0.kind'],
    [[{ kind: 'rack', title: '', dayOffset: 0 }], 'steps.0.title'],
    [[{ kind: 'rack', title: 'Rack', dayOffset: -1 }], 'steps.0.dayOffset'],
    [[{ kind: 'rack', title: 'Rack', dayOffset: 1.5 }], 'steps.0.dayOffset'],
    [[{ id: 'nobody', kind: 'rack', title: 'Rack', dayOffset: 1 }], 'steps.0.id'],
    [
      [{ kind: 'rack', title: 'Rack', dayOffset: 1, needs: [{ kindId: 'nothing' }] }],
      'steps.0.needs.0.kindId',
    ],
    [
      [{ kind: 'rack', title: 'Rack', dayOffset: 1, needs: [{ kindId: 'siphon', fromDays: -2 }] }],
      'steps.0.needs.0',
    ],
    [
      [{ kind: 'rack', title: 'Rack', dayOffset: 1, needs: [{ kindId: 'siphon', untilStep: 7 }] }],
      'steps.0.needs.0',
    ],
  ])('%j are refused by their place', async (steps, at) => {
    const { save } = await house()
    const reply = await save(steps)
    expect(reply.status).toBe(400)
    expect(errorPaths(reply)).toEqual([at])
  })

  it('are ticked once, with a moment and a note, and the tick comes off again', async () => {
    const { app, ada, batch, path } = await house()
    const pitch = batch.steps.find(({ kind }) => kind === 'pitch')!
    const done = `${path}/steps/${pitch.id}/done`
    expect((await ada.agent.post(done).send({ at: '2031-05-07T10:00:00Z' })).status).toBe(400)
    const ticked = await ask<BatchStep>(
      ada.agent.post(done).send({ at: '2031-05-05T19:00:00Z', note: 'Lively' }),
    )
    expect(ticked).toMatchObject({ doneAt: '2031-05-05T19:00:00.000Z', doneNote: 'Lively' })
    expect((await ada.agent.post(done).send({})).body).toMatchObject({ code: 'wrong-state' })
    // Yeast in the must: it ferments from then on.
    expect(await ask<Batch>(ada.agent.get(path))).toMatchObject({
      status: 'fermenting',
      pitchedAt: '2031-05-05T19:00:00.000Z',
      next: { title: 'First feed' },
    })
    expect(await ask<BatchStep>(ada.agent.delete(done))).toMatchObject({ doneAt: null, doneNote: null })
    expect((await ada.agent.delete(done)).status).toBe(409)
    expect((await ada.agent.post(`${path}/steps/nobody/done`).send({})).status).toBe(404)
    expect(app.clock.today()).toBe('2031-05-06')
  })

  it('are its maker’s to tick', async () => {
    const { bo, batch, path } = await house({ visibility: 'space' })
    const done = `${path}/steps/${batch.steps[0]!.id}/done`
    expect((await bo.agent.post(done).send({})).status).toBe(403)
    expect((await bo.agent.put(`${path}/steps`).set('If-Match', '"1"').send({ steps: [] })).status).toBe(400)
  })

  it('grow by one that needs no kit, in its place', async () => {
    const { ada, path } = await house()
    const body = { kind: 'feed', title: 'One more feed', on: '2031-05-14' }
    const added = await ask<BatchStep>(ada.agent.post(`${path}/steps`).send(body), 201)
    expect(added).toMatchObject({ title: 'One more feed', dayOffset: 8 })
    const { steps } = await ask<Batch>(ada.agent.get(path))
    expect(steps.map(({ dayOffset }) => dayOffset)).toEqual(
      [...steps.map(({ dayOffset }) => dayOffset)].sort((a, b) => a - b),
    )
    expect((await ada.agent.post(`${path}/steps`).send({ ...body, on: '2031-05-01' })).status).toBe(400)
  })
})

describe('copying a batch', () => {
  it('starts the next one from recipe and steps, undated and private, scaled to its volume', async () => {
    const { ada, batch, path } = await house({ visibility: 'space', notes: 'Mine' })
    const copy = await ask<Batch>(ada.agent.post(`${path}/copy`).send({ volumeLitres: 9 }), 201)
    expect(copy).toMatchObject({
      name: 'Windfall cyser 2',
      volumeLitres: 9,
      visibility: 'private',
      status: 'planned',
      startOn: null,
      copiedFromId: batch.id,
      notes: 'Mine',
    })
    expect(copy.recipe.map(({ quantity }) => quantity)).toEqual([7200, 1400, 1])
    expect(copy.steps.map(({ title, dayOffset }) => [title, dayOffset])).toEqual(
      batch.steps.map(({ title, dayOffset }) => [title, dayOffset]),
    )
    const vessel = copy.steps.flatMap(({ needs }) => needs).find(({ kindId }) => kindId === 'demijohn')
    expect(copy.steps.map(({ id }) => id)).toContain(vessel?.untilStepId)
    expect(copy.readings).toEqual([])
  })

  it('takes one that another member shows, without their notes, and none they keep private', async () => {
    const { ada, bo, path } = await house({ visibility: 'space', notes: 'Do not tell Bo' })
    const copy = await ask<Batch>(bo.agent.post(`${path}/copy`).send({ name: 'After Ada' }), 201)
    expect(copy).toMatchObject({ name: 'After Ada', mine: true, notes: '' })
    await ask(ada.agent.patch(path).set('If-Match', '"1"').send({ visibility: 'private' }))
    expect((await bo.agent.post(`${path}/copy`).send({})).status).toBe(404)
    // What was copied stays; its source is only an id now.
    expect((await bo.agent.get(`/api/batches/${copy.id}`)).status).toBe(200)
  })
})

describe('a tasting', () => {
  it('is written down once there is something to taste', async () => {
    const { ada, batch, path } = await house()
    const body = {
      tastedOn: '2031-05-06',
      nose: 'Apple, a little wax',
      again: 'with-changes',
      changes: 'Less honey',
    }
    expect((await ada.agent.post(`${path}/tastings`).send(body)).status).toBe(409)
    const pitch = batch.steps.find(({ kind }) => kind === 'pitch')!
    await ask(ada.agent.post(`${path}/steps/${pitch.id}/done`).send({}))
    await ask(ada.agent.post(`${path}/tastings`).send(body), 201)
    expect((await ask<Batch>(ada.agent.get(path))).tastings).toEqual([expect.objectContaining(body)])
    expect(
      errorPaths(await ada.agent.post(`${path}/tastings`).send({ ...body, tastedOn: '2031-05-09' })),
    ).toEqual(['tastedOn'])
  })
})

describe('what a list shows', () => {
  it('costs as many statements for fifty full batches as for one', async () => {
    const { app, ada, larder } = await house()
    app.statements()
    await ada.agent.get('/api/batches')
    const forOne = app.statements().length
    for (let n = 0; n < 49; n++) await ask(ada.agent.post('/api/batches').send(cyserRequest(larder)), 201)
    app.statements()
    const page = await ask<{ items: Batch[] }>(ada.agent.get('/api/batches'))
    expect(app.statements().length).toBe(forOne)
    expect(page.items).toHaveLength(50)
    expect(page.items[0]?.next).toMatchObject({ title: 'Treat the water' })
  })
})
