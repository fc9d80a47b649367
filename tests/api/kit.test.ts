import request from 'supertest'
import { describe, expect, it } from 'vitest'
import type { Fault } from '#shared/kit/fault-contract'
import type { HygieneResult } from '#shared/kit/care-contract'
import type { ItemDetail, ItemHistoryEntry } from '#shared/kit/item-contract'
import type { Kind } from '#shared/kit/kind-contract'
import type { Loan } from '#shared/loans/contract'
import { addItemEvent } from '#server/services/kit/item-events'
import { write } from '#server/db/open'
import { makeItem, makeItems, makeKind, sanitise } from '#tests/support/makers/kit'
import { askFor, inDays, makeLoan, makeShelf } from '#tests/support/makers/loans'
import { people, person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

function space() {
  const app = testApp()
  return { app, ...people(app) }
}

const body = <T>(reply: { body: unknown }) => reply.body as T
const items = <T>(reply: { body: unknown }) => (reply.body as { items: T[] }).items
const codeOf = (reply: { status: number; body: unknown }) => [
  reply.status,
  (reply.body as { code?: string }).code,
]
const pathsOf = (reply: { body: unknown }) =>
  (reply.body as { errors: { path: string }[] }).errors.map((error) => error.path)

const bucket = {
  name: 'Bucket 25 L',
  category: 'vessel',
  capacityLitres: 25,
  turnaroundDays: 2,
  maxLoanDays: 21,
  maxAheadDays: 90,
  maxPerMember: 1,
  maxFillTemperatureC: 60,
  cautions: ['Let it cool before you lift it.'],
}

describe('kinds of kit', () => {
  it('are added by a steward and read by a member, with how many can be lent', async () => {
    const { app, sam, ada } = space()
    const added = await sam.agent.post('/api/kinds').send(bucket)
    expect(added.status).toBe(201)
    const kind = body<Kind>(added)
    makeItems(app, sam, kind.id, 3)
    const read = await ada.agent.get(`/api/kinds/${kind.id}`)
    expect(read.body).toMatchObject({
      ...bucket,
      selfApproving: false,
      items: { total: 3, serviceable: 3 },
      version: 1,
    })
    expect(read.get('etag')).toBe('"1"')
    expect(items<Kind>(await ada.agent.get('/api/kinds')).map((k) => k.name)).toEqual(['Bucket 25 L'])
  })

  it('are found by category and by part of their name', async () => {
    const { app, sam, ada } = space()
    makeKind(app, sam, { name: 'Hydrometer 20 °C', category: 'instrument' })
    makeKind(app, sam, { name: 'Bench capper', category: 'closure', description: 'Crown caps, 26 mm.' })
    const names = async (query: string) =>
      items<Kind>(await ada.agent.get(`/api/kinds?${query}`)).map((k) => k.name)
    expect(await names('category=instrument')).toEqual(['Hydrometer 20 °C'])
    expect(await names('q=CROWN')).toEqual(['Bench capper'])
    expect(await names('q=%25')).toEqual(['Bench capper', 'Hydrometer 20 °C'])
    expect(codeOf(await ada.agent.get('/api/kinds?category=furniture'))).toEqual([400, 'invalid'])
  })

  it('have a name of their own', async () => {
    const { sam } = space()
    await sam.agent.post('/api/kinds').send(bucket)
    const again = await sam.agent.post('/api/kinds').send({ ...bucket, name: 'BUCKET 25 l' })
    expect(codeOf(again)).toEqual([400, 'invalid'])
    expect(pathsOf(again)).toEqual(['name'])
  })

  it('change only with the version that was read', async () => {
    const { app, sam } = space()
    const kind = makeKind(app, sam)
    const change = (version?: string) => {
      const act = sam.agent.patch(`/api/kinds/${kind.id}`)
      return (version === undefined ? act : act.set('If-Match', version)).send({ maxLoanDays: 40 })
    }
    expect(codeOf(await change())).toEqual([428, 'needs-version'])
    const changed = await change('"1"')
    expect(changed.body).toMatchObject({ maxLoanDays: 40, name: kind.name, version: 2 })
    expect(changed.get('etag')).toBe('"2"')
    expect(codeOf(await change('"1"'))).toEqual([412, 'stale'])
  })

  it('leave the list when retired and come back', async () => {
    const { app, sam, ada } = space()
    const kind = makeKind(app, sam)
    await sam.agent.patch(`/api/kinds/${kind.id}`).set('If-Match', '"1"').send({ retired: true })
    expect(items(await ada.agent.get('/api/kinds'))).toEqual([])
    expect(items(await ada.agent.get('/api/kinds?retired=true'))).toHaveLength(1)
    expect((await ada.agent.get(`/api/kinds/${kind.id}`)).body).toMatchObject({ retired: true })
  })

  it('take their items along to the wild pool when they become wild-only', async () => {
    const { app, sam } = space()
    const kind = makeKind(app, sam)
    const item = makeItem(app, sam, kind.id)
    const after = await sam.agent
      .patch(`/api/kinds/${kind.id}`)
      .set('If-Match', '"1"')
      .send({ wildOnly: true })
    expect(after.body).toMatchObject({ wildOnly: true, items: { total: 1, serviceable: 1 } })
    expect((await sam.agent.get(`/api/items/${item.id}`)).body).toMatchObject({ wild: true, version: 2 })
    const tame = await sam.agent.patch(`/api/items/${item.id}`).set('If-Match', '"2"').send({ wild: false })
    expect(pathsOf(tame)).toEqual(['wild'])
  })

  it('refuse what is out of range, unknown or not theirs to set, with a path for each', async () => {
    const { sam } = space()
    const reply = await sam.agent.post('/api/kinds').send({
      ...bucket,
      turnaroundDays: -1,
      capacityLitres: '25',
      cautions: ['fine', ''],
      version: 9,
    })
    expect(reply.status).toBe(400)
    expect(pathsOf(reply).sort()).toEqual(['capacityLitres', 'cautions.1', 'turnaroundDays', 'version'])
  })

  it('read with the same number of statements however many there are', async () => {
    const { app, sam, ada } = space()
    const counted = async (path: string) => {
      app.statements()
      expect((await ada.agent.get(path)).status).toBe(200)
      return app.statements().length
    }
    const fill = (count: number) => {
      for (let n = 0; n < count; n++) makeItems(app, sam, makeKind(app, sam).id, 3)
    }
    fill(1)
    const few = [await counted('/api/kinds'), await counted('/api/items')]
    fill(30)
    expect([await counted('/api/kinds'), await counted('/api/items')]).toEqual(few)
    expect(few[0]).toBeLessThanOrEqual(4)
  })

  it('come in pages that leave none out', async () => {
    const { app, sam, ada } = space()
    for (let n = 0; n < 7; n++) makeKind(app, sam)
    const seen: string[] = []
    let cursor: string | null = ''
    while (cursor !== null) {
      const page = await ada.agent.get(`/api/kinds?limit=3${cursor && `&cursor=${cursor}`}`)
      seen.push(...items<Kind>(page).map((k) => k.name))
      cursor = (page.body as { nextCursor: string | null }).nextCursor
    }
    expect(seen).toHaveLength(7)
    expect(new Set(seen).size).toBe(7)
  })
})

describe('a creating request', () => {
  it('sent twice with one key is done once, and the key serves nothing else', async () => {
    const { app, sam } = space()
    const send = (name: string) =>
      sam.agent
        .post('/api/kinds')
        .set('Idempotency-Key', 'one')
        .send({ ...bucket, name })
    const first = await send('Bucket')
    const again = await send('Bucket')
    expect(again.status).toBe(201)
    expect(again.body).toEqual(first.body)
    expect(again.get('idempotency-replayed')).toBe('true')
    expect(codeOf(await send('Another bucket'))).toEqual([422, 'idempotency-key-reused'])
    const item = makeItem(app, sam, body<Kind>(first).id)
    const report = () =>
      sam.agent
        .post(`/api/items/${item.id}/faults`)
        .set('Idempotency-Key', 'two')
        .send({ summary: 'Chipped lip', blocking: true })
    expect(body<Fault>(await report()).id).toBe(body<Fault>(await report()).id)
    expect(body<ItemDetail>(await sam.agent.get(`/api/items/${item.id}`)).faults).toHaveLength(1)
  })
})

describe('items', () => {
  it('are found by id and by tag, whatever the letter case', async () => {
    const { app, sam, ada } = space()
    const kind = makeKind(app, sam)
    const added = await sam.agent.post('/api/items').send({ tag: 'dj-07', kindId: kind.id, shelf: 'A2' })
    expect(added.status).toBe(201)
    const item = body<ItemDetail>(added)
    expect(item).toMatchObject({
      tag: 'DJ-07',
      hygiene: 'dirty',
      status: 'in-service',
      wild: false,
      kindName: kind.name,
    })
    expect((await ada.agent.get(`/api/items/${item.id}`)).body).toEqual(item)
    expect((await ada.agent.get('/api/items/dj-07')).body).toEqual(item)
    const again = await sam.agent.post('/api/items').send({ tag: 'Dj-07', kindId: kind.id })
    expect(pathsOf(again)).toEqual(['tag'])
  })

  it.each(['', 'DJ 07', 'DJ--7', '../x', 'A-VERY-LONG-TAG', 'Ø1', "'; drop table items"])(
    'refuse %j as a tag',
    async (tag) => {
      const { app, sam } = space()
      const reply = await sam.agent.post('/api/items').send({ tag, kindId: makeKind(app, sam).id })
      expect(pathsOf(reply)).toEqual(['tag'])
    },
  )

  it('that are not there are 404, by any name', async () => {
    const { app, ada, sam } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id)
    for (const name of ['nothing', 'DJ-99', `${item.id}x`, '..%2F..', '%00', 'x'.repeat(300)])
      expect(codeOf(await ada.agent.get(`/api/items/${name}`)), name).toEqual([404, 'not-found'])
    expect((await sam.agent.post('/api/items/nothing/hygiene').send({ state: 'clean' })).status).toBe(404)
    expect(
      (await ada.agent.post('/api/items/nothing/faults').send({ summary: 'x', blocking: true })).status,
    ).toBe(404)
    expect((await sam.agent.post('/api/faults/nothing/resolve').send({})).status).toBe(404)
  })

  it('are a steward’s to change', async () => {
    const { app, ada, sam } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id)
    const change = { status: 'repair', shelf: 'Bench', reason: 'New tap wanted' }
    const tried = await ada.agent.patch(`/api/items/${item.id}`).set('If-Match', '"1"').send(change)
    expect(codeOf(tried)).toEqual([403, 'forbidden'])
    const changed = await sam.agent.patch(`/api/items/${item.id}`).set('If-Match', '"1"').send(change)
    expect(changed.body).toMatchObject({ status: 'repair', shelf: 'Bench', serviceable: false, version: 2 })
    const kind = await ada.agent.get(`/api/kinds/${item.kindId}`)
    expect(kind.body).toMatchObject({ items: { total: 1, serviceable: 0 } })
  })

  it('that are retired keep their history', async () => {
    const { app, sam, ada } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id)
    const retire = { status: 'retired', reason: 'Cracked through' }
    await sam.agent.patch(`/api/items/${item.id}`).set('If-Match', '"1"').send(retire)
    const history = items<ItemHistoryEntry>(await ada.agent.get(`/api/items/${item.tag}/history`))
    expect(history.map((h) => h.event)).toEqual(['status-changed', 'added'])
    expect(history[0]).toMatchObject({
      byName: 'Sam Tolliver',
      detail: { from: 'in-service', to: 'retired', reason: 'Cracked through' },
    })
    const lost = await sam.agent
      .patch(`/api/items/${item.id}`)
      .set('If-Match', '"2"')
      .send({ status: 'lost' })
    expect(codeOf(lost)).toEqual([409, 'wrong-state'])
    const clean = await sam.agent.post(`/api/items/${item.id}/hygiene`).send({ state: 'clean' })
    expect(codeOf(clean)).toEqual([409, 'wrong-state'])
  })

  it('are listed by kind, hygiene and status', async () => {
    const { app, sam, ada } = space()
    const one = makeKind(app, sam)
    const [a, b] = makeItems(app, sam, one.id, 2)
    makeItem(app, sam, makeKind(app, sam).id, { hygiene: 'dirty' })
    sanitise(app, sam, b!.id)
    const tags = async (query: string) =>
      items<ItemDetail>(await ada.agent.get(`/api/items?${query}`)).map((i) => i.tag)
    expect(await tags(`kindId=${one.id}`)).toEqual([a!.tag, b!.tag])
    expect(await tags('hygiene=sanitised')).toEqual([b!.tag])
    expect(await tags('hygiene=clean')).toEqual([a!.tag])
    expect(await tags('status=retired')).toEqual([])
    app.clock.advance({ hours: 25 })
    expect(await tags('hygiene=sanitised')).toEqual([])
    expect(await tags(`kindId=${one.id}&hygiene=clean`)).toEqual([a!.tag, b!.tag])
  })
})

describe('hygiene', () => {
  it('keeps how, how long, who and until when', async () => {
    const { app, sam, ada } = space()
    const item = makeItem(app, sam, makeKind(app, sam, { sanitisedHours: 48 }).id)
    const act = { state: 'sanitised', agent: 'Iodophor', concentration: '25 mg/L', contactMinutes: 2 }
    const reply = await sam.agent.post(`/api/items/${item.tag}/hygiene`).send(act)
    expect(reply.status).toBe(201)
    expect(reply.body).toMatchObject({
      hygiene: 'sanitised',
      sanitisedUntil: '2031-05-08T10:00:00.000Z',
      warnings: [],
      version: 2,
    })
    const [entry] = items<ItemHistoryEntry>(await ada.agent.get(`/api/items/${item.id}/history`))
    expect(entry).toMatchObject({
      event: 'hygiene-recorded',
      byName: 'Sam Tolliver',
      detail: { state: 'sanitised', agent: 'iodophor', concentration: '25 mg/L', contactMinutes: 2 },
    })
    app.clock.advance({ hours: 48 })
    expect((await ada.agent.get(`/api/items/${item.id}`)).body).toMatchObject({ hygiene: 'clean' })
  })

  it('warns of a contact under the usual one and of soil, and keeps the record', async () => {
    const { app, sam } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id, { hygiene: 'dirty' })
    const record = async (act: object) =>
      body<HygieneResult>(await sam.agent.post(`/api/items/${item.id}/hygiene`).send(act)).warnings.map(
        (w) => w.code,
      )
    expect(await record({ state: 'sanitised', agent: 'iodophor', contactMinutes: 0.25 })).toEqual([
      'not-washed-first',
      'contact-short',
    ])
    expect(await record({ state: 'clean', agent: 'percarbonate' })).toEqual([])
    expect(await record({ state: 'sanitised', agent: 'percarbonate', contactMinutes: 20 })).toEqual([
      'not-a-sanitiser',
    ])
    expect(await record({ state: 'sanitised' })).toEqual(['agent-missing'])
    expect(await record({ state: 'sanitised', agent: 'A brand of our own' })).toEqual(['contact-missing'])
  })

  it('is recorded by stewards, with nothing made up', async () => {
    const { app, ada, sam } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id)
    expect((await ada.agent.post(`/api/items/${item.id}/hygiene`).send({ state: 'clean' })).status).toBe(403)
    const bad = await sam.agent
      .post(`/api/items/${item.id}/hygiene`)
      .send({ state: 'spotless', contactMinutes: -1, validUntil: '2099-01-01T00:00:00.000Z' })
    expect(pathsOf(bad).sort()).toEqual(['contactMinutes', 'state', 'validUntil'])
  })

  it('is only added to, even by hand', () => {
    const { app, sam } = space()
    sanitise(app, sam, makeItem(app, sam, makeKind(app, sam).id).id)
    const run = (sql: string) => () => app.db.$client.exec(sql)
    expect(run("UPDATE hygiene_records SET agent = 'water'")).toThrow(/only added to/)
    expect(run('DELETE FROM hygiene_records')).toThrow(/only added to/)
    expect(run('DELETE FROM item_events')).toThrow(/only added to/)
  })
})

describe('faults', () => {
  it('reported by a member take the item out of service until a steward settles them', async () => {
    const { app, ada, sam } = space()
    const kind = makeKind(app, sam)
    const [item] = makeItems(app, sam, kind.id, 2)
    const path = `/api/items/${item!.tag}/faults`
    const minor = body<Fault>(await ada.agent.post(path).send({ summary: 'Label worn off', blocking: false }))
    expect(minor).toMatchObject({ severity: 'minor', reportedByName: 'Ada Marsh', resolvedAt: null })
    const serviceable = async () => body<Kind>(await ada.agent.get(`/api/kinds/${kind.id}`)).items.serviceable
    expect(await serviceable()).toBe(2)
    const blocking = body<Fault>(
      await ada.agent.post(path).send({ summary: 'Hairline crack', blocking: true }),
    )
    expect(await serviceable()).toBe(1)
    expect(codeOf(await ada.agent.post(`/api/faults/${blocking.id}/resolve`).send({}))).toEqual([
      403,
      'forbidden',
    ])
    const settled = await sam.agent
      .post(`/api/faults/${blocking.id}/resolve`)
      .send({ note: 'Only a scratch' })
    expect(settled.body).toMatchObject({ resolvedByName: 'Sam Tolliver', note: 'Only a scratch' })
    expect(await serviceable()).toBe(2)
    expect(codeOf(await sam.agent.post(`/api/faults/${blocking.id}/resolve`).send({}))).toEqual([
      409,
      'wrong-state',
    ])
    const detail = body<ItemDetail>(await ada.agent.get(`/api/items/${item!.id}`))
    expect(detail.faults.map((f) => f.summary)).toEqual(['Label worn off', 'Hairline crack'])
    expect(detail.openFaults).toBe(1)
  })

  it('that may hurt someone always block', async () => {
    const { app, ada, sam } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id)
    const report = (blocking: boolean) =>
      ada.agent
        .post(`/api/items/${item.id}/faults`)
        .send({ summary: 'Bare wire', blocking, severity: 'danger' })
    expect(pathsOf(await report(false))).toEqual(['blocking'])
    expect((await report(true)).status).toBe(201)
  })
})

describe('hydrometers', () => {
  it('keep what they are out by in plain water, with day and person', async () => {
    const { app, ada, sam } = space()
    const kind = makeKind(app, sam, {
      category: 'instrument',
      markedForTemperatureC: 20,
      calibrationMonths: 6,
    })
    const item = makeItem(app, sam, kind.id)
    expect(item.calibrationDueOn).toBe('2031-05-06')
    const check = { waterReadingSg: 1.002, waterTemperatureC: 20 }
    expect((await ada.agent.post(`/api/items/${item.id}/calibrations`).send(check)).status).toBe(403)
    const reply = await sam.agent.post(`/api/items/${item.id}/calibrations`).send(check)
    expect(reply.status).toBe(201)
    // At its own temperature plain water reads 1.000, so an instrument showing 1.002 is out by 0.002.
    expect(reply.body).toMatchObject({ offsetSg: -0.002, calibratedByName: 'Sam Tolliver' })
    expect((await ada.agent.get(`/api/items/${item.id}`)).body).toMatchObject({
      calibration: { offsetSg: -0.002, calibratedOn: '2031-05-06', calibratedByName: 'Sam Tolliver' },
      calibrationDueOn: '2031-11-06',
    })
  })

  it('are told from what is none', async () => {
    const { app, sam } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id)
    const check = { waterReadingSg: 1, waterTemperatureC: 20 }
    expect(codeOf(await sam.agent.post(`/api/items/${item.id}/calibrations`).send(check))).toEqual([
      409,
      'wrong-state',
    ])
    const bad = await sam.agent
      .post(`/api/items/${item.id}/calibrations`)
      .send({ waterReadingSg: 1.2, waterTemperatureC: 90 })
    expect(pathsOf(bad).sort()).toEqual(['waterReadingSg', 'waterTemperatureC'])
  })
})

describe('inductions', () => {
  it('are given, run out, are renewed and taken back', async () => {
    const { app, ada, bo, sam } = space()
    const kind = makeKind(app, sam, {
      needsInduction: true,
      inductionMonths: 12,
      inductionNote: 'Ask on Tuesdays.',
    })
    const path = `/api/members/${ada.id}/inductions/${kind.id}`
    const mine = async () => body<Kind>(await ada.agent.get(`/api/kinds/${kind.id}`))
    expect(await mine()).toMatchObject({ inducted: false, inductionExpiresOn: null })
    expect((await ada.agent.put(path).send({})).status).toBe(403)
    const given = await sam.agent.put(path).send({ givenOn: '2030-05-06' })
    expect(given.body).toMatchObject({ expiresOn: '2031-05-06', valid: true, givenByName: 'Sam Tolliver' })
    expect(await mine()).toMatchObject({ inducted: true, inductionExpiresOn: '2031-05-06' })
    expect(body<Kind>(await bo.agent.get(`/api/kinds/${kind.id}`)).inducted).toBe(false)
    app.clock.advance({ days: 1 })
    expect((await mine()).inducted).toBe(false)
    const { agent } = person(app, 'Nan Oakes', 'steward')
    await agent.put(path).send({})
    expect((await mine()).inducted).toBe(true)
    const list = await agent.get(`/api/kinds/${kind.id}/inductions`)
    expect(items(list)).toMatchObject([{ memberName: 'Ada Marsh', valid: true }])
    expect((await ada.agent.get(`/api/kinds/${kind.id}/inductions`)).status).toBe(403)
    expect((await agent.delete(path)).status).toBe(204)
    expect((await agent.delete(path)).status).toBe(404)
    expect((await mine()).inducted).toBe(false)
  })

  it('belong to a member and a kind that are there and need one', async () => {
    const { app, ada, sam } = space()
    const kind = makeKind(app, sam, { needsInduction: true })
    const put = (member: string, kindId: string, given = {}) =>
      sam.agent.put(`/api/members/${member}/inductions/${kindId}`).send(given)
    expect((await put('nobody', kind.id)).status).toBe(404)
    expect((await put(ada.id, 'nothing')).status).toBe(404)
    expect(codeOf(await put(ada.id, makeKind(app, sam).id))).toEqual([409, 'wrong-state'])
    expect(pathsOf(await put(ada.id, kind.id, { givenOn: '2031-05-07' }))).toEqual(['givenOn'])
  })
})

describe('the history of an item', () => {
  it('tells only stewards whose loan it was', async () => {
    const { app, ada, bo, sam } = space()
    const item = makeItem(app, sam, makeKind(app, sam).id)
    write(app.db, (tx) =>
      addItemEvent(tx, {
        itemId: item.id,
        event: 'checked-out',
        actorId: sam.id,
        borrowerId: bo.id,
        aboutId: 'a-loan',
        happenedAt: app.clock.now(),
      }),
    )
    const read = async (who: typeof ada) =>
      items<ItemHistoryEntry>(await who.agent.get(`/api/items/${item.id}/history?limit=1`))[0]
    expect(await read(sam)).toMatchObject({
      event: 'checked-out',
      borrowerName: 'Bo Linden',
      aboutId: 'a-loan',
    })
    expect(await read(ada)).toMatchObject({ event: 'checked-out', borrowerName: null, aboutId: null })
    expect((await request(app.app).get(`/api/items/${item.id}/history`)).status).toBe(401)
  })
})

describe('what leaves the shelf', () => {
  it('puts the bookings it endangers at risk, and settling it makes them safe again', async () => {
    const { app, ada, sam } = space()
    const { kind, items: two } = makeShelf(app, sam, 2)
    const wanted = { kindId: kind.id, from: inDays(app, 3), to: inDays(app, 9) }
    const first = await askFor(ada, wanted)
    const second = await askFor(ada, wanted)
    const risks = async () => {
      const reply = await ada.agent.get('/api/loans')
      return items<Loan>(reply).flatMap((loan) => (loan.atRisk ? [[loan.id, loan.atRiskReason]] : []))
    }
    const report = await ada.agent
      .post(`/api/items/${two[0]!.id}/faults`)
      .send({ summary: 'Cracked', blocking: true })
    expect(await risks()).toEqual([[second.id, 'out-of-service']])
    await sam.agent.post(`/api/faults/${body<Fault>(report).id}/resolve`).send({})
    expect(await risks()).toEqual([])
    await sam.agent.patch(`/api/items/${two[1]!.id}`).set('If-Match', '"1"').send({ status: 'repair' })
    expect(await risks()).toEqual([[second.id, 'out-of-service']])
    await sam.agent.post('/api/items').send({ tag: 'NEW-1', kindId: kind.id })
    expect(await risks()).toEqual([])
    expect(first.atRisk).toBe(false)
  })

  it('is offered to who waits for it when it comes back', async () => {
    const { app, ada, bo, sam } = space()
    const { kind } = makeShelf(app, sam, 1)
    const wanted = { kindId: kind.id, from: inDays(app, 3), to: inDays(app, 9) }
    await askFor(ada, wanted)
    expect((await bo.agent.post('/api/waiting').send(wanted)).status).toBe(201)
    await sam.agent.post('/api/items').send({ tag: 'NEW-1', kindId: kind.id })
    expect(items(await bo.agent.get('/api/waiting'))).toMatchObject([{ state: 'offered' }])
  })

  it('says of an item on loan that it is out, and only to stewards and its borrower which loan', async () => {
    const { app, ada, bo, sam } = space()
    const { kind, items: one } = makeShelf(app, sam, 1)
    const wanted = { kindId: kind.id, from: inDays(app, 0), to: inDays(app, 6) }
    const loan = await makeLoan(app, { member: ada, steward: sam }, { ...wanted, itemId: one[0]!.id }, 'out')
    const seenBy = async (who: typeof ada) =>
      body<ItemDetail>(await who.agent.get(`/api/items/${one[0]!.tag}`)).out
    const out = { dueOn: wanted.to, overdue: false }
    expect(await seenBy(sam)).toEqual({ ...out, loanId: loan.id, borrowerName: 'Ada Marsh' })
    expect(await seenBy(ada)).toEqual({ ...out, loanId: loan.id, borrowerName: null })
    expect(await seenBy(bo)).toEqual({ ...out, loanId: null, borrowerName: null })
  })
})
