import { describe, expect, it } from 'vitest'
import type { Batch } from '#shared/batches/contract'
import type { Plan, PlanMove } from '#shared/batches/plan-contract'
import { addDays, day } from '#shared/time/day'
import { loans } from '#server/db/schema/loans'
import { reservations } from '#server/db/schema/larder'
import { requestPlan } from '#server/services/batches/plan-request'
import { ask, makeCyser, makeLarder, makeShelf } from '#tests/support/makers/batches'
import { failing, Injected } from '#tests/support/failing'
import { openSession, people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

async function house() {
  const app = testApp()
  const broken = failing(app.db.$client)
  const cast = people(app)
  makeShelf(app)
  const larder = makeLarder(app, cast.sam)
  const batch = await makeCyser(cast.ada, larder)
  return { app, broken, larder, batch, ...cast, path: `/api/batches/${batch.id}` }
}

interface Requested {
  startOn: string
  loans: { id: string; kindId: string; from: string; to: string; status: string }[]
  short: { name: string; short: number }[]
  version: number
}
const start = day('2031-05-10')

describe('the plan of a batch', () => {
  it('starts with the usual steps of its style, and finds kit for each', async () => {
    const { batch } = await house()
    expect(batch.steps.map((step) => step.kind)).toEqual([
      'prepare',
      'prepare',
      'prepare',
      'pitch',
      'feed',
      'feed',
      'rack',
      'fine',
      'bottle',
      'taste',
    ])
    const cooling = batch.steps[2]
    expect(cooling?.needs.map((need) => need.kindName)).toEqual(['Demijohn 4.5 L, glass', 'Hydrometer'])
    // The limit is the kind's own, and stands on the step that fills it.
    expect(cooling?.cautions[0]?.text).toContain('under 30 °C before it goes into Demijohn 4.5 L, glass')
    expect(batch.steps.every((step) => step.on === null)).toBe(true)
  })

  it('turns a day into dated steps, a basket and what the larder lacks', async () => {
    const { ada, path, batch } = await house()
    const plan = await ask<Plan>(ada.agent.post(`${path}/plan`).send({ startOn: start }))
    expect(plan.fits).toBe(true)
    expect(plan.steps.map((step) => step.on)).toEqual(
      batch.steps.map((step) => addDays(start, step.dayOffset)),
    )
    expect(plan.lines[0]).toMatchObject({
      kindName: 'Demijohn 4.5 L, glass',
      from: '2031-05-10',
      to: '2031-06-14',
      free: true,
    })
    expect(plan.bottles).toBe(5)
    expect(plan.ingredients.map(({ name, needed, short }) => [name, needed, short])).toEqual([
      ['Apple juice', 3600, 0],
      ['Heather honey', 700, 0],
      ['Corks', 5, 0],
    ])
    // Asking changed nothing.
    expect((await ask<Batch>(ada.agent.get(path))).version).toBe(1)
  })

  it('says which line is taken, when else it is free and what would do instead', async () => {
    const { ada, bo, path } = await house()
    await ask(
      bo.agent.post('/api/loans').send({ kindId: 'siphon', from: '2031-05-31', to: '2031-06-02' }),
      201,
    )
    const plan = await ask<Plan>(ada.agent.post(`${path}/plan`).send({ startOn: start }))
    expect(plan.fits).toBe(false)
    const taken = plan.lines.filter((line) => !line.free)
    expect(taken).toHaveLength(1)
    expect(taken[0]).toMatchObject({
      kindName: 'Siphon',
      from: '2031-05-31',
      nearest: { from: expect.any(String) as string },
    })
  })

  it('is for its maker alone', async () => {
    const { bo, sam, path } = await house()
    for (const { agent } of [bo, sam]) {
      expect((await agent.post(`${path}/plan`).send({ startOn: start })).status).toBe(404)
      expect((await agent.post(`${path}/plan/request`).send({ startOn: start })).status).toBe(404)
      expect((await agent.get(`${path}/earliest-start`)).status).toBe(404)
    }
  })

  it.each([['2031-02-30'], ['2031-05-01'], [5], [undefined]])('refuses to start on %s', async (startOn) => {
    const { ada, path } = await house()
    const reply = await ada.agent.post(`${path}/plan/request`).send({ startOn })
    expect(reply.status).toBe(400)
    expect(reply.body).toMatchObject({ errors: [{ path: 'startOn' }] })
  })
})

describe('the earliest start', () => {
  interface Earliest {
    startOn: string | null
    searchedTo: string
    lines: { free: boolean }[]
  }

  it('is today when the shelf is full, and every line of it is free', async () => {
    const { ada, path } = await house()
    const found = await ask<Earliest>(ada.agent.get(`${path}/earliest-start`))
    expect(found.startOn).toBe('2031-05-06')
    expect(found.lines.length).toBeGreaterThan(5)
    expect(found.lines.every((line) => line.free)).toBe(true)
  })

  it('is the first day the plan would be granted, and the day before would not be', async () => {
    const { ada, bo, path } = await house()
    const taken = [
      { kindId: 'siphon', from: '2031-05-25', to: '2031-06-03' },
      { kindId: 'hydrometer', from: '2031-05-14', to: '2031-05-15' },
      { kindId: 'demijohn', from: '2031-05-08', to: '2031-06-20' },
      { kindId: 'corker', from: '2031-06-12', to: '2031-06-20' },
    ]
    for (const loan of taken) await ask(bo.agent.post('/api/loans').send(loan), 201)
    const found = await ask<Earliest>(ada.agent.get(`${path}/earliest-start`))
    expect(found.startOn).not.toBe('2031-05-06')
    for (let on = day('2031-05-06'); on <= found.startOn!; on = addDays(on, 1)) {
      const plan = await ask<Plan>(ada.agent.post(`${path}/plan`).send({ startOn: on }))
      expect([on, plan.fits]).toEqual([on, on === found.startOn])
    }
  })

  it('looks from the day that is asked, and says when there is none', async () => {
    const { ada, bo, path } = await house()
    const later = await ask<Earliest>(ada.agent.get(`${path}/earliest-start?after=2031-05-20`))
    expect(later.startOn).toBe('2031-05-20')
    const none = await ask<Earliest>(ada.agent.get(`${path}/earliest-start?after=2032-05-20`))
    expect(none).toMatchObject({ startOn: null, lines: [] })
    expect((await bo.agent.get(`${path}/earliest-start?after=soon`)).status).toBe(400)
  })

  it('knows that a member may hold only so many at once', async () => {
    const { app, ada, path } = await house()
    app.db.$client.exec(`UPDATE kinds SET max_per_member = 1 WHERE id = 'demijohn'`)
    const own = { kindId: 'demijohn', from: '2031-05-06', to: '2031-05-09' }
    await ask(ada.agent.post('/api/loans').send(own), 201)
    const found = await ask<Earliest>(ada.agent.get(`${path}/earliest-start`))
    expect(found.startOn).toBe('2031-05-10')
  })

  it('takes as many statements for a long plan as for a short one', async () => {
    const { app, ada, path } = await house()
    app.statements()
    await ada.agent.get(`${path}/earliest-start`)
    const long = app.statements().length
    const steps = [{ kind: 'prepare', title: 'Must', dayOffset: 0, needs: [{ kindId: 'siphon' }] }]
    await ask(ada.agent.put(`${path}/steps`).set('If-Match', '"1"').send({ steps }))
    app.statements()
    await ada.agent.get(`${path}/earliest-start`)
    // A basket is written line by line into loans and their history in one statement each.
    expect(app.statements().length).toBe(long)
  })
})

describe('requesting the plan', () => {
  it('books the basket, reserves the ingredients and dates the steps in one go', async () => {
    const { app, ada, path, batch, larder } = await house()
    const made = await ask<Requested>(ada.agent.post(`${path}/plan/request`).send({ startOn: start }), 201)
    expect(made.loans.map((loan) => [loan.kindId, loan.status])).toContainEqual(['demijohn', 'requested'])
    expect(made.loans.map((loan) => [loan.kindId, loan.status])).toContainEqual(['siphon', 'approved'])
    const now = await ask<Batch>(ada.agent.get(path))
    expect(now).toMatchObject({ startOn: start, booked: true, version: made.version })
    expect(now.steps.map((step) => step.on)).toEqual(
      batch.steps.map((step) => addDays(start, step.dayOffset)),
    )
    const needs = now.steps.flatMap((step) => step.needs)
    expect(needs.every((need) => need.loan !== null && need.loan.from === need.from)).toBe(true)
    expect(
      app.db
        .select()
        .from(loans)
        .all()
        .every((loan) => loan.batchId === batch.id),
    ).toBe(true)
    const held = app.db.select().from(reservations).all()
    expect(held.map((row) => [row.ingredientId, row.quantityMilli, row.neededOn])).toEqual(
      expect.arrayContaining([
        [larder.corks, 5000, '2031-06-14'],
        [larder.honey, 700_000, '2031-05-10'],
      ]),
    )
  })

  it('answers the same to the same key, and books once', async () => {
    const { app, ada, path } = await house()
    const post = () =>
      ada.agent.post(`${path}/plan/request`).set('Idempotency-Key', 'k-1').send({ startOn: start })
    const [first, again] = [await post(), await post()]
    expect([first.status, again.status]).toEqual([201, 201])
    expect(again.get('idempotency-replayed')).toBe('true')
    expect(again.body).toEqual(first.body)
    expect(app.db.select().from(loans).all()).toHaveLength((first.body as Requested).loans.length)
  })

  it('puts what the larder lacks on the shopping list, and books all the same', async () => {
    const { ada, larder } = await house()
    const big = await makeCyser(ada, larder, {
      name: 'Big one',
      volumeLitres: 9,
      recipe: [{ ingredientId: larder.honey, grams: 4200 }],
    })
    const made = await ask<Requested>(
      ada.agent.post(`/api/batches/${big.id}/plan/request`).send({ startOn: start }),
      201,
    )
    expect(made.short).toEqual([expect.objectContaining({ name: 'Heather honey', short: 1200 })])
  })

  it('refuses all of it when one line is taken, counts the refusal, and leaves nothing behind', async () => {
    const { app, ada, bo, path } = await house()
    const siphon = { kindId: 'siphon', from: '2031-05-31', to: '2031-06-02' }
    await ask(bo.agent.post('/api/loans').send(siphon), 201)
    const reply = await ada.agent.post(`${path}/plan/request`).send({ startOn: start })
    expect(reply.status).toBe(409)
    expect(reply.body).toMatchObject({
      code: 'not-available',
      lines: [{ nearest: expect.any(Object) as object }],
    })
    expect(app.db.select().from(loans).all()).toHaveLength(1)
    expect(app.db.select().from(reservations).all()).toHaveLength(0)
    expect(app.db.$client.prepare('SELECT count(*) FROM refusals').pluck().get()).toBe(1)
    expect(await ask<Batch>(ada.agent.get(path))).toMatchObject({ startOn: null, booked: false, version: 1 })
  })

  it('leaves nothing behind when any one statement fails', async () => {
    const { app, broken, ada, path, batch } = await house()
    const contents = () =>
      JSON.stringify(
        ['loans', 'loan_events', 'reservations', 'batches', 'batch_steps', 'step_needs', 'letters'].map(
          (table) => app.db.$client.prepare(`SELECT * FROM ${table}`).all(),
        ),
      )
    const before = contents()
    const user = { ...ada, role: 'member' as const, status: 'active' as const }
    const run = () =>
      app.db.transaction(() => requestPlan(app.deps, user, batch.id, start), { behavior: 'immediate' })
    let failures = 0
    for (let n = 1; ; n++) {
      broken.failAt(n)
      let failed = false
      try {
        run()
      } catch (error) {
        if (!(error instanceof Injected) && !(error as { cause?: unknown }).cause) throw error
        failed = true
      }
      const ran = broken.ran()
      broken.failAt(0)
      if (!failed) {
        expect(ran).toBe(n - 1)
        break
      }
      failures += 1
      expect(contents(), `statement ${n}`).toBe(before)
    }
    // Every statement of the request was tried, and with none broken it went through.
    expect(failures).toBeGreaterThan(25)
    expect((await ask<Batch>(ada.agent.get(path))).booked).toBe(true)
  })

  it('is refused twice over, for a batch that is over, and for a plan without steps to book', async () => {
    const { ada, path } = await house()
    await ask(ada.agent.post(`${path}/plan/request`).send({ startOn: start }), 201)
    const again = await ada.agent.post(`${path}/plan/request`).send({ startOn: start })
    expect(again.body).toMatchObject({ status: 409, code: 'wrong-state' })
    const steps = [{ kind: 'taste', title: 'Taste', dayOffset: 1 }]
    const edit = await ada.agent.put(`${path}/steps`).set('If-Match', '"2"').send({ steps })
    expect(edit.body).toMatchObject({ status: 409, code: 'wrong-state' })
  })

  it('gives back everything when the plan is dropped or the batch given up', async () => {
    const { app, ada, path } = await house()
    await ask(ada.agent.post(`${path}/plan/request`).send({ startOn: start }), 201)
    const dropped = await ask<{ cancelled: number; version: number }>(
      ada.agent.post(`${path}/plan/drop`).send({}),
    )
    expect(dropped.cancelled).toBeGreaterThan(5)
    expect(app.db.select().from(reservations).all()).toHaveLength(0)
    expect(await ask<Batch>(ada.agent.get(path))).toMatchObject({ startOn: null, booked: false })
    await ask(ada.agent.post(`${path}/plan/request`).send({ startOn: start }), 201)
    const { version } = await ask<Batch>(ada.agent.get(path))
    const given = await ada.agent.patch(path).set('If-Match', `"${version}"`).send({ status: 'abandoned' })
    expect(given.body).toMatchObject({ status: 'abandoned', booked: false })
    expect(app.db.select().from(reservations).all()).toHaveLength(0)
  })
})

describe('moving the plan', () => {
  async function requested() {
    const all = await house()
    await ask(all.ada.agent.post(`${all.path}/plan/request`).send({ startOn: start }), 201)
    const batch = await ask<Batch>(all.ada.agent.get(all.path))
    const step = (kind: string) => batch.steps.find((one) => one.kind === kind)!
    const move = (body: object) => all.ada.agent.post(`${all.path}/plan/move`).send(body)
    return { ...all, batch, step, move }
  }

  it('shows what would move, and moves it only when that is confirmed', async () => {
    const { app, ada, path, step, move } = await requested()
    const body = { stepId: step('rack').id, on: '2031-06-03' }
    const before = JSON.stringify(app.db.select().from(loans).all())
    const shown = await ask<PlanMove>(move(body))
    expect(shown).toMatchObject({ moved: false, possible: true })
    expect(shown.steps.map(({ title, to }) => [title, to])).toContainEqual([
      'Rack off the lees',
      '2031-06-03',
    ])
    expect(JSON.stringify(app.db.select().from(loans).all())).toBe(before)
    const moved = await ask<PlanMove>(move({ ...body, confirm: true }))
    expect(moved.moved).toBe(true)
    expect(moved.bookings.map(({ kindName, outcome }) => [kindName, outcome]).sort()).toEqual(
      shown.bookings.map(({ kindName, outcome }) => [kindName, outcome]).sort(),
    )
    const now = await ask<Batch>(ada.agent.get(path))
    // The demijohn is kept until bottling, which moved along by three days; the siphon goes with its step.
    const vessel = now.steps.flatMap((one) => one.needs).find((need) => need.kindId === 'demijohn')
    expect(vessel).toMatchObject({ to: '2031-06-17', loan: { to: '2031-06-17' } })
    for (const need of now.steps.flatMap((one) => one.needs))
      expect(need.loan).toMatchObject({ from: need.from, to: need.to })
  })

  it('changes nothing when a booking cannot follow, and says which', async () => {
    const { app, bo, step, move } = await requested()
    await ask(
      bo.agent.post('/api/loans').send({ kindId: 'siphon', from: '2031-06-03', to: '2031-06-04' }),
      201,
    )
    const before = JSON.stringify(app.db.select().from(loans).all())
    const body = { stepId: step('rack').id, on: '2031-06-03' }
    const shown = await ask<PlanMove>(move(body))
    expect(shown).toMatchObject({ moved: false, possible: false })
    expect(shown.bookings.find(({ outcome }) => outcome === 'not-free')?.kindName).toBe('Siphon')
    expect((await move({ ...body, confirm: true })).body).toMatchObject({
      status: 409,
      code: 'not-available',
    })
    expect(JSON.stringify(app.db.select().from(loans).all())).toBe(before)
  })

  it('keeps longer what is out already, and asks the desk where that would delay somebody', async () => {
    const { app, ada, bo, sam, batch, step, move, path } = await requested()
    const vessel = batch.steps.flatMap((one) => one.needs).find((need) => need.kindId === 'demijohn')
    await ask(sam.agent.post(`/api/loans/${vessel!.loan!.id}/approve`).send({}))
    app.clock.set('2031-05-10T10:00:00.000Z')
    void sam.agent.set('Cookie', openSession(app, sam.id, 'steward'))
    const out = { itemId: 'demijohn-1' }
    await ask(sam.agent.post(`/api/loans/${vessel!.loan!.id}/check-out`).send(out))
    const moved = await ask<PlanMove>(move({ stepId: step('bottle').id, on: '2031-06-16', confirm: true }))
    expect(moved.bookings.find(({ kindName }) => /Demijohn/.test(kindName))).toMatchObject({
      outcome: 'kept-longer',
      after: { to: '2031-06-16' },
    })
    for (const from of ['2031-06-19', '2031-06-20'])
      await ask(bo.agent.post('/api/loans').send({ kindId: 'demijohn', from, to: '2031-06-25' }), 201)
    const asked = await ask<PlanMove>(move({ stepId: step('bottle').id, on: '2031-06-21', confirm: true }))
    expect(asked.bookings.find(({ kindName }) => /Demijohn/.test(kindName))?.outcome).toBe('asked-longer')
    const now = await ask<Batch>(ada.agent.get(path))
    expect(now.steps.find((one) => one.kind === 'bottle')?.on).toBe('2031-06-21')
  })

  it('refuses to move what is done, what has no date, and into the past', async () => {
    const { ada, path, step, move } = await requested()
    expect((await move({ stepId: step('rack').id, on: '2031-05-01' })).status).toBe(400)
    expect((await move({ stepId: 'nobody', on: '2031-06-01' })).status).toBe(404)
    const first = step('prepare').id
    await ask(ada.agent.post(`${path}/steps/${first}/done`).send({}))
    expect((await move({ stepId: first, on: '2031-06-01' })).body).toMatchObject({ code: 'wrong-state' })
  })
})
