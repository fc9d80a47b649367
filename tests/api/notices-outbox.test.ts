import { once } from 'node:events'
import type { AddressInfo } from 'node:net'
import { SMTPServer } from 'smtp-server'
import { afterEach, describe, expect, it } from 'vitest'
import { eq } from 'drizzle-orm'
import { caughtLetters, letters } from '#server/db/schema/notices'
import { members } from '#server/db/schema/people'
import { smtpMailer } from '#server/mail/smtp'
import { claimLetter } from '#server/services/letters'
import { outbox, postOffice, scriptedRelay, senderTo, type Script } from '#tests/support/mail'
import { queueApproval, queueUseSoon } from '#tests/support/notices'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

type Relay = Awaited<ReturnType<typeof scriptedRelay>>
const open: { close: () => Promise<void> }[] = []
const relay = async (script?: Script) => {
  const made = await scriptedRelay(script)
  open.push(made)
  return made
}
afterEach(async () => {
  for (const thing of open.splice(0)) await thing.close()
})

const setUp = async (script?: Script) => {
  const app = testApp()
  const { ada, bo } = people(app)
  const post = await relay(script)
  return { app, ada, bo, post, sender: senderTo(app, post.url) }
}

const messageIds = (post: Relay) => post.received().map((raw) => /^Message-ID: (.*)$/im.exec(raw)?.[1])

describe('a letter on its way', () => {
  it('arrives whole at the local catcher, as text and as HTML, and says what it is', async () => {
    const app = testApp()
    const { ada } = people(app)
    const post = await postOffice(app)
    open.push(post)
    queueApproval(app, ada.id)
    await post.deliver()
    const [letter, ...more] = post.caught()
    expect(more).toEqual([])
    const [row] = outbox(app)
    expect(row?.lastError).toBeNull()
    expect(row).toMatchObject({ status: 'sent', tries: 1, toAddress: ada.email, sentAt: app.clock.now() })
    expect(letter).toMatchObject({ envelopeTo: ada.email, subject: row?.subject, messageId: row?.messageId })
    expect(letter?.text.trim()).toBe(row?.text.trim())
    expect(letter?.html).toContain('<th scope="row"')
    const headers = new Map(letter?.headers.map(([name, value]) => [name.toLowerCase(), value]))
    expect(headers.get('auto-submitted')).toBe('auto-generated')
    expect(headers.get('to')).toBe('Ada Marsh <ada.marsh@barmhouse.example>')
    expect(headers.get('from')).toBe('Barmhouse <barmhouse@barmhouse.example>')
    expect(headers.get('content-type')).toContain('multipart/alternative')
    expect(headers.has('date')).toBe(true)
    expect(headers.has('list-unsubscribe')).toBe(false)
  })

  it('is one of the newest 500 that the catcher keeps', async () => {
    const app = testApp()
    const { ada } = people(app)
    const post = await postOffice(app)
    open.push(post)
    const old = Array.from({ length: 502 }, (_, n) => ({
      id: `old-${n}`,
      receivedAt: app.clock.now(),
      envelopeFrom: '',
      envelopeTo: ada.email,
      subject: 'old',
      headers: [],
      text: '',
      html: '',
    }))
    for (const row of old) app.db.insert(caughtLetters).values(row).run()
    app.clock.advance({ seconds: 1 })
    queueApproval(app, ada.id)
    await post.deliver()
    expect(post.caught()).toHaveLength(500)
    expect(post.caught()[0]?.subject).toMatch(/^Approved/)
  })

  it('goes to where the member is reached when it leaves', async () => {
    const { app, ada, post, sender } = await setUp()
    queueApproval(app, ada.id)
    app.db.update(members).set({ email: 'new@barmhouse.example' }).where(eq(members.id, ada.id)).run()
    await sender.run()
    expect(post.received()[0]).toMatch(/^To: .*new@barmhouse\.example/m)
  })

  it('reaches nobody who has left meanwhile', async () => {
    const { app, ada, post, sender } = await setUp()
    queueApproval(app, ada.id)
    app.db.update(members).set({ status: 'left' }).where(eq(members.id, ada.id)).run()
    await sender.run()
    expect(post.received()).toEqual([])
    expect(outbox(app)[0]?.status).toBe('dropped')
  })

  it('is one message to one address, whatever the address tries', async () => {
    const { app, ada, post, sender } = await setUp()
    const tricks = [
      '"a@x.test b"@barmhouse.example',
      'a@barmhouse.example,b@barmhouse.example',
      'a@x.test\r\nRCPT TO:<b@x.test>',
    ]
    for (const email of tricks) {
      app.db.update(members).set({ email }).where(eq(members.id, ada.id)).run()
      queueApproval(app, ada.id)
      await sender.run()
    }
    expect(post.received()).toEqual([])
    expect(outbox(app).map(({ status }) => status)).toEqual(['failed', 'failed', 'failed'])
  })

  it('carries no header that a name smuggles in', async () => {
    const { app, ada, post, sender } = await setUp()
    const name = 'Ada\r\nBcc: all@barmhouse.example\r\n\r\nMarsh, <x@y.test>'
    app.db.update(members).set({ name }).where(eq(members.id, ada.id)).run()
    queueApproval(app, ada.id, 'Jar\nX-Trick: yes')
    await sender.run()
    const head = (post.received()[0] ?? '').split('\r\n\r\n')[0] ?? ''
    expect(head).toMatch(/^Subject: /m)
    expect(head).not.toMatch(/^(Bcc|X-Trick):/im)
    expect(head.match(/^To:/gm)).toHaveLength(1)
  })

  it('that may be stopped says so in the headers; the link opens nothing else', async () => {
    const { app, ada, post, sender } = await setUp()
    queueUseSoon(app, ada.id)
    await sender.run()
    const [raw = ''] = post.received()
    const unfolded = raw.replace(/\r\n[ \t]+/g, ' ')
    const url = /^List-Unsubscribe: <(http:\/\/localhost:3000\/unsubscribe\/[\w-]{43})>$/m.exec(unfolded)?.[1]
    expect(url).toBeDefined()
    expect(unfolded).toMatch(/^List-Unsubscribe-Post: List-Unsubscribe=One-Click$/m)
    const token = url?.split('/').at(-1) ?? ''
    expect(/^Subject: .*$/m.exec(unfolded)?.[0]).not.toContain(token)
    // Not even the database knows it.
    expect(app.db.$client.serialize().includes(token)).toBe(false)
  })

  it('asks for TLS with a valid certificate from any relay but one on this machine', async () => {
    const { app, ada, post } = await setUp()
    queueApproval(app, ada.id)
    const { outgoing } = claimLetter(app.deps) ?? expect.fail('nothing to send')
    // It speaks STARTTLS with a certificate that nobody vouches for.
    let arrived = 0
    const selfSigned = new SMTPServer({
      authOptional: true,
      logger: false,
      onData: (stream, _session, done) => void (stream.resume(), (arrived += 1), done()),
    })
    selfSigned.on('error', () => undefined)
    const socket = selfSigned.listen(0, '0.0.0.0')
    await once(socket, 'listening')
    for (const port of [post.port, (socket.address() as AddressInfo).port]) {
      // 0.0.0.0 reaches this machine, but by its name could be any.
      const mailer = smtpMailer({ url: `smtp://0.0.0.0:${port}`, from: app.deps.mailFrom })
      await expect(mailer.send(outgoing)).rejects.toMatchObject({ failure: 'relay', permanent: false })
    }
    expect([post.received().length, arrived]).toEqual([0, 0])
    await new Promise<void>((resolve) => selfSigned.close(resolve))
  })
})

describe('a relay that', () => {
  const WAITS = 'queued'
  it.each<[what: string, script: Script, status: string, failure: string, arrives: number]>([
    ['greets with 421', { greeting: '421 not now' }, WAITS, 'relay', 0],
    ['greets with 554', { greeting: '554 no' }, WAITS, 'relay', 0],
    ['says nothing', { greeting: 'hang' }, WAITS, 'relay', 0],
    ['cuts the line', { greeting: 'drop' }, WAITS, 'relay', 0],
    ['talks nonsense', { greeting: 'hello there' }, WAITS, 'relay', 0],
    ['wants another sender', { mail: '550 not you' }, WAITS, 'relay', 0],
    ['is out of room for the moment', { mail: '452 later' }, WAITS, 'letter', 0],
    ['puts the recipient off', { rcpt: '450 greylisted' }, WAITS, 'letter', 0],
    ['says 421 to the recipient', { rcpt: '421 closing' }, WAITS, 'relay', 0],
    ['knows no such recipient', { rcpt: '550 no such box' }, 'failed', 'letter', 0],
    ['finds the box full for good', { rcpt: '552 full' }, 'failed', 'letter', 0],
    ['puts the letter off', { end: '451 later' }, WAITS, 'letter', 1],
    ['refuses the letter', { end: '554 spam' }, 'failed', 'letter', 1],
    ['finds the letter too big', { end: '552 too big' }, 'failed', 'letter', 1],
    ['cuts the line after the letter', { end: 'drop' }, WAITS, 'relay', 1],
    ['is silent after the letter', { end: 'hang' }, WAITS, 'relay', 1],
  ])('%s', async (_what, script, status, failure, arrives) => {
    const { app, ada, post } = await setUp(script)
    queueApproval(app, ada.id)
    const hangs = script.greeting === 'hang' || script.end === 'hang'
    await senderTo(app, post.url, hangs ? 500 : undefined).run()
    expect(outbox(app)[0]).toMatchObject({ status, failure, tries: 1, leasedUntil: null })
    expect(post.received()).toHaveLength(arrives)
    // Then it behaves: what was put off arrives, what was refused does not come back.
    post.follow({})
    app.clock.advance({ minutes: 1, seconds: 1 })
    await senderTo(app, post.url).run()
    expect(outbox(app)[0]?.status).toBe(status === WAITS ? 'sent' : 'failed')
    expect(post.received()).toHaveLength(arrives + (status === WAITS ? 1 : 0))
    expect(new Set(messageIds(post)).size).toBeLessThanOrEqual(1)
  })
})

describe('trying again', () => {
  it('waits 1, 5, 15, 30, 60 minutes, then an hour each time, and ends after five days', async () => {
    const { app, ada, sender } = await setUp({ rcpt: '450 later' })
    queueApproval(app, ada.id)
    const start = Date.parse(app.clock.now())
    const tries: number[] = []
    const row = () => outbox(app)[0] ?? expect.fail('no letter')
    while (row().status === 'queued' && tries.length < 500) {
      const { sendAfter, tries: before } = row()
      if (before > 0) {
        app.clock.set(new Date(Date.parse(sendAfter) - 1000).toISOString())
        await sender.run()
        expect(row().tries).toBe(before)
      }
      app.clock.set(sendAfter)
      await sender.run()
      if (row().tries > before) tries.push((Date.parse(app.clock.now()) - start) / 60_000)
    }
    expect(tries.slice(0, 9)).toEqual([0, 1, 6, 21, 51, 111, 171, 231, 291])
    expect(tries.slice(5).every((at, n, all) => n === 0 || at - (all[n - 1] ?? 0) === 60)).toBe(true)
    expect(tries.at(-1)).toBeLessThanOrEqual(5 * 24 * 60)
    expect(tries.at(-1)).toBeGreaterThan(5 * 24 * 60 - 61)
    expect(outbox(app)[0]).toMatchObject({
      status: 'failed',
      lastError: expect.stringMatching(/^Given up/) as string,
    })
  })

  it('leaves a dead relay alone for a minute after five failures', async () => {
    const { app, ada, post, sender } = await setUp({ greeting: '421 not now' })
    for (let n = 0; n < 20; n++) queueApproval(app, ada.id)
    await sender.run()
    // Five at once may be under way when the fifth failure arrives.
    expect(post.connections()).toBeGreaterThanOrEqual(5)
    expect(post.connections()).toBeLessThanOrEqual(9)
    const before = post.connections()
    for (let second = 0; second < 59; second++) {
      app.clock.advance({ seconds: 1 })
      await sender.run()
    }
    expect(post.connections()).toBe(before)
    app.clock.advance({ seconds: 1 })
    await sender.run()
    expect(post.connections()).toBe(before + 1)
  })

  it('loses nothing and doubles nothing over a day without a relay', async () => {
    const { app, ada, bo, post, sender } = await setUp()
    await post.close()
    open.splice(0)
    let queued = 0
    for (let minute = 0; minute < 24 * 60; minute++) {
      if (minute % 10 === 0) {
        queueApproval(app, minute % 20 === 0 ? ada.id : bo.id)
        queued += 1
      }
      await sender.run()
      app.clock.advance({ minutes: 1 })
    }
    expect(outbox(app).filter(({ status }) => status === 'queued')).toHaveLength(queued)
    const back = await relay()
    const again = senderTo(app, back.url)
    const minutes = await minutesUntilEmpty()
    expect(minutes).toBeLessThanOrEqual(10)
    expect(back.received()).toHaveLength(queued)
    expect(new Set(messageIds(back)).size).toBe(queued)

    async function minutesUntilEmpty() {
      for (let minute = 0; minute < 60; minute++) {
        await again.run()
        if (outbox(app).every(({ status }) => status === 'sent')) return minute
        app.clock.advance({ minutes: 1 })
      }
      return Infinity
    }
  })

  it('notices by itself, without a restart, that the relay is back', async () => {
    const { app, ada, post, sender } = await setUp({ greeting: 'drop' })
    queueApproval(app, ada.id)
    for (let minute = 0; minute < 600; minute++) {
      await sender.run()
      app.clock.advance({ minutes: 1 })
    }
    post.follow({})
    let minutes = 0
    for (; outbox(app)[0]?.status === 'queued' && minutes < 60; minutes++) {
      app.clock.advance({ minutes: 1 })
      await sender.run()
    }
    expect(minutes).toBeLessThanOrEqual(2)
    expect(post.received()).toHaveLength(1)
  })
})

describe('a crash between the relay’s yes and the mark', () => {
  it('sends that letter again after two minutes, under the same Message-ID', async () => {
    const { app, ada, post, sender } = await setUp()
    queueApproval(app, ada.id)
    const mailer = smtpMailer({ url: post.url, from: app.deps.mailFrom })
    const claimed = claimLetter(app.deps)
    await mailer.send(claimed?.outgoing ?? expect.fail('nothing to send'))
    // The process ends here: nothing is marked.
    await sender.run()
    expect(post.received()).toHaveLength(1)
    app.clock.advance({ minutes: 2 })
    await sender.run()
    await sender.run()
    const ids = messageIds(post)
    expect(ids).toHaveLength(2)
    expect(new Set(ids).size).toBe(1)
    expect(outbox(app)[0]?.status).toBe('sent')
  })

  it('does not wait for days when the clock is set back meanwhile', async () => {
    const { app, ada, post, sender } = await setUp()
    queueApproval(app, ada.id)
    claimLetter(app.deps)
    app.clock.advance({ days: -3 })
    await sender.run()
    expect(post.received()).toHaveLength(1)
  })
})

describe('many letters', () => {
  it('go to two workers at once without one going twice', async () => {
    const { app, ada, bo, post } = await setUp()
    for (let n = 0; n < 60; n++) queueApproval(app, n % 2 ? ada.id : bo.id)
    await Promise.all([senderTo(app, post.url).run(), senderTo(app, post.url).run()])
    expect(post.received()).toHaveLength(60)
    expect(new Set(messageIds(post)).size).toBe(60)
    expect(app.db.select().from(letters).where(eq(letters.status, 'sent')).all()).toHaveLength(60)
  })
})
