import type { Logger } from 'pino'
import type { Clock } from './clock.ts'
import type { Db } from './db/open.ts'

/** What every service is given: nothing is reached for. */
export interface Deps {
  db: Db
  clock: Clock
  log: Logger
  /** Base of every link in a letter; never taken from a request. */
  appUrl: string
  uploadsDir: string
  mailFrom: string
  demo: boolean
  /** No relay is named: letters are caught and readable at /dev/mail. */
  mailCaught: boolean
  /** Whether the worker that sends letters has run lately. */
  mailAlive: () => boolean
}
