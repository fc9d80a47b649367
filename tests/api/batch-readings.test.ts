import { describe, expect, it } from 'vitest'
import type { BottlingAdvice } from '#shared/batches/bottling-contract'
import type { Batch, RoomLoad } from '#shared/batches/contract'
import type { Forecast, Reading, ReadingTrace } from '#shared/batches/reading-contract'
import { correctGravity } from '#shared/brewing/index'
import { items } from '#server/db/schema/kit'
import { eq } from 'drizzle-orm'
import { ask, makeCyser, makeLarder, makeShelf } from '#tests/support/makers/batches'
import { openSession, people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

async function house(more: object = {}) {
  const app = testApp()
  const cast = people(app)
  makeShelf(app)
  const larder = makeLarder(app, cast.sam)
  const batch = await makeCyser(cast.ada, larder, { og: 1.088, expectedFg: 0.998, ...more })
  const path = `/api/batches/${batch.id}`
  const log = (gravity: number, temperatureC = 20, rest: object = {}) =>
    cast.ada.agent.post(`${path}/readings`).send({ at: app.clock.now(), gravity, temperatureC, ...rest })
  /** Time goes by; both come back and sign in again. */
  const later = (days: number) => {
    app.clock.advance({ days })
    void cast.ada.agent.set('Cookie', openSession(app, cast.ada.id, 'member'))
    void cast.bo.agent.set('Cookie', openSession(app, cast.bo.id, 'member'))
    void cast.sam.agent.set('Cookie', openSession(app, cast.sam.id, 'steward'))
  }
  /** Its maker moves it on. */
  const become = async (status: string) => {
    const { version } = await ask<Batch>(cast.ada.agent.get(path))
    await ask(cast.ada.agent.patch(path).set('If-Match', `"${version}"`).send({ status }))
  }
  return { app, larder, batch, path, log, later, become, ...cast }
}

/** Days after pitching and what was read: a ferment as it goes. */
const FALL: [number, number][] = [
  [0, 1.088],
  [3, 1.08],
  [7, 1.063],
  [12, 1.044],
  [17, 1.025],
  [22, 1.013],
  [24, 1.01],
]

async function fermenting(more: object = {}, fall = FALL) {
  const all = await house(more)
  await all.become('fermenting')
  let day = 0
  for (const [on, gravity] of fall) {
    all.later(on - day)
    day = on
    await ask(all.log(gravity), 201)
  }
  return all
}

describe('a reading', () => {
  it('keeps what was read, and what it is worth at the mark of the glass', async () => {
    const { app, log } = await house()
    app.db
      .update(items)
      .set({ calibrationOffsetSg: -0.002, calibratedOn: app.clock.today() })
      .where(eq(items.id, 'hydrometer-1'))
      .run()
    const made = await ask<Reading>(log(1.05, 25, { hydrometerItemId: 'hydrometer-1', ph: 3.4 }), 201)
    const expected = correctGravity({ reading: 1.05, temperatureC: 25, offset: -0.002 })
    expect(made).toMatchObject({
      gravity: 1.05,
      temperatureC: 25,
      ph: 3.4,
      offsetSg: -0.002,
      hydrometerTag: 'HY-01',
    })
    expect(made.correctedGravity).toBeCloseTo(expected, 9)
    expect(made.correctedGravity).not.toBeCloseTo(1.05, 4)
    const own = await ask<Reading>(log(1.05, 20), 201)
    expect(own.correctedGravity).toBeCloseTo(1.05, 9)
  })

  it('is not changed by a later check of the instrument', async () => {
    const { app, ada, path, log } = await house()
    const made = await ask<Reading>(log(1.05, 20, { hydrometerItemId: 'hydrometer-1' }), 201)
    app.db
      .update(items)
      .set({ calibrationOffsetSg: -0.004, calibratedOn: app.clock.today() })
      .where(eq(items.id, 'hydrometer-1'))
      .run()
    const [kept] = (await ask<Batch>(ada.agent.get(path))).readings
    expect(kept?.correctedGravity).toBe(made.correctedGravity)
  })

  it('leaves a trace when it is corrected or taken out', async () => {
    const { ada, path, log } = await house()
    const made = await ask<Reading>(log(1.05), 201)
    const one = `${path}/readings/${made.id}`
    expect((await ada.agent.patch(one).send({ gravity: 1.06 })).status).toBe(428)
    const changed = await ask<Reading>(ada.agent.patch(one).set('If-Match', '"1"').send({ gravity: 1.06 }))
    expect(changed).toMatchObject({ gravity: 1.06, edited: true, version: 2 })
    expect((await ada.agent.patch(one).set('If-Match', '"1"').send({ gravity: 1.07 })).status).toBe(412)
    expect((await ada.agent.delete(one)).status).toBe(204)
    expect((await ada.agent.delete(one)).status).toBe(404)
    expect((await ask<Batch>(ada.agent.get(path))).readings).toEqual([])
    const { items: trace } = await ask<{ items: ReadingTrace[] }>(ada.agent.get(`${path}/readings/trace`))
    expect(trace.map(({ change, before, changedByName }) => [change, before.gravity, changedByName])).toEqual(
      [
        ['deleted', 1.06, 'Ada Marsh'],
        ['edited', 1.05, 'Ada Marsh'],
      ],
    )
  })

  it('is its maker’s to write, and shown with a shared batch', async () => {
    const { bo, ada, path, log } = await house({ visibility: 'space' })
    await ask(log(1.05), 201)
    const seen = await ask<Batch>(bo.agent.get(path))
    expect(seen.readings).toHaveLength(1)
    expect(seen.standing.gravity).toBeCloseTo(1.05, 6)
    const body = { at: '2031-05-06T09:00:00Z', gravity: 1.05, temperatureC: 20 }
    expect((await bo.agent.post(`${path}/readings`).send(body)).status).toBe(403)
    expect((await bo.agent.delete(`${path}/readings/${seen.readings[0]!.id}`)).status).toBe(403)
    await ask(ada.agent.patch(path).set('If-Match', `"${seen.version}"`).send({ visibility: 'private' }))
    expect((await bo.agent.get(path)).status).toBe(404)
    expect((await bo.agent.get(`${path}/forecast`)).status).toBe(404)
  })

  it.each([
    [{ gravity: 1.5 }, 'gravity'],
    [{ gravity: 0.9 }, 'gravity'],
    [{ gravity: '1.050' }, 'gravity'],
    [{ temperatureC: 60 }, 'temperatureC'],
    [{ temperatureC: null }, 'temperatureC'],
    [{ at: '2031-05-06T23:00:00Z' }, 'at'],
    [{ at: 'now' }, 'at'],
    [{ ph: 14 }, 'ph'],
    [{ hydrometerItemId: 'siphon-1' }, 'hydrometerItemId'],
    [{ hydrometerItemId: 'nothing' }, 'hydrometerItemId'],
    [{ correctedGravity: 1 }, 'correctedGravity'],
  ])('with %j is refused by its field', async (more, path) => {
    const { log } = await house()
    const reply = await log(1.05, 20, more)
    expect(reply.status).toBe(400)
    expect((reply.body as { errors: { path: string }[] }).errors.map((error) => error.path)).toEqual([path])
  })
})

describe('the forecast', () => {
  const forecast = ({ ada, path }: Awaited<ReturnType<typeof house>>) =>
    ask<Forecast>(ada.agent.get(`${path}/forecast`))

  it('says it has too little to go by, rather than guess', async () => {
    const all = await fermenting({}, FALL.slice(0, 2))
    expect(await forecast(all)).toMatchObject({
      status: 'unknown',
      word: 'Not enough readings',
      finishOn: null,
    })
    const none = await house()
    expect(await forecast(none)).toMatchObject({ status: 'unknown', curve: [], offers: [] })
  })

  it('names a likely day inside its range, and draws the curve through the readings', async () => {
    const all = await fermenting()
    const answer = await forecast(all)
    expect(['active', 'slowing']).toContain(answer.status)
    const { early, likely, late } = answer.finishOn!
    expect(early <= likely && likely <= late).toBe(true)
    expect(likely > all.app.clock.today()).toBe(true)
    const pitched = '2031-05-06'
    expect(answer.curve[0]?.on).toBe(pitched)
    for (const [day, gravity] of FALL.slice(1)) {
      const point = answer.curve[day]!
      expect(Math.abs(point.gravity - gravity)).toBeLessThan(0.004)
      expect(point.low <= point.high).toBe(true)
    }
    const standing = (await ask<Batch>(all.ada.agent.get(all.path))).standing
    expect(standing.drop).toBeCloseTo((1.088 - 1.01) / (1.088 - 0.998), 3)
    expect(standing.strength?.percent).toBeCloseTo(10.4, 1)
  })

  it('says finished only after a week of steady readings near the end', async () => {
    const all = await fermenting({}, [...FALL, [32, 0.999], [40, 0.998]])
    expect(await forecast(all)).toMatchObject({ status: 'finished', word: 'Finished' })
  })

  it('finds a stuck one, and says what to look at first', async () => {
    const stuck: [number, number][] = [
      [0, 1.088],
      [2, 1.078],
      [4, 1.06],
      [6, 1.042],
      [8, 1.031],
      [11, 1.03],
      [14, 1.03],
      [17, 1.03],
    ]
    const all = await fermenting({ tolerancePercent: 14 }, stuck)
    await ask(all.log(1.03, 13), 201)
    const answer = await forecast(all)
    expect(answer).toMatchObject({ status: 'stuck', word: 'Stuck', finishOn: null })
    expect(answer.triage.filter(({ odds }) => odds === 'likely').map(({ cause }) => cause)).toEqual([
      'cold',
      'nitrogen',
    ])
  })
})

describe('an extension is offered before the loan is late', () => {
  async function inDemijohn(to: string) {
    const all = await house()
    const { ada, sam, batch } = all
    const wish = { kindId: 'demijohn', from: '2031-05-06', to, batchId: batch.id }
    const loan = await ask<{ id: string }>(ada.agent.post('/api/loans').send(wish), 201)
    await ask(sam.agent.post(`/api/loans/${loan.id}/approve`).send({}))
    await ask(sam.agent.post(`/api/loans/${loan.id}/check-out`).send({ itemId: 'demijohn-1' }))
    let day = 0
    for (const [on, gravity] of FALL) {
      all.later(on - day)
      day = on
      await ask(all.log(gravity), 201)
    }
    return { ...all, loan }
  }

  it('when the likely day passes its return-by day and nobody is delayed', async () => {
    const { ada, path, loan } = await inDemijohn('2031-06-06')
    const { finishOn, offers } = await ask<Forecast>(ada.agent.get(`${path}/forecast`))
    expect(offers).toHaveLength(1)
    const [offer] = offers
    expect(offer).toMatchObject({ loanId: loan.id, tag: 'DE-01', atOnce: true, delays: 0, neededOn: null })
    expect(offer!.keepTo > finishOn!.late).toBe(true)
    const kept = await ask<{ to: string }>(
      ada.agent.post(`/api/loans/${loan.id}/extend`).send({ to: offer!.keepTo }),
    )
    expect(kept.to).toBe(offer!.keepTo)
    expect((await ask<Forecast>(ada.agent.get(`${path}/forecast`))).offers).toEqual([])
  })

  it('with the number it would delay and from when, and no names', async () => {
    const { bo, ada, path } = await inDemijohn('2031-06-06')
    for (const from of ['2031-06-09', '2031-06-10'])
      await ask(bo.agent.post('/api/loans').send({ kindId: 'demijohn', from, to: '2031-06-20' }), 201)
    const reply = await ada.agent.get(`${path}/forecast`)
    const [offer] = (reply.body as Forecast).offers
    expect(offer).toMatchObject({ atOnce: false, delays: 1, neededOn: '2031-06-10' })
    expect(reply.text).not.toContain('Bo Linden')
  })

  it('not while it is likely to be over in time', async () => {
    const { ada, path } = await inDemijohn('2031-06-30')
    expect((await ask<Forecast>(ada.agent.get(`${path}/forecast`))).offers).toEqual([])
  })
})

describe('bottling', () => {
  const record = {
    bottledOn: '2031-05-06',
    bottleKind: 'still-wine',
    bottleMl: 750,
    bottles: 5,
  }

  it('is refused while the gravity falls, with the reasons', async () => {
    const { app, ada, path } = await fermenting()
    const advice = await ask<BottlingAdvice>(ada.agent.get(`${path}/bottling`))
    expect(advice.ready).toBe(false)
    expect(advice.blocks.map((block) => block.code)).toContain('still-falling')
    expect(advice.earliestOn! > app.clock.today()).toBe(true)
    const reply = await ada.agent.post(`${path}/bottlings`).send({ ...record, bottledOn: app.clock.today() })
    expect(reply.status).toBe(409)
    expect(reply.body).toMatchObject({ code: 'wrong-state', blocks: advice.blocks })
    expect((await ask<Batch>(ada.agent.get(path))).bottlings).toEqual([])
  })

  it('is logged all the same when a person says so, with what they were shown', async () => {
    const { app, ada, path } = await fermenting()
    const body = { ...record, bottledOn: app.clock.today(), anyway: true }
    const made = await ask<Batch['bottlings'][number]>(ada.agent.post(`${path}/bottlings`).send(body), 201)
    expect(made).toMatchObject({ ready: false, anyway: true, bottles: 5 })
    expect(made.shown.join(' ')).toMatch(/It fell .* points .*half a volume of gas/)
    expect(made.abvPercent).toBeCloseTo(10.4, 1)
    expect(await ask<Batch>(ada.agent.get(path))).toMatchObject({
      status: 'bottled',
      bottlings: [{ id: made.id }],
    })
  })

  it('is open once two readings a week apart agree at the end', async () => {
    const { app, ada, path } = await fermenting({}, [...FALL, [34, 0.998], [42, 0.998]])
    const still = await ask<BottlingAdvice>(ada.agent.get(`${path}/bottling`))
    expect(still).toMatchObject({ ready: true, blocks: [], priming: null, bottles: 5 })
    const fizzy = await ask<BottlingAdvice>(
      ada.agent.get(`${path}/bottling?bottle=beer&bottleMl=500&targetVolumesCo2=2.4&primer=sucrose`),
    )
    expect(fizzy).toMatchObject({ ready: true, bottles: 8 })
    expect(fizzy.priming?.grams).toBeGreaterThan(20)
    expect(fizzy.barOnHotDay).toBeGreaterThan(fizzy.barInCellar)
    const over = await ask<BottlingAdvice>(
      ada.agent.get(`${path}/bottling?bottle=still-wine&targetVolumesCo2=2.4&primer=sucrose`),
    )
    expect(over.blocks.map((block) => block.code)).toEqual(['pressure'])
    const made = await ask<Batch['bottlings'][number]>(
      ada.agent.post(`${path}/bottlings`).send({ ...record, bottledOn: app.clock.today(), anyway: true }),
      201,
    )
    // Saying "anyway" of a ready batch is no confession.
    expect(made).toMatchObject({ ready: true, anyway: false, shown: [] })
  })

  it('is not logged for a batch that was never pitched, nor for tomorrow', async () => {
    const { ada, path, become } = await house()
    const planned = await ada.agent.post(`${path}/bottlings`).send(record)
    expect(planned.body).toMatchObject({ code: 'wrong-state' })
    await become('fermenting')
    const future = await ada.agent.post(`${path}/bottlings`).send({ ...record, bottledOn: '2031-05-07' })
    expect(future.body).toMatchObject({ errors: [{ path: 'bottledOn' }] })
  })
})

describe('the room', () => {
  it('is reckoned for stewards from what ferments now, and names nobody', async () => {
    const { ada, sam, become } = await fermenting({}, FALL.slice(0, 4))
    const reply = await sam.agent.get('/api/room-load')
    const load = reply.body as RoomLoad
    expect(load.batches).toBe(1)
    expect(load.risePpm).toBeGreaterThan(5)
    expect(load.risePpm).toBeLessThan(200)
    expect(reply.text).not.toContain('Windfall')
    expect((await ada.agent.get('/api/room-load')).status).toBe(403)
    await become('abandoned')
    const empty = await ask<RoomLoad>(sam.agent.get('/api/room-load'))
    expect(empty).toMatchObject({ batches: 0, risePpm: 0, verdict: 'fine' })
  })
})
