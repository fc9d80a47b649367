import { LETTERS_AT_ONCE, RELAY_FAILURES, RELAY_REST_SECONDS } from '#shared/notices/retry'
import type { Deps } from '../deps.ts'
import { SendError, type Mailer } from '../mail/mailer.ts'
import {
  anyHeldUp,
  claimLetter,
  markRefused,
  markSent,
  releaseHeldUp,
  type Claimed,
} from '../services/letters.ts'

export interface LetterSender {
  /** Sends what is due; a call while one runs does nothing. */
  run: () => Promise<void>
  /** Takes no further letter and waits for those on their way. */
  stop: () => Promise<void>
  /** Milliseconds, by a clock nobody sets, at which it last did something. */
  lastActiveMs: () => number
}

/**
 * The worker behind the outbox. At least once: a crash between the relay's yes and our mark sends that one letter again, with the
 * same Message-ID. When the relay fails five times in a row it rests for a minute, then is asked without a letter.
 */
export function letterSender(
  deps: Deps,
  mailer: Mailer,
  monotonicMs: () => number = () => performance.now(),
): LetterSender {
  let running: Promise<void> | undefined
  let stopped = false
  let failures = 0
  let restingUntilMs = -Infinity
  let activeMs = monotonicMs()
  // What was held up when the last process ended may go as soon as the relay answers, so a start counts as an outage.
  let outage = anyHeldUp(deps)
  let suspect = outage

  const resting = () => monotonicMs() < restingUntilMs
  const rest = () => void (restingUntilMs = monotonicMs() + RELAY_REST_SECONDS * 1000)

  async function round() {
    activeMs = monotonicMs()
    if (resting()) return
    if (suspect && !(await relayAnswers())) return
    await Promise.all(Array.from({ length: LETTERS_AT_ONCE }, sendInTurn))
  }

  /** After an outage all that waited goes at once. A relay that answers but fails letters is left to their own waits. */
  async function relayAnswers() {
    if (!(await mailer.probe())) {
      outage = true
      rest()
      return false
    }
    if (outage) releaseHeldUp(deps)
    outage = suspect = false
    failures = 0
    return true
  }

  async function sendInTurn() {
    while (!stopped && !resting()) {
      const letter = claimLetter(deps)
      if (!letter) return
      await sendOne(letter)
    }
  }

  async function sendOne(claimed: Claimed) {
    const { id, outgoing } = claimed
    try {
      await mailer.send(outgoing)
    } catch (error) {
      if (!(error instanceof SendError)) throw error
      markRefused(deps, id, error)
      deps.log.warn(
        { letter: id, failure: error.failure, final: error.permanent, why: error.message },
        'letter not sent',
      )
      suspect ||= error.failure === 'relay'
      failures = error.failure === 'relay' ? failures + 1 : 0
      if (failures >= RELAY_FAILURES) rest()
      return
    } finally {
      activeMs = monotonicMs()
    }
    failures = 0
    markSent(deps, claimed)
  }

  return {
    run: () => (running ??= round().finally(() => void (running = undefined))),
    stop: async () => {
      stopped = true
      await running?.catch(() => undefined)
    },
    lastActiveMs: () => activeMs,
  }
}
