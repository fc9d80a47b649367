import { sweepIdempotencyKeys } from '../http/idempotency.ts'
import { sweepSessions } from '../http/sessions.ts'
import type { Deps } from '../deps.ts'
import type { Mailer } from '../mail/mailer.ts'
import { runLoanRound } from '../services/loans/round.ts'
import { sweepPacketPhotos } from '../services/yeast/photo.ts'
import { backUpHourly } from './hourly-backup.ts'
import { queueNotices } from './queue-notices.ts'
import { letterSender } from './send-letters.ts'
import { sweepAccounts } from './sweep-accounts.ts'
import { sweepLetters } from './sweep-letters.ts'

export interface Jobs {
  /** Whether the worker that sends letters has been at it lately. */
  alive: () => boolean
  /** Starts nothing more and waits for what runs. */
  stop: () => Promise<void>
}

const MINUTE_MS = 60_000
/** So that a letter leaves within seconds of being written; an empty outbox costs one look into an index. */
const SEND_MS = 2_000
const DEAD_AFTER_MS = 3 * MINUTE_MS

/** By the minute. Each is safe to run again at any time and catches up by itself, so there is nothing to remember between runs. */
const BY_MINUTE: [name: string, run: (deps: Deps) => unknown][] = [
  ['loans', runLoanRound],
  ['notices', queueNotices],
]

const HOURLY: [name: string, run: (deps: Deps) => unknown][] = [
  ['sweep sessions', sweepSessions],
  ['sweep idempotency keys', sweepIdempotencyKeys],
  ['sweep letters', sweepLetters],
  ['sweep accounts', sweepAccounts],
  ['sweep packet photos', sweepPacketPhotos],
  ['back up', backUpHourly],
]

/** What runs by the clock. Short timers only: a long one overflows, and sleeps through a clock that is set. */
export function startJobs(deps: Deps, mailer: Mailer): Jobs {
  const sender = letterSender(deps, mailer)
  const attempt = (name: string, run: (deps: Deps) => unknown) => {
    const failed = (error: unknown) => deps.log.error({ err: error, job: name }, 'job failed; it runs again')
    try {
      void Promise.resolve(run(deps)).catch(failed)
    } catch (error) {
      failed(error)
    }
  }
  let minutes = 0
  const minute = () => {
    for (const [name, run] of BY_MINUTE) attempt(name, run)
    if (minutes++ % 60 === 0) for (const [name, run] of HOURLY) attempt(name, run)
  }
  const send = () =>
    void sender.run().catch((error: unknown) => deps.log.error({ err: error, job: 'letters' }, 'job failed'))
  const timers = [setInterval(minute, MINUTE_MS), setInterval(send, SEND_MS)]
  for (const timer of timers) timer.unref()
  minute()
  send()
  return {
    alive: () => performance.now() - sender.lastActiveMs() < DEAD_AFTER_MS,
    stop: async () => {
      for (const timer of timers) clearInterval(timer)
      await sender.stop()
      mailer.close()
    },
  }
}
