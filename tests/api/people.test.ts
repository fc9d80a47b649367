import request from 'supertest'
import { desc, eq } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { letters } from '#server/db/schema/notices'
import { members } from '#server/db/schema/people'
import { people, person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

const GOOD = 'nine grey herons over the weir'

/** The path of the link in the newest letter of a kind. */
function linkIn(app: TestApp, kind: string): string {
  const letter = app.db
    .select()
    .from(letters)
    .where(eq(letters.kind, kind))
    .orderBy(desc(letters.queuedAt))
    .get()
  const path = /http:\/\/localhost:3000(\S+)/
    .exec(letter?.text ?? '')?.[1]
    ?.replace('/forgotten/', '/password-resets/')
  if (!path) throw new Error(`no link in a letter of kind ${kind}`)
  expect(letter?.subject).not.toContain(path.split('/').at(-1))
  return path
}
const signIn = (app: TestApp, email: string, password: string) =>
  request(app.app).post('/api/session').send({ email, password })

describe('joining', () => {
  it('goes from a request to an invitation to an account', async () => {
    const app = testApp()
    const { sam } = people(app)
    const ask = { name: 'Wyn Farrow', email: 'Wyn@barmhouse.example', note: 'I make perry.' }
    expect((await request(app.app).post('/api/join-requests').send(ask)).status).toBe(202)
    const list = (await sam.agent.get('/api/join-requests?status=waiting')).body as {
      items: { id: string }[]
    }
    expect(list.items).toHaveLength(1)
    const id = list.items[0]?.id ?? ''
    expect((await sam.agent.post(`/api/join-requests/${id}/welcome`)).body).toMatchObject({
      status: 'welcomed',
    })
    expect((await sam.agent.post(`/api/join-requests/${id}/welcome`)).status).toBe(409)

    const path = `/api${linkIn(app, 'account-invitation')}`
    expect((await request(app.app).get(path)).body).toMatchObject({ email: 'wyn@barmhouse.example' })
    const short = await request(app.app)
      .post(`${path}/accept`)
      .send({ name: 'Wyn Farrow', password: 'too short' })
    expect(short.status).toBe(400)
    expect(short.body).toMatchObject({ errors: [{ path: 'password' }] })
    const agent = request.agent(app.app)
    const accepted = await agent.post(`${path}/accept`).send({ name: 'Wyn Farrow', password: GOOD })
    expect(accepted.status).toBe(201)
    expect((await agent.get('/api/me')).body).toMatchObject({ name: 'Wyn Farrow', role: 'member' })
    const again = await request(app.app)
      .post(`${path}/accept`)
      .send({ name: 'Mallory Quick', password: GOOD })
    expect(again.status).toBe(404)
  })

  it('says the same to a member’s address and to a stranger’s', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    const known = await request(app.app).post('/api/join-requests').send({ name: 'X', email: ada.email })
    expect([known.status, known.text]).toEqual([202, ''])
    expect((await sam.agent.get('/api/join-requests')).body).toMatchObject({ items: [] })
  })

  it('lets an invitation run out after 72 hours', async () => {
    const app = testApp()
    const { kit } = people(app)
    const invited = await kit.agent
      .post('/api/invitations')
      .send({ email: 'new@barmhouse.example', role: 'steward' })
    expect(invited.status).toBe(201)
    const path = `/api${linkIn(app, 'account-invitation')}`
    app.clock.advance({ hours: 72, minutes: 1 })
    expect((await request(app.app).get(path)).status).toBe(404)
  })

  it('lets only admins invite, and nobody twice', async () => {
    const app = testApp()
    const { ada, sam, kit } = people(app)
    const body = { email: 'new@barmhouse.example', role: 'admin' }
    for (const who of [ada, sam])
      expect((await who.agent.post('/api/invitations').send(body)).status).toBe(403)
    const taken = await kit.agent.post('/api/invitations').send({ ...body, email: ada.email })
    expect(taken.status).toBe(400)
  })
})

describe('a password', () => {
  it('is reset by a link that works once, for half an hour, and ends every session', async () => {
    const app = testApp()
    const { ada } = people(app)
    const asked = await request(app.app).post('/api/password-resets').send({ email: ada.email })
    const unknown = await request(app.app)
      .post('/api/password-resets')
      .send({ email: 'no@barmhouse.example' })
    expect([asked.status, asked.text]).toEqual([unknown.status, unknown.text])
    expect(app.db.select().from(letters).where(eq(letters.kind, 'account-reset')).all()).toHaveLength(1)
    const path = `/api${linkIn(app, 'account-reset')}`
    expect((await request(app.app).post(path).send({ password: GOOD })).status).toBe(204)
    expect(
      (
        await request(app.app)
          .post(path)
          .send({ password: `${GOOD} again` })
      ).status,
    ).toBe(404)
    expect((await ada.agent.get('/api/session')).status).toBe(401)
    expect((await signIn(app, ada.email, GOOD)).status).toBe(200)
  })

  it('is refused when common, short, personal or repeated, each with its reason', async () => {
    const app = testApp()
    const { ada } = people(app)
    await request(app.app).post('/api/password-resets').send({ email: ada.email })
    const path = `/api${linkIn(app, 'account-reset')}`
    const refused = [
      'fourteen chars',
      'aaaaaaaaaaaaaaaa',
      'Ada Marsh 123456789',
      '123456789987654321',
      'abcdefghijklmnop',
    ]
    for (const password of refused) {
      const reply = await request(app.app).post(path).send({ password })
      expect([password, reply.status]).toEqual([password, 400])
    }
    // Fifteen characters of any kind are enough.
    expect((await request(app.app).post(path).send({ password: 'seven oat husks' })).status).toBe(204)
  })

  it('changes only for who knows the old one, and signs other browsers out', async () => {
    const app = testApp()
    const { ada } = people(app)
    await request(app.app).post('/api/password-resets').send({ email: ada.email })
    await request(app.app)
      .post(`/api${linkIn(app, 'account-reset')}`)
      .send({ password: GOOD })
    const one = request.agent(app.app)
    const two = request.agent(app.app)
    for (const agent of [one, two])
      await agent.post('/api/session').send({ email: ada.email, password: GOOD })
    const wrong = await one
      .post('/api/me/password')
      .send({ current: 'a wrong one entirely', password: `${GOOD} 2` })
    expect(wrong.body).toMatchObject({ code: 'invalid', errors: [{ path: 'current' }] })
    expect((await one.post('/api/me/password').send({ current: GOOD, password: `${GOOD} 2` })).status).toBe(
      204,
    )
    expect((await one.get('/api/me')).status).toBe(200)
    expect((await two.get('/api/me')).status).toBe(401)
  })
})

describe('an account', () => {
  it('is edited with the version that was seen', async () => {
    const app = testApp()
    const { ada } = people(app)
    const change = { phone: '01632 960555' }
    expect((await ada.agent.patch('/api/me').send(change)).status).toBe(428)
    const first = await ada.agent.patch('/api/me').set('If-Match', '"1"').send(change)
    expect(first.status).toBe(200)
    expect(first.get('etag')).toBe('"2"')
    expect((await ada.agent.patch('/api/me').set('If-Match', '"1"').send(change)).status).toBe(412)
  })

  it('moves to another address once the link sent there is used', async () => {
    const app = testApp()
    const { ada } = people(app)
    const asked = await ada.agent.post('/api/me/email').send({ email: 'ada.new@barmhouse.example' })
    expect(asked.status).toBe(400)
    await request(app.app).post('/api/password-resets').send({ email: ada.email })
    await request(app.app)
      .post(`/api${linkIn(app, 'account-reset')}`)
      .send({ password: GOOD })
    const agent = request.agent(app.app)
    await agent.post('/api/session').send({ email: ada.email, password: GOOD })
    expect((await agent.post('/api/me/email').send({ email: 'ada.new@barmhouse.example' })).status).toBe(202)
    expect((await agent.get('/api/me')).body).toMatchObject({
      email: ada.email,
      pendingEmail: 'ada.new@barmhouse.example',
    })
    expect((await request(app.app).post(`/api${linkIn(app, 'account-email-confirm')}`)).status).toBe(204)
    expect((await agent.get('/api/me')).body).toMatchObject({
      email: 'ada.new@barmhouse.example',
      pendingEmail: null,
    })
  })

  it('exports what is held about its owner, without secrets', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const reply = await ada.agent.get('/api/me/export')
    expect(reply.status).toBe(200)
    expect(reply.text).toContain(ada.email)
    expect(reply.text).not.toContain(bo.email)
    expect(reply.text).not.toMatch(/digest|argon2/)
  })
})

describe('members', () => {
  it('are searched and paged by stewards, never listed to members', async () => {
    const app = testApp()
    const { ada, sam } = people(app)
    for (let n = 0; n < 12; n++) person(app, `Member Number ${n}`)
    expect((await ada.agent.get('/api/members')).status).toBe(403)
    const seen: string[] = []
    let cursor: string | null = ''
    while (cursor !== null) {
      const reply = await sam.agent.get(`/api/members?limit=5${cursor && `&cursor=${cursor}`}`)
      const page = reply.body as { items: { name: string }[]; nextCursor: string | null }
      seen.push(...page.items.map((m) => m.name))
      cursor = page.nextCursor
    }
    expect(seen).toHaveLength(16)
    expect(seen).toEqual([...seen].sort())
    const found = (await sam.agent.get('/api/members?q=NUMBER 7')).body as { items: unknown[] }
    expect(found.items).toHaveLength(1)
  })

  it('are suspended and given roles by admins; the last admin stays', async () => {
    const app = testApp()
    const { ada, sam, kit } = people(app)
    const patch = (who: typeof ada, id: string, body: object, version = 1) =>
      who.agent.patch(`/api/members/${id}`).set('If-Match', `"${version}"`).send(body)
    expect((await patch(sam, ada.id, { role: 'steward' })).status).toBe(403)
    expect((await patch(kit, ada.id, { status: 'suspended' })).body).toMatchObject({ status: 'suspended' })
    expect((await ada.agent.get('/api/me')).status).toBe(200)
    expect((await ada.agent.patch('/api/me').set('If-Match', '"2"').send({ name: 'Ada M' })).status).toBe(200)
    expect((await patch(kit, kit.id, { role: 'member' })).status).toBe(409)
    expect((await patch(kit, 'nothing', { role: 'member' })).status).toBe(404)
  })
})

describe('leaving', () => {
  it('stops the account at once, and erases the person from every byte when the undo time is over', async () => {
    const app = testApp()
    const { bo, kit } = people(app)
    const marker = 'Zephyrine Quackenbush'
    const zed = person(app, marker)
    app.db.update(members).set({ phone: '01632 960777' }).where(eq(members.id, zed.id)).run()
    const before = app.db.select().from(members).all().length
    expect((await zed.agent.delete('/api/me').send({ password: 'x' })).status).toBe(401)
    await request(app.app).post('/api/password-resets').send({ email: zed.email })
    await request(app.app)
      .post(`/api${linkIn(app, 'account-reset')}`)
      .send({ password: GOOD })
    const agent = request.agent(app.app)
    await agent.post('/api/session').send({ email: zed.email, password: GOOD })
    const left = await agent.delete('/api/me').send({})
    expect(left.status).toBe(200)
    expect((await agent.get('/api/me')).status).toBe(401)
    const { eraseDue } = await import('#server/services/erasure')
    app.clock.advance({ days: 13 })
    expect(eraseDue(app.deps)).toBe(0)
    app.clock.advance({ days: 1 })
    expect(eraseDue(app.deps)).toBe(1)
    const bytes = app.db.$client.serialize().toString('latin1')
    for (const sentinel of ['Zephyrine', 'zephyrine', 'Quackenbush', '960777'])
      expect(bytes).not.toContain(sentinel)
    expect(app.db.select().from(members).all()).toHaveLength(before)
    expect([bo.name, kit.name]).toEqual(['Bo Linden', 'Kit Harrow'])
  })
})
