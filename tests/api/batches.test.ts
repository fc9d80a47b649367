import { describe, expect, it } from 'vitest'
import type { Batch } from '#shared/batches/contract'
import { people, person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

const cyser = { name: 'Windfall cyser', style: 'cyser', volumeLitres: 4.5 }

describe('the batch book', () => {
  it('starts a batch that only its maker sees', async () => {
    const { ada, bo, sam, kit } = people(testApp())
    const made = await ada.agent.post('/api/batches').send(cyser)
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({ ...cyser, status: 'planned', visibility: 'private', mine: true })
    const { id } = made.body as Batch
    expect((await ada.agent.get(`/api/batches/${id}`)).status).toBe(200)
    for (const other of [bo, sam, kit]) {
      expect((await other.agent.get(`/api/batches/${id}`)).status).toBe(404)
      expect((await other.agent.get('/api/batches')).body).toMatchObject({ items: [] })
      const change = other.agent.patch(`/api/batches/${id}`).set('If-Match', '"1"')
      expect((await change.send({ name: 'Mine now' })).status).toBe(404)
    }
  })

  it('shows a shared batch under its maker’s name, to read and not to change', async () => {
    const { ada, bo } = people(testApp())
    const made = await ada.agent.post('/api/batches').send({ ...cyser, visibility: 'space' })
    const { id } = made.body as Batch
    const seen = await bo.agent.get(`/api/batches/${id}`)
    expect(seen.body).toMatchObject({ memberName: 'Ada Marsh', mine: false })
    expect(seen.text).not.toContain(ada.email)
    const change = await bo.agent.patch(`/api/batches/${id}`).set('If-Match', '"1"').send({ name: 'Mine' })
    expect(change.status).toBe(403)
    const ofSpace = (await bo.agent.get('/api/batches?of=space')).body as { items: Batch[] }
    expect(ofSpace.items.map((batch) => batch.id)).toEqual([id])
    expect((await bo.agent.get('/api/batches?of=me')).body).toMatchObject({ items: [] })
  })

  it('wants the version that is changed, and refuses an older one', async () => {
    const { ada } = people(testApp())
    const made = await ada.agent.post('/api/batches').send(cyser)
    const path = `/api/batches/${(made.body as Batch).id}`
    expect(made.get('etag')).toBe('"1"')
    expect((await ada.agent.patch(path).send({ notes: 'x' })).status).toBe(428)
    const changed = await ada.agent.patch(path).set('If-Match', '"1"').send({ notes: 'Bramley and Dabinett' })
    expect(changed.body).toMatchObject({ version: 2, notes: 'Bramley and Dabinett', name: cyser.name })
    expect((await ada.agent.patch(path).set('If-Match', '"1"').send({ notes: 'y' })).status).toBe(412)
  })

  it('moves a batch only where a batch can go', async () => {
    const { ada } = people(testApp())
    const made = await ada.agent.post('/api/batches').send(cyser)
    const path = `/api/batches/${(made.body as Batch).id}`
    const to = (status: string, version: number) =>
      ada.agent.patch(path).set('If-Match', `"${version}"`).send({ status })
    expect((await to('finished', 1)).body).toMatchObject({ status: 409, code: 'wrong-state' })
    expect((await to('abandoned', 1)).body).toMatchObject({
      status: 'abandoned',
      endedAt: '2031-05-06T10:00:00.000Z',
    })
    expect((await to('planned', 2)).body).toMatchObject({ status: 'planned', endedAt: null })
  })

  it.each([
    [{ ...cyser, volumeLitres: 0 }, 'volumeLitres'],
    [{ ...cyser, volumeLitres: '4.5' }, 'volumeLitres'],
    [{ ...cyser, style: 'lemonade' }, 'style'],
    [{ ...cyser, name: ' ' }, 'name'],
    [{ ...cyser, name: 'x'.repeat(81) }, 'name'],
    [{ ...cyser, name: 'a\u202Eb' }, 'name'],
    [{ ...cyser, og: 2 }, 'og'],
    [{ ...cyser, memberId: 'someone' }, 'memberId'],
    [{ ...cyser, status: 'bottled' }, 'status'],
  ])('refuses %j by its field', async (body, path) => {
    const { ada } = people(testApp())
    const reply = await ada.agent.post('/api/batches').send(body)
    expect(reply.status).toBe(400)
    expect((reply.body as { errors: { path: string }[] }).errors.map((e) => e.path)).toEqual([path])
  })

  it('pages through the book without losing or repeating a batch', async () => {
    const app = testApp()
    const { ada } = people(app)
    const made: string[] = []
    for (let n = 0; n < 7; n++) {
      const reply = await ada.agent.post('/api/batches').send({ ...cyser, name: `Batch ${n}` })
      made.unshift((reply.body as Batch).id)
      if (n % 2) app.clock.advance({ minutes: 1 })
    }
    const seen: string[] = []
    let cursor: string | null = ''
    while (cursor !== null) {
      const reply = await ada.agent.get(`/api/batches?limit=3${cursor ? `&cursor=${cursor}` : ''}`)
      const page = reply.body as { items: Batch[]; nextCursor: string | null }
      seen.push(...page.items.map((batch) => batch.id))
      cursor = page.nextCursor
    }
    expect(seen.sort()).toEqual(made.sort())
    expect((await ada.agent.get('/api/batches?cursor=nonsense')).status).toBe(400)
  })

  it('lets a suspended member read and not write', async () => {
    const app = testApp()
    const sol = person(app, 'Sol Wick', 'member', 'suspended')
    expect((await sol.agent.get('/api/batches')).status).toBe(200)
    expect((await sol.agent.post('/api/batches').send(cyser)).body).toMatchObject({ code: 'suspended' })
  })

  it('reads its list in as many statements for fifty batches as for one', async () => {
    const app = testApp()
    const { ada } = people(app)
    await ada.agent.post('/api/batches').send(cyser)
    app.statements()
    await ada.agent.get('/api/batches')
    const forOne = app.statements().length
    for (let n = 0; n < 49; n++) await ada.agent.post('/api/batches').send(cyser)
    app.statements()
    await ada.agent.get('/api/batches')
    expect(app.statements().length).toBe(forOne)
  })
})
