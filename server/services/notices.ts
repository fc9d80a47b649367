import { and, asc, eq, inArray } from 'drizzle-orm'
import type { CalendarDay } from '#shared/time/day'
import { addMinutes, type Instant } from '#shared/time/instant'
import {
  isLoanReminder,
  isOptional,
  LETTER_LIFE_DAYS,
  LOAN_REMINDERS,
  type LetterSubject,
  type NoticeKind,
} from '#shared/notices/vocabulary'
import { letters, noticePreferences } from '../db/schema/notices.ts'
import { members } from '../db/schema/people.ts'
import type { Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { newId } from '../ids.ts'
import { draftOf, type NoticeFacts } from '../mail/letters/drafts.ts'
import { layOut, type Draft } from '../mail/letters/letter.ts'
import { spaceBrief } from './space.ts'

interface About {
  type: LetterSubject
  id: string
  /** The day the letter speaks of, such as the return-by day. */
  on?: CalendarDay
}

interface Queued {
  /** Says which letter this is; the second of one key is not written. */
  dedupeKey: string
  about?: About
  /** When nobody needs it any more. Five days from now unless sooner. */
  usefulUntil?: Instant
}

type Notice = { [K in NoticeKind]: Queued & { kind: K; memberId: string; facts: NoticeFacts[K] } }[NoticeKind]

/**
 * Queues a letter to a member in the transaction of what it reports: either both are there or neither.
 * Gives back the letter's id; undefined when the member has left, has switched this kind off, or was told already.
 */
export function queueNotice(tx: Tx, deps: Deps, notice: Notice): string | undefined {
  const { kind, memberId, facts, about } = notice
  if (isWritten(tx, notice.dedupeKey)) return undefined
  const member = tx
    .select({ name: members.name, status: members.status })
    .from(members)
    .where(eq(members.id, memberId))
    .get()
  if (!member || member.status === 'left') return undefined
  if (isOptional(kind) && switchedOff(tx, memberId).includes(kind)) return undefined
  if (about && isLoanReminder(kind)) dropOlderReminders(tx, about)
  const draft = draftOf(kind, facts as never, deps.clock.timeZone)
  return queueLetter(tx, deps, { ...notice, kind, name: member.name, memberId, draft })
}

/** Queues any letter, also to someone who is no member yet. Prefer {@link queueNotice}. */
export function queueLetter(
  tx: Tx,
  deps: Deps,
  letter: Queued & { kind: string; name: string; draft: Draft } & (
      { memberId: string } | { toAddress: string }
    ),
): string | undefined {
  const id = newId()
  const now = deps.clock.now()
  const { about } = letter
  const latest = addMinutes(now, LETTER_LIFE_DAYS * 24 * 60)
  const usefulUntil = letter.usefulUntil && letter.usefulUntil < latest ? letter.usefulUntil : latest
  const { changes } = tx
    .insert(letters)
    .values({
      id,
      dedupeKey: letter.dedupeKey,
      kind: letter.kind,
      memberId: 'memberId' in letter ? letter.memberId : null,
      toAddress: 'toAddress' in letter ? letter.toAddress : null,
      aboutType: about?.type ?? null,
      aboutId: about?.id ?? null,
      aboutOn: about?.on ?? null,
      ...layOut(letter.draft, { name: letter.name, space: spaceBrief(deps, tx).name, appUrl: deps.appUrl }),
      messageId: `<${id}@${new URL(deps.appUrl).hostname}>`,
      inReplyTo: about ? (firstOfThread(tx, about) ?? null) : null,
      queuedAt: now,
      sendAfter: now,
      usefulUntil,
      status: 'queued',
    })
    .onConflictDoNothing({ target: letters.dedupeKey })
    .run()
  return changes === 1 ? id : undefined
}

/** The optional kinds this member has switched off. */
export const switchedOff = (tx: Tx | Deps['db'], memberId: string) =>
  tx
    .select({ off: noticePreferences.off })
    .from(noticePreferences)
    .where(eq(noticePreferences.memberId, memberId))
    .get()?.off ?? []

const isWritten = (tx: Tx, dedupeKey: string) =>
  tx.select({ id: letters.id }).from(letters).where(eq(letters.dedupeKey, dedupeKey)).get() !== undefined

/** A reminder that waits for the relay is overtaken by the next one: the member gets the newest, not the pile. */
function dropOlderReminders(tx: Tx, about: About) {
  tx.update(letters)
    .set({ status: 'dropped', leasedUntil: null, lastError: 'A newer reminder took its place.' })
    .where(
      and(
        eq(letters.aboutType, about.type),
        eq(letters.aboutId, about.id),
        eq(letters.status, 'queued'),
        inArray(letters.kind, [...LOAN_REMINDERS]),
      ),
    )
    .run()
}

const firstOfThread = (tx: Tx, about: About) =>
  tx
    .select({ messageId: letters.messageId })
    .from(letters)
    .where(and(eq(letters.aboutType, about.type), eq(letters.aboutId, about.id)))
    .orderBy(asc(letters.queuedAt))
    .limit(1)
    .get()?.messageId
