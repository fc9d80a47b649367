import { and, asc, eq, gt, isNull, lte, or, sql } from 'drizzle-orm'
import { addMinutes, type Instant } from '#shared/time/instant'
import { isOptional } from '#shared/notices/vocabulary'
import { retryMinutes } from '#shared/notices/retry'
import { letters, unsubscribeTokens } from '../db/schema/notices.ts'
import { members } from '../db/schema/people.ts'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { digest, newToken } from '../ids.ts'
import { withStopLink } from '../mail/letters/letter.ts'
import type { OutgoingLetter, SendError } from '../mail/mailer.ts'
import { switchedOff } from './notices.ts'
import { overtaken } from './notices-overtaken.ts'

/** Longer than any try may take, so that two workers never hold one letter; short enough to try again after a crash. */
const LEASE_MINUTES = 2

export type Letter = typeof letters.$inferSelect

/** A letter this worker alone may send now. */
export interface Claimed {
  id: string
  kind: string
  outgoing: OutgoingLetter
}

/**
 * Takes the next letter that is due and leases it; undefined when there is none. Letters that have become pointless meanwhile are
 * set aside on the way.
 */
export function claimLetter(deps: Deps): Claimed | undefined {
  // Most looks find nothing: they should not take the write lock.
  if (!nextDue(deps.db, deps.clock.now())) return undefined
  return write(deps.db, (tx) => {
    for (;;) {
      const letter = nextDue(tx, deps.clock.now())
      if (!letter) return undefined
      const claimed = prepare(tx, deps, letter)
      if (claimed) return claimed
    }
  })
}

/** A clock set back leaves leases and waits in the future: what lies further ahead than either can reach counts as due. */
function nextDue(tx: Tx | Deps['db'], now: Instant): Letter | undefined {
  return tx
    .select()
    .from(letters)
    .where(
      and(
        eq(letters.status, 'queued'),
        or(lte(letters.sendAfter, now), gt(letters.sendAfter, addMinutes(now, 61))),
        or(
          isNull(letters.leasedUntil),
          lte(letters.leasedUntil, now),
          gt(letters.leasedUntil, addMinutes(now, LEASE_MINUTES)),
        ),
      ),
    )
    .orderBy(asc(letters.sendAfter), asc(letters.id))
    .limit(1)
    .get()
}

function prepare(tx: Tx, deps: Deps, letter: Letter): Claimed | undefined {
  const now = deps.clock.now()
  const setAside = (status: 'dropped' | 'failed', why: string) => {
    tx.update(letters)
      .set({ status, leasedUntil: null, lastError: why, ...forgotten(letter.kind) })
      .where(eq(letters.id, letter.id))
      .run()
    return undefined
  }
  if (letter.usefulUntil <= now)
    return letter.tries > 0
      ? setAside('failed', `Given up: ${letter.lastError ?? 'it could not be sent in time.'}`.slice(0, 500))
      : setAside('dropped', 'No longer useful.')
  const to = recipient(tx, letter)
  if (!to) return setAside('dropped', 'The member has left.')
  const why = overtaken(tx, letter)
  if (why) return setAside('dropped', why)
  const { kind, memberId } = letter
  let stopUrl: string | undefined
  if (memberId && isOptional(kind)) {
    if (switchedOff(tx, memberId).includes(kind))
      return setAside('dropped', 'The member has switched it off.')
    const token = newToken()
    tx.insert(unsubscribeTokens)
      .values({ tokenDigest: digest(token), memberId, kind, createdAt: now })
      .run()
    stopUrl = `${deps.appUrl}/unsubscribe/${token}`
  }
  tx.update(letters)
    .set({ leasedUntil: addMinutes(now, LEASE_MINUTES), toAddress: to.address })
    .where(eq(letters.id, letter.id))
    .run()
  return {
    id: letter.id,
    kind,
    outgoing: {
      to,
      subject: letter.subject,
      ...(stopUrl ? { ...withStopLink(letter, stopUrl), stopUrl } : { text: letter.text, html: letter.html }),
      messageId: letter.messageId,
      ...(letter.inReplyTo && { inReplyTo: letter.inReplyTo }),
    },
  }
}

/** Where the member is reached now, not when the letter was written. */
function recipient(tx: Tx, { memberId, toAddress }: Letter) {
  if (!memberId) return toAddress ? { name: '', address: toAddress } : undefined
  const member = tx
    .select({ name: members.name, address: members.email, status: members.status })
    .from(members)
    .where(eq(members.id, memberId))
    .get()
  return member && member.status !== 'left' ? { name: member.name, address: member.address } : undefined
}

/** Letters about accounts carry links that open them: what they said is nobody's business once they have gone. */
export const isPrivate = (kind: string) => kind.startsWith('account-')
export const PRIVATE_WORDS = 'This letter is between the house and its reader. Its words are not kept.'
/** What stands in place of words older than a month. */
export const SWEPT_WORDS = 'What this letter said is kept for 30 days.'

export function markSent(deps: Deps, { id, kind }: Pick<Claimed, 'id' | 'kind'>) {
  const sentAt = deps.clock.now()
  deps.db
    .update(letters)
    .set({
      status: 'sent',
      sentAt,
      leasedUntil: null,
      failure: null,
      lastError: null,
      tries: nextTry,
      ...forgotten(kind),
    })
    .where(eq(letters.id, id))
    .run()
}

export function markRefused(deps: Deps, id: string, error: SendError) {
  write(deps.db, (tx) => {
    const letter = tx.select().from(letters).where(eq(letters.id, id)).get()
    if (letter?.status !== 'queued') return
    const tries = letter.tries + 1
    tx.update(letters)
      .set({
        tries,
        leasedUntil: null,
        failure: error.failure,
        lastError: error.message.slice(0, 500),
        ...(error.permanent
          ? { status: 'failed' as const, ...forgotten(letter.kind) }
          : { sendAfter: addMinutes(deps.clock.now(), retryMinutes(tries)) }),
      })
      .where(eq(letters.id, id))
      .run()
  })
}

const forgotten = (kind: string) => (isPrivate(kind) ? { text: PRIVATE_WORDS, html: '' } : {})

const nextTry = sql`${letters.tries} + 1`

const heldUp = and(eq(letters.status, 'queued'), eq(letters.failure, 'relay'))

/** Whether letters wait for nothing but the relay. */
export const anyHeldUp = (deps: Deps) =>
  deps.db.select({ id: letters.id }).from(letters).where(heldUp).limit(1).get() !== undefined

/** The relay answers again: what waited for it goes now, not at the end of its hour. */
export const releaseHeldUp = (deps: Deps) =>
  deps.db.update(letters).set({ sendAfter: deps.clock.now(), failure: null }).where(heldUp).run().changes
