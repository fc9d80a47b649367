import { eq } from 'drizzle-orm'
import request from 'supertest'
import { describe, expect, it } from 'vitest'
import { isOptional, NOTICE_KINDS } from '#shared/notices/vocabulary'
import { day } from '#shared/time/day'
import { letters } from '#server/db/schema/notices'
import { members } from '#server/db/schema/people'
import { write } from '#server/db/open'
import { sweepLetters } from '#server/jobs/sweep-letters'
import { claimLetter } from '#server/services/letters'
import { queueNotice } from '#server/services/notices'
import { outbox, postOffice } from '#tests/support/mail'
import { queueApproval, queueUseSoon } from '#tests/support/notices'
import { people } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

const approved = (app: TestApp, memberId: string, kindName = 'Demijohn 4.5 L, glass') =>
  write(app.db, (tx) =>
    queueNotice(tx, app.deps, {
      kind: 'loan-approved',
      memberId,
      about: { type: 'loan', id: 'loan-1', on: day('2031-06-20') },
      dedupeKey: 'loan-approved:loan-1',
      facts: { loanId: 'loan-1', kindName, from: day('2031-05-20'), to: day('2031-06-20') },
    }),
  )

describe('queueing a letter', () => {
  it('writes it once, whatever is tried', () => {
    const app = testApp()
    const { ada } = people(app)
    expect(approved(app, ada.id)).toBeDefined()
    expect(approved(app, ada.id)).toBeUndefined()
    const [letter, ...more] = outbox(app)
    expect(more).toEqual([])
    expect(letter).toMatchObject({ status: 'queued', memberId: ada.id, tries: 0, aboutId: 'loan-1' })
    expect(letter?.subject).toBe('Approved: Demijohn 4.5 L, glass, from Tuesday 20 May 2031')
    expect(letter?.text).toContain('http://localhost:3000/loans/loan-1')
  })

  it('leaves nothing behind when the act it reports is undone', () => {
    const app = testApp()
    const { ada } = people(app)
    expect(() =>
      write(app.db, (tx) => {
        tx.update(members).set({ name: 'Changed' }).where(eq(members.id, ada.id)).run()
        queueNotice(tx, app.deps, {
          kind: 'loan-lapsed',
          memberId: ada.id,
          dedupeKey: 'loan-lapsed:loan-2',
          facts: { loanId: 'loan-2', kindName: 'Siphon', from: day('2031-05-01'), to: day('2031-05-04') },
        })
        throw new Error('the act failed')
      }),
    ).toThrow('the act failed')
    expect(outbox(app)).toEqual([])
    expect(app.db.select().from(members).where(eq(members.id, ada.id)).get()?.name).toBe('Ada Marsh')
  })

  it('cannot be made to carry another header or another tag', () => {
    const app = testApp()
    const { ada } = people(app)
    approved(app, ada.id, 'Jar\r\nBcc: all@barmhouse.example\u2028<script>alert(1)</script>\u202e')
    const [letter] = outbox(app)
    expect(letter?.subject).toBe(
      'Approved: Jar Bcc: all@barmhouse.example <script>alert(1)</script>, from Tuesday 20 May 2031',
    )
    expect(letter?.html).not.toContain('<script>')
    expect(letter?.html).toContain('&lt;script&gt;')
  })
})

interface Preferences {
  choices: { kind: string; name: string; on: boolean }[]
  always: string[]
  version: number
}

describe('choosing letters', () => {
  it('shows what may be switched off, and the digest to stewards only', async () => {
    const { ada, sam } = people(testApp())
    const mine = (await ada.agent.get('/api/me/notices')).body as Preferences
    expect(mine.choices.map(({ kind }) => kind)).not.toContain('steward-digest')
    expect(mine.choices.every(({ on }) => on)).toBe(true)
    expect(mine.always).toContain('Late back')
    const theirs = (await sam.agent.get('/api/me/notices')).body as Preferences
    expect(theirs.choices.map(({ kind }) => kind)).toContain('steward-digest')
  })

  it('stops the optional ones and no others', async () => {
    const app = testApp()
    const { ada } = people(app)
    const change = { 'packet-near-best-before': false }
    const reply = await ada.agent.patch('/api/me/notices').set('If-Match', '"1"').send(change)
    expect(reply.status).toBe(200)
    expect(reply.get('etag')).toBe('"2"')
    expect(queueUseSoon(app, ada.id)).toBeUndefined()
    expect(queueApproval(app, ada.id)).toBeDefined()
    const back = await ada.agent
      .patch('/api/me/notices')
      .set('If-Match', '"2"')
      .send({ 'packet-near-best-before': true })
    expect(back.status).toBe(200)
    expect(queueUseSoon(app, ada.id)).toBeDefined()
  })

  it('cannot stop a return reminder, wants the version, and refuses an old one', async () => {
    const app = testApp()
    const { ada } = people(app)
    const patch = (body: object, version?: string) => {
      const test = ada.agent.patch('/api/me/notices')
      return (version ? test.set('If-Match', version) : test).send(body)
    }
    const always = NOTICE_KINDS.filter((kind) => !isOptional(kind))
    for (const kind of always) {
      const reply = await patch({ [kind]: false }, '"1"')
      expect(reply.status).toBe(400)
      expect(reply.body).toMatchObject({ errors: [{ path: kind }] })
    }
    expect((await patch({ 'batch-step-due': false })).status).toBe(428)
    expect((await patch({ 'batch-step-due': false }, '"1"')).status).toBe(200)
    expect((await patch({ 'batch-step-due': true }, '"1"')).status).toBe(412)
  })

  it('also holds for a letter that was waiting when it was switched off', async () => {
    const app = testApp()
    const { ada } = people(app)
    queueUseSoon(app, ada.id)
    await ada.agent.patch('/api/me/notices').set('If-Match', '"1"').send({ 'packet-near-best-before': false })
    expect(claimLetter(app.deps)).toBeUndefined()
    expect(outbox(app)[0]).toMatchObject({ status: 'dropped' })
  })
})

describe('one click', () => {
  function linked() {
    const app = testApp()
    const cast = people(app)
    queueUseSoon(app, cast.ada.id)
    const url = claimLetter(app.deps)?.outgoing.stopUrl ?? expect.fail('no link')
    const kinds = async () =>
      ((await cast.ada.agent.get('/api/me/notices')).body as Preferences).choices
        .filter(({ on }) => !on)
        .map(({ kind }) => kind)
    return { app, ...cast, path: new URL(url).pathname, kinds }
  }

  it('stops that kind for that member without a cookie, and says so without sending anyone elsewhere', async () => {
    const { app, path, kinds } = linked()
    const stranger = request(app.app)
    const reply = await stranger.post(path).type('form').send('List-Unsubscribe=One-Click')
    expect(reply.status).toBe(200)
    expect(reply.get('location')).toBeUndefined()
    expect(await kinds()).toEqual(['packet-near-best-before'])
    // Again, and by the other address, changes nothing.
    expect((await stranger.post(`/api${path}`).type('form').send('List-Unsubscribe=One-Click')).status).toBe(
      200,
    )
    expect((await stranger.post(`/api${path}`)).body).toMatchObject({
      on: false,
      name: 'Your packet nears its best-before',
    })
    expect(await kinds()).toEqual(['packet-near-best-before'])
  })

  it('changes nothing by being looked at', async () => {
    const { app, path, kinds } = linked()
    const before = app.db.$client.serialize()
    const reply = await request(app.app).get(`/api${path}`)
    expect(reply.body).toEqual({
      kind: 'packet-near-best-before',
      name: 'Your packet nears its best-before',
      on: true,
    })
    expect(app.db.$client.serialize().equals(before)).toBe(true)
    expect(await kinds()).toEqual([])
  })

  it('knows no other links', async () => {
    const { app, path } = linked()
    const other = path.slice(0, -4) + 'AAAA'
    for (const address of [other, `/api${other}`]) {
      const reply = await request(app.app).post(address).type('form').send('List-Unsubscribe=One-Click')
      expect(reply.status).toBe(404)
      expect(reply.body).toMatchObject({ code: 'not-found' })
    }
  })
})

describe('the mail record', () => {
  interface Page {
    items: { id: string; subject: string; status: string; to: string; memberName: string }[]
    nextCursor: string | null
  }

  it('lists, searches, filters and pages in a constant number of statements', async () => {
    const app = testApp()
    const { ada, bo, kit } = people(app)
    for (let n = 0; n < 25; n++) {
      queueApproval(app, n % 2 ? ada.id : bo.id, n === 7 ? 'Boiler 100% steel' : undefined)
      app.clock.advance({ minutes: 1 })
    }
    const get = async (query: string) => (await kit.agent.get(`/api/letters?${query}`)).body as Page
    const first = await get('limit=10')
    const second = await get(`limit=10&cursor=${first.nextCursor}`)
    const third = await get(`limit=10&cursor=${second.nextCursor}`)
    expect([first, second, third].map(({ items }) => items.length)).toEqual([10, 10, 5])
    expect(third.nextCursor).toBeNull()
    const ids = [first, second, third].flatMap(({ items }) => items.map(({ id }) => id))
    expect(new Set(ids).size).toBe(25)
    expect((await get('q=ada')).items).toHaveLength(12)
    expect((await get('q=bo.linden@')).items).toHaveLength(13)
    expect((await get('q=100%25')).items).toHaveLength(1)
    expect((await get('q=%25')).items).toHaveLength(1)
    expect((await get('q=_')).items).toHaveLength(0)
    expect((await get('status=sent')).items).toHaveLength(0)
    app.statements()
    await get('limit=2')
    const few = app.statements().length
    await get('limit=25')
    expect(app.statements()).toHaveLength(few)
  })

  it('shows a letter as it was sent, and is for admins', async () => {
    const app = testApp()
    const { ada, sam, kit } = people(app)
    const id = queueApproval(app, ada.id)
    const reply = await kit.agent.get(`/api/letters/${id}`)
    expect(reply.body).toMatchObject({
      id,
      to: ada.email,
      memberName: 'Ada Marsh',
      status: 'queued',
      name: 'Booking approved',
    })
    expect((reply.body as { text: string }).text).toContain('Hello Ada Marsh')
    expect((await sam.agent.get('/api/letters')).status).toBe(403)
    expect((await kit.agent.get('/api/letters/nothing')).status).toBe(404)
  })

  it('tries a failed letter again, and none that has gone', async () => {
    const app = testApp()
    const { ada, kit } = people(app)
    const post = await postOffice(app)
    const id = queueApproval(app, ada.id)
    const usefulUntil = app.clock.now()
    app.db.update(letters).set({ status: 'failed', tries: 9, lastError: 'no such box', usefulUntil }).run()
    const retried = await kit.agent.post(`/api/letters/${id}/retry`)
    expect(retried.body).toMatchObject({ status: 'queued', tries: 0 })
    await post.deliver()
    expect(post.caught()).toHaveLength(1)
    expect((await kit.agent.post(`/api/letters/${id}/retry`)).status).toBe(409)
    await post.close()
  })

  it('keeps no private link once its letter has gone, and never shows one', async () => {
    const app = testApp()
    const { kit } = people(app)
    const post = await postOffice(app)
    await kit.agent.post('/api/invitations').send({ email: 'new@barmhouse.example', role: 'member' })
    const [queued] = outbox(app)
    expect(queued?.text).toMatch(/\/invitations\//)
    const shown = await kit.agent.get(`/api/letters/${queued?.id}`)
    expect(JSON.stringify(shown.body)).not.toContain('/invitations/')
    await post.deliver()
    expect(post.caught()[0]?.text).toMatch(/\/invitations\//)
    expect(outbox(app)[0]?.status).toBe('sent')
    expect(JSON.stringify(outbox(app))).not.toContain('/invitations/')
    await post.close()
  })

  it('forgets what letters said after a month and the letters after a year', () => {
    const app = testApp()
    const { ada } = people(app)
    queueApproval(app, ada.id)
    app.db.update(letters).set({ status: 'sent', sentAt: app.clock.now() }).run()
    app.clock.advance({ days: 29 })
    sweepLetters(app.deps)
    expect(outbox(app)[0]?.text).toContain('Hello')
    app.clock.advance({ days: 2 })
    sweepLetters(app.deps)
    expect(outbox(app)[0]?.text).not.toContain('Hello')
    app.clock.advance({ days: 400 })
    sweepLetters(app.deps)
    expect(outbox(app)).toEqual([])
  })
})

describe('caught letters', () => {
  it('can be read by an admin, as a page and as JSON, and by nobody else', async () => {
    const app = testApp()
    const { ada, kit } = people(app)
    const post = await postOffice(app)
    queueApproval(app, ada.id, 'Jar <b>bold</b>')
    await post.deliver()
    await post.close()
    const page = await kit.agent.get('/dev/mail').set('Accept', 'text/html')
    expect(page.type).toBe('text/html')
    expect(page.text).toContain('Jar &#60;b&#62;bold')
    const { items } = (await kit.agent.get('/dev/mail').set('Accept', 'application/json')).body as {
      items: { id: string }[]
    }
    const id = items[0]?.id
    const letter = await kit.agent.get(`/dev/mail/${id}`).set('Accept', 'text/html')
    expect(letter.text).toContain('<a href="http://localhost:3000/loans/')
    expect(letter.text).toContain('Auto-Submitted')
    const html = await kit.agent.get(`/dev/mail/${id}/html`)
    expect(html.get('content-security-policy')).toContain('sandbox')
    expect((await kit.agent.get(`/api/dev/mail/${id}`)).body).toMatchObject({ to: ada.email })
    for (const path of ['/dev/mail', `/dev/mail/${id}`, `/dev/mail/${id}/html`]) {
      expect((await ada.agent.get(path)).status).toBe(403)
      expect((await request(app.app).get(path)).status).toBe(401)
    }
  })

  it('are not there when a relay is named', async () => {
    const app = testApp()
    const { kit } = people(app)
    app.deps.mailCaught = false
    expect((await kit.agent.get('/dev/mail')).status).toBe(404)
    expect((await kit.agent.get('/api/dev/mail')).status).toBe(404)
  })
})
