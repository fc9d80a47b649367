import { describe, expect, it } from 'vitest'
import type { FridgePacket, Packet } from '#shared/yeast/contract'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'
import {
  dayFromNow,
  makeBatch,
  makePacket,
  pitch,
  pitchAndReport,
  soundPacket,
  vitalityOf,
} from '#tests/support/makers/yeast'

type List = { items: FridgePacket[]; nextCursor: string | null }
const list = async (person: ReturnType<typeof people>['ada'], query = '') =>
  (await person.agent.get(`/api/packets${query}`)).body as List

describe('the fridge', () => {
  it('takes a packet and gives back what is left, where it is and whose it is', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const made = await makePacket(app, ada, { place: 'Top shelf', remainingGrams: 3.2 })
    expect(made).toMatchObject({
      strain: 'Fallow 71',
      initialGrams: 5,
      initialMl: null,
      remainingGrams: 3.2,
      remainingMl: null,
      storage: 'fridge',
      storageHistory: [{ from: dayFromNow(app, -60), storage: 'fridge' }],
      shared: true,
      mine: true,
      editable: true,
      version: 1,
    })
    const seen = await bo.agent.get(`/api/packets/${made.id}`)
    expect(seen.body).toMatchObject({ ownerName: 'Ada Marsh', mine: false, editable: false })
    expect(seen.text).not.toContain(ada.email)
    expect(seen.text).not.toContain(ada.id)
  })

  it('keeps a personal packet from everyone else, stewards too', async () => {
    const app = testApp()
    const { ada, bo, sam, kit } = people(app)
    const { id } = await makePacket(app, ada, { shared: false })
    const { id: batchId } = await makeBatch(bo)
    for (const other of [bo, sam, kit]) {
      expect((await other.agent.get(`/api/packets/${id}`)).status).toBe(404)
      expect((await other.agent.get(`/api/packets/${id}/vitality`)).status).toBe(404)
      expect((await list(other)).items).toEqual([])
      expect((await other.agent.post(`/api/packets/${id}/copies`).send({})).status).toBe(404)
      expect((await other.agent.post(`/api/packets/${id}/discard`).send({})).status).toBe(404)
      const change = other.agent.patch(`/api/packets/${id}`).set('If-Match', '"1"')
      expect((await change.send({ storage: 'shelf' })).status).toBe(404)
    }
    const taken = await bo.agent.post(`/api/batches/${batchId}/pitches`).send({ packetId: id, grams: 1 })
    expect(taken.status).toBe(404)
    expect((await list(ada)).items.map((packet) => packet.id)).toEqual([id])
  })

  it('lets its owner and stewards change a shared packet, others only read it', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const { id } = await makePacket(app, ada)
    const change = (who: typeof ada, version: number, body: object) =>
      who.agent.patch(`/api/packets/${id}`).set('If-Match', `"${version}"`).send(body)
    expect((await change(bo, 1, { strain: 'Mine' })).body).toMatchObject({ code: 'forbidden' })
    expect((await change(sam, 1, { place: 'Door' })).body).toMatchObject({ place: 'Door', version: 2 })
    expect((await change(ada, 1, { note: 'late' })).status).toBe(412)
    expect((await ada.agent.patch(`/api/packets/${id}`).send({ note: 'x' })).status).toBe(428)
    expect((await change(ada, 2, { note: 'Smells of bread', place: null })).body).toMatchObject({
      note: 'Smells of bread',
      place: null,
      version: 3,
    })
    expect((await change(sam, 3, { shared: false })).status).toBe(403)
    expect((await change(ada, 3, { shared: false })).body).toMatchObject({ shared: false })
  })

  it('counts a move to the shelf from its day, and not before', async () => {
    const app = testApp()
    const { ada } = people(app)
    const moved = await makePacket(app, ada, {
      lotCode: 'A',
      madeOn: dayFromNow(app, -700),
      bestBefore: null,
    })
    const stayed = await makePacket(app, ada, {
      lotCode: 'B',
      madeOn: dayFromNow(app, -700),
      bestBefore: null,
    })
    const warm = await makePacket(app, ada, {
      lotCode: 'C',
      madeOn: dayFromNow(app, -700),
      bestBefore: null,
      storage: 'shelf',
    })
    const change = await ada.agent
      .patch(`/api/packets/${moved.id}`)
      .set('If-Match', '"1"')
      .send({ storage: 'shelf', movedOn: dayFromNow(app, -100) })
    expect((change.body as Packet).storageHistory).toEqual([
      { from: dayFromNow(app, -700), storage: 'fridge' },
      { from: dayFromNow(app, -100), storage: 'shelf' },
    ])
    const [a, b, c] = await Promise.all([moved, stayed, warm].map(({ id }) => vitalityOf(ada, id)))
    expect(a?.viability.estimate).toBeLessThan(b?.viability.estimate ?? 0)
    expect(a?.viability.estimate).toBeGreaterThan(c?.viability.estimate ?? 1)
    const early = (of: string) => vitalityOf(ada, of, `?on=${dayFromNow(app, -101)}`)
    expect((await early(moved.id)).viability).toEqual((await early(stayed.id)).viability)
    const ahead = await ada.agent
      .patch(`/api/packets/${moved.id}`)
      .set('If-Match', '"2"')
      .send({ storage: 'freezer', movedOn: dayFromNow(app, 1) })
    expect(ahead.body).toMatchObject({ code: 'invalid', errors: [{ path: 'movedOn' }] })
  })

  it('lists the likeliest to start first, in pages that neither miss nor repeat', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    for (let month = 0; month < 9; month++)
      await makePacket(app, month % 2 ? ada : bo, {
        lotCode: `L${month}`,
        bestBefore: null,
        madeOn: dayFromNow(app, -60 - 90 * month),
        openedOn: month > 5 ? dayFromNow(app, -50 * month) : null,
        storage: month > 3 ? 'shelf' : 'fridge',
      })
    const whole = (await list(ada)).items
    expect(whole).toHaveLength(9)
    const rank = ['good', 'pitch-more', 'prove-first', 'do-not-rely']
    const order = whole.map((packet) => rank.indexOf(packet.verdict) - packet.viability.estimate)
    expect(order).toEqual([...order].sort((a, b) => a - b))
    expect(new Set(whole.map((packet) => packet.verdict)).size).toBeGreaterThan(2)
    const paged: string[] = []
    let cursor = ''
    for (let turn = 0; turn < 9; turn++) {
      const page = await list(ada, `?limit=2${cursor}`)
      paged.push(...page.items.map((packet) => packet.id))
      if (!page.nextCursor) break
      cursor = `&cursor=${page.nextCursor}`
    }
    expect(paged).toEqual(whole.map((packet) => packet.id))
    expect((await ada.agent.get('/api/packets?cursor=bm9uc2Vuc2U')).status).toBe(400)
  })

  it('filters by use, by whose it is, by date and by what is gone', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const near = await makePacket(app, ada, { bestBefore: dayFromNow(app, 12), use: 'cider' })
    const past = await makePacket(app, bo, { bestBefore: dayFromNow(app, -3) })
    const gone = await makePacket(app, bo, { lotCode: 'G' })
    await bo.agent.post(`/api/packets/${gone.id}/discard`).send({ note: 'Mouldy' })
    const ids = async (query: string) => (await list(ada, query)).items.map((packet) => packet.id).sort()
    expect(await ids('')).toEqual([near.id, past.id].sort())
    expect(await ids('?use=cider')).toEqual([near.id])
    expect(await ids('?mine=true')).toEqual([near.id])
    expect(await ids('?date=near')).toEqual([near.id])
    expect(await ids('?date=past')).toEqual([past.id])
    expect(await ids('?state=gone')).toEqual([gone.id])
    expect(await ids('?state=all')).toHaveLength(3)
    expect((await ada.agent.get('/api/packets?use=bread')).status).toBe(400)
  })

  it('copies an earlier packet of a strain, full and sealed, with its own dates', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const first = await makePacket(app, ada, {
      openedOn: dayFromNow(app, -20),
      remainingGrams: 1,
      place: 'Door',
    })
    const strains = (await bo.agent.get('/api/yeast-strains')).body as { items: { packetId: string }[] }
    expect(strains.items).toMatchObject([{ packetId: first.id, strain: 'Fallow 71', initial: 5, unit: 'g' }])
    const copy = await bo.agent
      .post(`/api/packets/${first.id}/copies`)
      .send({ bestBefore: dayFromNow(app, 400), lotCode: 'F71-1201' })
    expect(copy.status).toBe(201)
    expect(copy.body).toMatchObject({
      ...{ strain: 'Fallow 71', form: 'dry', use: 'mead', storage: 'fridge', place: 'Door' },
      ...{ remainingGrams: 5, openedOn: null, madeOn: null, lotCode: 'F71-1201', mine: true },
    })
    expect((await bo.agent.post(`/api/packets/${first.id}/copies`).send({})).body).toMatchObject({
      errors: [{ path: 'bestBefore' }],
    })
  })

  it('says which field of a new packet is wrong', async () => {
    const app = testApp()
    const { ada } = people(app)
    const paths = async (more: object) => {
      const reply = await ada.agent.post('/api/packets').send(soundPacket(app, more))
      expect(reply.status).toBe(400)
      return (reply.body as { errors: { path: string }[] }).errors.map(({ path }) => path)
    }
    expect(await paths({ strain: '  ' })).toEqual(['strain'])
    expect(await paths({ strain: 'Fal\u202elow' })).toEqual(['strain'])
    expect(await paths({ initialGrams: -1 })).toEqual(['initialGrams'])
    expect(await paths({ initialGrams: 0 })).toEqual(['initialGrams'])
    expect(await paths({ initialGrams: '5' })).toEqual(['initialGrams'])
    expect(await paths({ initialGrams: undefined })).toEqual(['initialGrams'])
    expect(await paths({ initialMl: 5 })).toContain('initialMl')
    expect(await paths({ form: 'powder' })).toEqual(['form'])
    expect(await paths({ madeOn: '2026-02-30' })).toEqual(['madeOn'])
    expect(await paths({ madeOn: dayFromNow(app, 1) })).toEqual(['madeOn'])
    expect(await paths({ madeOn: null, bestBefore: null })).toEqual(['bestBefore'])
    expect(await paths({ bestBefore: dayFromNow(app, -61) })).toEqual(['bestBefore'])
    expect(await paths({ openedOn: dayFromNow(app, -61) })).toEqual(['openedOn'])
    expect(await paths({ remainingGrams: 6 })).toEqual(['remainingGrams'])
    expect(await paths({ hat: true })).toEqual(['hat'])
    expect(await paths({ ownerId: 'x' })).toEqual(['ownerId'])
  })

  it('gives a packet back once for one Idempotency-Key', async () => {
    const app = testApp()
    const { ada } = people(app)
    const send = () => ada.agent.post('/api/packets').set('Idempotency-Key', 'one').send(soundPacket(app))
    const first = await send()
    const second = await send()
    expect((second.body as Packet).id).toBe((first.body as Packet).id)
    expect(second.get('idempotency-replayed')).toBe('true')
    expect((await list(ada)).items).toHaveLength(1)
  })
})

describe('the answer for a packet', () => {
  it('agrees with the sheet: sealed dry yeast keeps 0.95 of itself for a year in the fridge, 0.80 on a shelf', async () => {
    // Recommended default of the reference sheet: 0.22 a year at 20 °C, 60 kJ/mol.
    const app = testApp()
    const { ada } = people(app)
    const made = { madeOn: dayFromNow(app, -365), bestBefore: null }
    const cold = await makePacket(app, ada, { ...made, lotCode: 'A' })
    const warm = await makePacket(app, ada, { ...made, lotCode: 'B', storage: 'shelf' })
    expect((await vitalityOf(ada, cold.id)).viability.estimate).toBeCloseTo(0.948, 2)
    expect((await vitalityOf(ada, warm.id)).viability.estimate).toBeCloseTo(0.803, 2)
  })

  it('says how much, how, what to expect and when to worry', async () => {
    const app = testApp()
    const { ada } = people(app)
    const { id } = await makePacket(app, ada)
    const answer = await vitalityOf(ada, id, '?volumeLitres=4.5&og=1.082')
    expect(answer.verdict).toBe('good')
    const { pitch: dose } = answer
    // 0.25 g/L at 2e10 cells a gram is 5e6 a mL (Australian guide); at 1e10 it takes twice that.
    expect(dose.grams).toBeCloseTo((5e6 * 4500) / 1e10 / answer.viability.estimate, 3)
    expect(dose.low).toBeLessThan(dose.grams)
    expect(dose.high).toBeGreaterThan(dose.grams)
    expect(dose.enough).toBe(true)
    expect(dose.rehydrationMl).toBeCloseTo(10 * dose.grams, 6)
    expect(dose.steps).toHaveLength(3)
    expect(dose.expectedHours.early).toBeLessThan(dose.expectedHours.likely)
    expect(dose.expectedHours.late).toBeGreaterThan(dose.expectedHours.likely)
    // Noon in London in May is 11:00Z; two days on.
    expect(dose.ifNothingBy).toBe(`${dayFromNow(app, 2)}T11:00:00.000Z`)
    expect(answer.proving).toBeNull()
    expect(answer.reasons.map(({ effect }) => effect)).toContain('raises')
    const bigger = await vitalityOf(ada, id, '?volumeLitres=25&og=1.12')
    expect(bigger.pitch.grams).toBeGreaterThan(5 * dose.grams)
    expect(bigger).toMatchObject({ verdict: 'pitch-more', pitch: { enough: false } })
  })

  it('tells an old opened packet from a good one, with a proving test and what else would serve', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const old = await makePacket(app, ada, {
      ...{ lotCode: 'OLD', bestBefore: null, madeOn: dayFromNow(app, -900) },
      ...{ openedOn: dayFromNow(app, -400), storage: 'shelf' },
    })
    const sound = await makePacket(app, bo)
    const kindred = await makePacket(app, bo, { strain: 'Hob', use: 'wine', lotCode: 'H' })
    await makePacket(app, bo, { strain: 'Lowmere', use: 'ale', lotCode: 'ALE' })
    await makePacket(app, bo, { strain: 'Crumbs', lotCode: 'C', remainingGrams: 0.2 })
    await makePacket(app, bo, { strain: 'Own', lotCode: 'O', shared: false })
    const answer = await vitalityOf(ada, old.id)
    expect(answer.verdict).toBe('do-not-rely')
    expect(answer.reason).toBe('Opened 400 days ago, kept on the shelf')
    expect(answer.proving?.temperatureC).toEqual({ low: 35, high: 40 })
    expect(answer.reasons.filter(({ effect }) => effect === 'lowers').length).toBeGreaterThan(1)
    expect(answer.alternatives.map(({ id }) => id)).toEqual([sound.id, kindred.id])
  })

  it('refuses a day before it was made and a must that is none', async () => {
    const app = testApp()
    const { ada } = people(app)
    const { id } = await makePacket(app, ada)
    const status = async (query: string) =>
      (await ada.agent.get(`/api/packets/${id}/vitality${query}`)).status
    expect(await status(`?on=${dayFromNow(app, -61)}`)).toBe(400)
    expect(await status('?on=tomorrow')).toBe(400)
    expect(await status('?og=1.4')).toBe(400)
    expect(await status('?volumeLitres=-1')).toBe(400)
    expect(await status('?volumeLitres=1e999')).toBe(400)
    expect(await status('?hat=1')).toBe(400)
    expect(await status('?on=2999-12-31')).toBe(400)
    expect(await status(`?on=${dayFromNow(app, 3650)}`)).toBe(200)
  })
})

describe('a pitch', () => {
  it('takes its grams from the packet, opens it and starts the batch', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const { id } = await makePacket(app, ada)
    const batch = await makeBatch(bo)
    const made = await bo.agent
      .post(`/api/batches/${batch.id}/pitches`)
      .send({ packetId: id, grams: 2.1, at: app.clock.now(), mustTemperatureC: 21, rehydrated: true })
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({
      grams: 2.1,
      ml: null,
      strain: 'Fallow 71',
      batchName: 'Windfall cyser',
      outcome: null,
      cautions: [],
    })
    const packet = (await ada.agent.get(`/api/packets/${id}`)).body as Packet
    expect(packet).toMatchObject({ remainingGrams: 2.9, openedOn: app.clock.today() })
    expect((await bo.agent.get(`/api/batches/${batch.id}`)).body).toMatchObject({
      status: 'fermenting',
      pitchedAt: app.clock.now(),
    })
  })

  it('never takes more than there is, in whatever unit', async () => {
    const app = testApp()
    const { ada } = people(app)
    const { id } = await makePacket(app, ada, { initialGrams: 2 })
    const batch = await makeBatch(ada)
    const take = (body: object) =>
      ada.agent.post(`/api/batches/${batch.id}/pitches`).send({ packetId: id, ...body })
    expect((await take({ grams: 2.001 })).body).toMatchObject({ code: 'not-enough', remainingGrams: 2 })
    expect((await take({ ml: 1 })).body).toMatchObject({ errors: [{ path: 'grams' }] })
    expect((await take({ grams: 1, ml: 1 })).status).toBe(400)
    expect((await take({})).status).toBe(400)
    expect((await take({ grams: 2, at: '2031-05-09T10:00:00Z' })).body).toMatchObject({
      errors: [{ path: 'at' }],
    })
    expect((await take({ grams: 2 })).status).toBe(201)
    expect((await take({ grams: 0.001 })).status).toBe(409)
  })

  it('adds up to what was there when twelve ask at once', async () => {
    const app = testApp()
    const { ada } = people(app)
    const { id } = await makePacket(app, ada)
    const batch = await makeBatch(ada)
    const replies = await Promise.all(
      Array.from({ length: 12 }, () =>
        ada.agent.post(`/api/batches/${batch.id}/pitches`).send({ packetId: id, grams: 0.7 }),
      ),
    )
    const statuses = replies.map(({ status }) => status)
    expect(statuses.filter((status) => status === 201)).toHaveLength(7)
    expect(statuses.filter((status) => status === 409)).toHaveLength(5)
    expect((await ada.agent.get(`/api/packets/${id}`)).body).toMatchObject({ remainingGrams: 0.1 })
  })

  it('goes into a batch of one’s own only', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const { id } = await makePacket(app, ada)
    const hidden = await makeBatch(ada)
    const shown = await makeBatch(ada, { visibility: 'space' })
    for (const other of [bo, sam]) {
      const into = (batchId: string) =>
        other.agent.post(`/api/batches/${batchId}/pitches`).send({ packetId: id, grams: 1 })
      expect((await into(hidden.id)).status).toBe(404)
      expect((await into(shown.id)).status).toBe(403)
    }
  })

  it('cautions about a hot must', async () => {
    const app = testApp()
    const { ada } = people(app)
    const { id } = await makePacket(app, ada)
    expect((await pitch(ada, id, { mustTemperatureC: 41 })).cautions).toHaveLength(1)
  })

  it('is its maker’s to see and to report', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const { id } = await makePacket(app, ada)
    const made = await pitch(bo, id)
    for (const other of [ada, sam]) {
      expect((await other.agent.get(`/api/pitches/${made.id}`)).status).toBe(404)
      expect(
        (await other.agent.post(`/api/pitches/${made.id}/outcome`).send({ outcome: 'none' })).status,
      ).toBe(404)
    }
    expect((await bo.agent.get('/api/pitches?waiting=true')).body).toMatchObject({ items: [] })
    app.clock.advance({ hours: 30 })
    expect((await bo.agent.get('/api/pitches?waiting=true')).body).toMatchObject({ items: [{ id: made.id }] })
    const report = await bo.agent
      .post(`/api/pitches/${made.id}/outcome`)
      .send({ outcome: 'started', hoursToActivity: 11 })
    expect(report.body).toMatchObject({ outcome: 'started', hoursToActivity: 11 })
    expect((await bo.agent.get('/api/pitches?waiting=true')).body).toMatchObject({ items: [] })
    const wrong = (body: object) => bo.agent.post(`/api/pitches/${made.id}/outcome`).send(body)
    expect((await wrong({ outcome: 'maybe' })).status).toBe(400)
    expect((await wrong({ outcome: 'slow', hoursToActivity: 0 })).status).toBe(400)
  })
})

describe('a lot', () => {
  it('learns for everyone: two that never started take its other packets out of good', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const first = await makePacket(app, ada)
    const other = await makePacket(app, bo, { strain: 'fallow  71' })
    const stranger = await makePacket(app, bo, { lotCode: 'F71-1201' })
    const before = await vitalityOf(bo, other.id)
    expect(before.verdict).toBe('good')
    await pitchAndReport(app, ada, first.id, { outcome: 'none' })
    const once = await vitalityOf(bo, other.id)
    expect(once.viability.estimate).toBeLessThan(before.viability.estimate / 2)
    await pitchAndReport(app, ada, first.id, { outcome: 'none' })
    const twice = await vitalityOf(bo, other.id)
    expect(twice.viability.estimate).toBeLessThan(once.viability.estimate)
    expect(twice.verdict).not.toBe('good')
    expect(twice.evidence).toMatchObject({ pitches: 2, started: 0, slow: 0, none: 2 })
    expect((await bo.agent.get(`/api/packets/${other.id}`)).body).toMatchObject({ lot: { state: 'flagged' } })
    expect((await vitalityOf(bo, stranger.id)).viability).toEqual(before.viability)

    await pitchAndReport(app, bo, other.id, { outcome: 'started', hoursToActivity: 8 })
    const after = await vitalityOf(bo, other.id)
    expect(after.viability.estimate).toBeGreaterThan(twice.viability.estimate)
    expect(after.viability.estimate).toBeLessThan(before.viability.estimate)
    expect(after.verdict).toBe('prove-first')
    const flagged = (await bo.agent.get('/api/packets?flagged=true')).body as List
    expect(flagged.items.map(({ id }) => id).sort()).toEqual([first.id, other.id].sort())
  })

  it('is withdrawn and cleared by stewards, with the reason', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const packet = await makePacket(app, ada)
    for (let turn = 0; turn < 2; turn++) await pitchAndReport(app, ada, packet.id, { outcome: 'none' })
    const path = `/api/yeast-lots/${packet.lot.id}`
    expect((await ada.agent.post(`${path}/withdraw`).send({ note: 'x' })).status).toBe(403)
    expect((await sam.agent.post(`${path}/withdraw`).send({})).status).toBe(400)
    expect((await sam.agent.post(`${path}/withdraw`).send({ note: 'Two dead of two' })).body).toMatchObject({
      state: 'withdrawn',
      note: 'Two dead of two',
    })
    const batch = await makeBatch(ada)
    const into = await ada.agent
      .post(`/api/batches/${batch.id}/pitches`)
      .send({ packetId: packet.id, grams: 1 })
    expect(into.body).toMatchObject({ code: 'wrong-state' })
    expect((await vitalityOf(ada, packet.id)).verdict).toBe('do-not-rely')
    expect(
      (await sam.agent.post(`${path}/clear`).send({ note: 'The must was sulphited' })).body,
    ).toMatchObject({
      state: 'sound',
    })
    const cleared = await vitalityOf(ada, packet.id)
    expect(cleared.verdict).toBe('good')
    expect(cleared.evidence).toMatchObject({ none: 2, reports: [{ setAside: true }, { setAside: true }] })
    expect((await sam.agent.post('/api/yeast-lots/nowhere/clear').send({ note: 'x' })).status).toBe(404)
  })

  it('is no longer flagged when a failure is taken back', async () => {
    const app = testApp()
    const { ada } = people(app)
    const packet = await makePacket(app, ada)
    await pitchAndReport(app, ada, packet.id, { outcome: 'none' })
    const second = await pitchAndReport(app, ada, packet.id, { outcome: 'none' })
    const state = async () => ((await ada.agent.get(`/api/packets/${packet.id}`)).body as Packet).lot.state
    expect(await state()).toBe('flagged')
    await ada.agent.post(`/api/pitches/${second.id}/outcome`).send({ outcome: 'slow', hoursToActivity: 80 })
    expect(await state()).toBe('sound')
    expect((await vitalityOf(ada, packet.id)).evidence).toMatchObject({ pitches: 2, slow: 1, none: 1 })
  })
})

describe('the database', () => {
  it('lets nothing set what is left past the moves, and takes none back', async () => {
    const app = testApp()
    const { ada } = people(app)
    const { id } = await makePacket(app, ada)
    const run = (sql: string) => () => app.db.$client.prepare(sql).run()
    expect(run(`update packets set remaining_milli = 9000 where id = '${id}'`)).toThrow(/follows the moves/)
    expect(run('delete from packet_moves')).toThrow(/only added/)
    expect(run('update packet_moves set change_milli = 1')).toThrow(/only added/)
    const below = `insert into packet_moves values ('m', '${id}', 'recounted', -5001, null, '${ada.id}', '', 'now')`
    expect(run(below)).toThrow(/not enough/)
  })

  it('is asked as often for forty packets as for four', async () => {
    const app = testApp()
    const { ada } = people(app)
    const count = async (path: string) => {
      app.statements()
      expect((await ada.agent.get(path)).status).toBe(200)
      return app.statements().length
    }
    const first = await makePacket(app, ada)
    await pitchAndReport(app, ada, first.id, { outcome: 'started', hoursToActivity: 9 })
    const paths = ['/api/packets', `/api/packets/${first.id}/vitality`, '/api/yeast-strains', '/api/pitches']
    const few = []
    for (const path of paths) few.push(await count(path))
    for (let n = 0; n < 40; n++) await makePacket(app, ada, { lotCode: `L${n}`, strain: `Strain ${n}` })
    const many = []
    for (const path of paths) many.push(await count(path))
    expect(many).toEqual(few)
    expect(Math.max(...many)).toBeLessThanOrEqual(8)
  })
})
