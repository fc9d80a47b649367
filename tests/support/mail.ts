import { createServer, type Server, type Socket } from 'node:net'
import { once } from 'node:events'
import type { AddressInfo } from 'node:net'
import { desc } from 'drizzle-orm'
import { caughtLetters, letters } from '#server/db/schema/notices'
import { letterSender } from '#server/jobs/send-letters'
import { startCatcher } from '#server/mail/catcher'
import { smtpMailer } from '#server/mail/smtp'
import type { TestApp } from './test-app.ts'

/** Everything queued so far, oldest first. */
export const outbox = (app: TestApp) =>
  app.db.select().from(letters).orderBy(letters.queuedAt, letters.id).all()

/** The worker and the local catcher of a test app: `deliver()` sends what is due, `caught()` reads it, newest first. */
export async function postOffice(app: TestApp) {
  const catcher = await startCatcher(app.deps)
  const sender = senderTo(app, catcher.url)
  return {
    deliver: () => sender.run(),
    caught: () => app.db.select().from(caughtLetters).orderBy(desc(caughtLetters.receivedAt)).all(),
    close: () => catcher.close(),
  }
}

/** The worker against a relay of the test's own. Its idea of passing time is the clock the test moves. */
export const senderTo = (app: TestApp, url: string, patienceMs = 10_000) =>
  letterSender(
    app.deps,
    smtpMailer({
      url,
      from: app.deps.mailFrom,
      timeouts: { connect: patienceMs, greeting: patienceMs, socket: patienceMs },
    }),
    () => Date.parse(app.clock.now()),
  )

/** What a scripted relay says at each point; anything left out is taken. `drop` cuts the line, `hang` says nothing. */
export interface Script {
  greeting?: string
  mail?: string
  rcpt?: string
  /** After the whole letter has arrived. */
  end?: string
}

/** A relay that follows a script, for what real ones do on bad days. It keeps every letter that arrived whole. */
export async function scriptedRelay(script: Script = {}) {
  const state = { script, received: [] as string[], connections: 0 }
  const sockets = new Set<Socket>()
  const server: Server = createServer((socket) => {
    state.connections += 1
    sockets.add(socket)
    socket.on('close', () => sockets.delete(socket)).on('error', () => undefined)
    converse(socket, state)
  })
  server.listen(0, '127.0.0.1')
  await once(server, 'listening')
  const { port } = server.address() as AddressInfo
  return {
    url: `smtp://127.0.0.1:${port}`,
    port,
    /** Behaves differently from here on. */
    follow: (next: Script) => void (state.script = next),
    /** Letters that arrived whole, whatever was answered. */
    received: () => state.received,
    connections: () => state.connections,
    close: async () => {
      for (const socket of sockets) socket.destroy()
      server.close()
      await once(server, 'close')
    },
  }
}

function converse(socket: Socket, state: { script: Script; received: string[] }) {
  const { script } = state
  const say = (line: string) => {
    if (line === 'drop') socket.destroy()
    else if (line !== 'hang') socket.write(`${line}\r\n`)
  }
  let buffer = ''
  let inLetter = false
  say(script.greeting ?? '220 relay.test ready')
  socket.on('data', (chunk) => {
    buffer += chunk.toString('utf8')
    for (;;) {
      const mark = inLetter ? '\r\n.\r\n' : '\r\n'
      const at = buffer.indexOf(mark)
      if (at < 0) return
      const part = buffer.slice(0, at)
      buffer = buffer.slice(at + mark.length)
      if (inLetter) {
        inLetter = false
        state.received.push(part)
        say(script.end ?? '250 taken')
      } else if (/^DATA/i.test(part)) {
        inLetter = true
        say('354 go on')
      } else if (/^MAIL/i.test(part)) say(script.mail ?? '250 ok')
      else if (/^RCPT/i.test(part)) say(script.rcpt ?? '250 ok')
      else if (/^QUIT/i.test(part)) say('221 bye')
      else say(/^(EHLO|HELO|RSET|NOOP)/i.test(part) ? '250 relay.test' : '502 not here')
    }
  })
}
