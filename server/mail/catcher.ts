import { once } from 'node:events'
import type { AddressInfo } from 'node:net'
import { simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import { desc, inArray } from 'drizzle-orm'
import { caughtLetters } from '../db/schema/notices.ts'
import type { Deps } from '../deps.ts'
import { newId } from '../ids.ts'

/** The newest that are kept. */
export const CAUGHT_MAX = 500

export interface Catcher {
  /** For `smtpMailer`: letters take the same road to it as to a real relay. */
  url: string
  close: () => Promise<void>
}

/**
 * A mail server of our own on a free loopback port, for when no relay is named: it takes every letter, delivers none and keeps
 * the newest for an admin to read at /dev/mail.
 */
export async function startCatcher(deps: Deps): Promise<Catcher> {
  const server = new SMTPServer({
    name: 'localhost',
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: 1024 * 1024,
    maxClients: 20,
    logger: false,
    onData(stream, session, done) {
      simpleParser(stream)
        .then((mail) => {
          const { mailFrom, rcptTo } = session.envelope
          keep(deps, {
            envelopeFrom: mailFrom ? mailFrom.address : '',
            envelopeTo: rcptTo.map((to) => to.address).join(', '),
            messageId: mail.messageId ?? null,
            subject: mail.subject ?? '',
            headers: mail.headerLines.map(({ line }) => splitHeader(line)),
            text: mail.text ?? '',
            html: mail.html || '',
          })
          done()
        })
        .catch((error: unknown) => done(error instanceof Error ? error : new Error(String(error))))
    },
  })
  server.on('error', (error) => deps.log.warn({ err: error }, 'mail catcher'))
  const socket = server.listen(0, '127.0.0.1')
  await once(socket, 'listening')
  const { port } = socket.address() as AddressInfo
  return {
    url: `smtp://127.0.0.1:${port}`,
    close: () => new Promise((resolve) => server.close(() => resolve())),
  }
}

function splitHeader(line: string): [string, string] {
  const at = line.indexOf(':')
  return [
    line.slice(0, at),
    line
      .slice(at + 1)
      .replace(/\r?\n\s+/g, ' ')
      .trim(),
  ]
}

type Caught = Omit<typeof caughtLetters.$inferInsert, 'id' | 'receivedAt'>

function keep(deps: Deps, caught: Caught) {
  deps.db
    .insert(caughtLetters)
    .values({ ...caught, id: newId(), receivedAt: deps.clock.now() })
    .run()
  const beyond = deps.db
    .select({ id: caughtLetters.id })
    .from(caughtLetters)
    .orderBy(desc(caughtLetters.receivedAt), desc(caughtLetters.id))
    .limit(10_000)
    .offset(CAUGHT_MAX)
  deps.db.delete(caughtLetters).where(inArray(caughtLetters.id, beyond)).run()
}
