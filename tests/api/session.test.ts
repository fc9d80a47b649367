import request from 'supertest'
import { describe, expect, it } from 'vitest'
import { addMember } from '#server/services/people'
import { hashPassword } from '#server/services/passwords'
import { sessions } from '#server/db/schema/people'
import { person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

const password = 'three copper kettles in a row'

async function withMember() {
  const app = testApp()
  const passwordHash = await hashPassword(password)
  addMember(app.deps, { name: 'Ada Marsh', email: 'Ada@barmhouse.example', role: 'member', passwordHash })
  return app
}

const signIn = (app: Awaited<ReturnType<typeof withMember>>, email: string, pass: string) =>
  request(app.app).post('/api/session').send({ email, password: pass })

describe('signing in', () => {
  it('gives the member and a cookie that opens the rest', async () => {
    const app = await withMember()
    const agent = request.agent(app.app)
    const reply = await agent.post('/api/session').send({ email: 'ADA@barmhouse.example', password })
    expect(reply.status).toBe(200)
    expect(reply.body).toMatchObject({ member: { name: 'Ada Marsh', role: 'member' } })
    expect(reply.text).not.toContain('argon2')
    const cookie = reply.get('set-cookie')?.[0] ?? ''
    expect(cookie).toMatch(/HttpOnly/)
    expect(cookie).toMatch(/SameSite=Lax/)
    expect((await agent.get('/api/session')).body).toMatchObject({ member: { name: 'Ada Marsh' } })
  })

  it('says the same of a wrong password and of an unknown address', async () => {
    const app = await withMember()
    const wrong = await signIn(app, 'ada@barmhouse.example', 'not it at all')
    const unknown = await signIn(app, 'nobody@barmhouse.example', 'not it at all')
    expect(wrong.status).toBe(401)
    expect(unknown.status).toBe(401)
    const { instance: _a, ...one } = wrong.body as Record<string, unknown>
    const { instance: _b, ...other } = unknown.body as Record<string, unknown>
    expect(one).toEqual(other)
    expect(one).toMatchObject({ code: 'signed-out', type: expect.any(String) as string })
  })

  it('makes an account wait after ten failures, and lets it in again later', async () => {
    const app = await withMember()
    for (let tries = 0; tries < 10; tries++) await signIn(app, 'ada@barmhouse.example', 'wrong')
    const blocked = await signIn(app, 'ada@barmhouse.example', password)
    expect(blocked.status).toBe(429)
    expect(Number(blocked.get('retry-after'))).toBeGreaterThan(0)
    app.clock.advance({ minutes: 16 })
    expect((await signIn(app, 'ada@barmhouse.example', password)).status).toBe(200)
  })

  it('puts a path to each field at fault', async () => {
    const app = await withMember()
    const reply = await request(app.app).post('/api/session').send({ email: 5, hat: true })
    expect(reply.status).toBe(400)
    expect(reply.type).toBe('application/problem+json')
    const paths = (reply.body as { errors: { path: string }[] }).errors.map((e) => e.path)
    expect(paths.sort()).toEqual(['email', 'hat', 'password'])
  })

  it('refuses a request that another site sends', async () => {
    const app = await withMember()
    const body = { email: 'ada@barmhouse.example', password }
    const cross = await request(app.app).post('/api/session').set('Sec-Fetch-Site', 'cross-site').send(body)
    const origin = await request(app.app)
      .post('/api/session')
      .set('Origin', 'https://elsewhere.example')
      .send(body)
    expect([cross.status, origin.status]).toEqual([403, 403])
  })

  it('takes JSON only', async () => {
    const app = await withMember()
    const text = await request(app.app).post('/api/session').type('text/plain').send('{"email":"a"}')
    expect(text.status).toBe(415)
    const broken = await request(app.app).post('/api/session').type('json').send('{"email":')
    expect(broken.status).toBe(400)
    expect(broken.body).toMatchObject({ code: 'invalid' })
  })
})

describe('a session', () => {
  it('ends on the server when its owner signs out', async () => {
    const app = testApp()
    const ada = person(app, 'Ada Marsh')
    expect((await ada.agent.get('/api/session')).status).toBe(200)
    expect((await ada.agent.delete('/api/session')).status).toBe(204)
    const replay = await request(app.app).get('/api/session').set('Cookie', ada.cookie)
    expect(replay.status).toBe(401)
  })

  it('ends after seven idle days for a member and after an idle hour for a steward', async () => {
    const app = testApp()
    const ada = person(app, 'Ada Marsh')
    const sam = person(app, 'Sam Tolliver', 'steward')
    app.clock.advance({ minutes: 59 })
    expect((await sam.agent.get('/api/session')).status).toBe(200)
    app.clock.advance({ minutes: 61 })
    expect((await sam.agent.get('/api/session')).status).toBe(401)
    app.clock.advance({ days: 6 })
    expect((await ada.agent.get('/api/session')).status).toBe(200)
    app.clock.advance({ days: 7, minutes: 2 })
    expect((await ada.agent.get('/api/session')).status).toBe(401)
  })

  it('keeps no id that would open it', () => {
    const app = testApp()
    const ada = person(app, 'Ada Marsh')
    const rows = app.db.select().from(sessions).all()
    expect(JSON.stringify(rows)).not.toContain(decodeURIComponent(ada.cookie).slice(6, 30))
  })
})

describe('every address', () => {
  it('answers an unknown one with a problem', async () => {
    const reply = await request(testApp().app).get('/api/nowhere')
    expect(reply.status).toBe(404)
    expect(reply.body).toMatchObject({ code: 'not-found', status: 404 })
  })

  it('describes itself as OpenAPI 3.1 and as a page that loads nothing else', async () => {
    const { app } = testApp()
    const document = (await request(app).get('/api/openapi.json')).body as { openapi: string; paths: object }
    expect(document.openapi).toBe('3.1.0')
    expect(Object.keys(document.paths)).toContain('/session')
    const page = await request(app).get('/api/docs')
    expect(page.type).toBe('text/html')
    expect(page.text).not.toMatch(/src=|https?:\/\//)
  })
})
