import { tmpdir } from 'node:os'
import { mkdtempSync } from 'node:fs'
import { join } from 'node:path'
import type { Express } from 'express'
import { pino } from 'pino'
import { createApp } from '#server/app'
import { emptyImage } from '#server/db/image'
import { openDb, type Db } from '#server/db/open'
import type { Deps } from '#server/deps'
import { testClock, type TestClock } from './clock.ts'

export const SESSION_SECRET = 'a secret for tests only, long enough'

export interface TestApp {
  app: Express
  deps: Deps
  db: Db
  clock: TestClock
  /** Statements run since the last call, without transaction control. */
  statements: () => string[]
}

interface Options {
  clock?: TestClock
  /** A real file in place of memory, for what needs two connections. */
  file?: string
  demo?: boolean
}

/** The real application over a real, migrated SQLite database of its own, with a clock the test moves. */
export function testApp(options: Options = {}): TestApp {
  let ran: string[] = []
  const onStatement = (sql: string) =>
    void (/^(BEGIN|COMMIT|ROLLBACK|SAVEPOINT|RELEASE)/i.test(sql) || ran.push(sql))
  const db = openDb(options.file ?? emptyImage(), { onStatement })
  const clock = options.clock ?? testClock()
  const deps: Deps = {
    db,
    clock,
    log: pino({ level: process.env.TEST_LOG ?? 'silent' }),
    appUrl: 'http://localhost:3000',
    uploadsDir: mkdtempSync(join(tmpdir(), 'barmhouse-uploads-')),
    mailFrom: 'Barmhouse <barmhouse@barmhouse.example>',
    demo: options.demo ?? false,
    mailCaught: true,
    mailAlive: () => true,
  }
  const app = createApp(deps, { sessionSecret: SESSION_SECRET })
  return {
    app,
    deps,
    db,
    clock,
    statements: () => {
      const seen = ran
      ran = []
      return seen
    },
  }
}
