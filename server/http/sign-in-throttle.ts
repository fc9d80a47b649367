import { eq } from 'drizzle-orm'
import { addMinutes, instantMs } from '#shared/time/instant'
import { throttles } from '../db/schema/people.ts'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'

/** Per account: ten failures in a quarter of an hour, then each further one doubles the wait, up to a quarter of an hour. */
const FREE_FAILURES = 10
const WINDOW_MINUTES = 15
const LONGEST_WAIT_SECONDS = 15 * 60

/**
 * @throws AppError `too-many`, with when to try again
 */
export function refuseWhileThrottled(deps: Deps, key: string) {
  const row = deps.db.select().from(throttles).where(eq(throttles.key, key)).get()
  const now = deps.clock.now()
  if (row?.blockedUntil && row.blockedUntil > now) {
    const seconds = Math.ceil((instantMs(row.blockedUntil) - instantMs(now)) / 1000)
    throw new AppError('too-many', `Too many tries. Wait ${waitInWords(seconds)}, then try again.`, {
      retryAfterSeconds: seconds,
    })
  }
}

export function countFailure(deps: Deps, key: string) {
  const now = deps.clock.now()
  const row = deps.db.select().from(throttles).where(eq(throttles.key, key)).get()
  const fresh = !row || now > addMinutes(row.windowStartedAt, WINDOW_MINUTES)
  const failures = fresh ? 1 : row.failures + 1
  const over = failures - FREE_FAILURES
  const wait = over < 0 ? 0 : Math.min(2 ** over, LONGEST_WAIT_SECONDS)
  const values = {
    failures,
    windowStartedAt: fresh ? now : row.windowStartedAt,
    blockedUntil: wait > 0 ? addMinutes(now, wait / 60) : null,
  }
  deps.db
    .insert(throttles)
    .values({ key, ...values })
    .onConflictDoUpdate({ target: throttles.key, set: values })
    .run()
}

export const forgetFailures = (deps: Deps, key: string) =>
  deps.db.delete(throttles).where(eq(throttles.key, key)).run()

const waitInWords = (seconds: number) =>
  seconds < 60 ? `${seconds} ${seconds === 1 ? 'second' : 'seconds'}` : `${Math.ceil(seconds / 60)} minutes`
