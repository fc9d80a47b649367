import { and, inArray, lt, ne } from 'drizzle-orm'
import { addMinutes } from '#shared/time/instant'
import { letters, noticeRounds, unsubscribeTokens } from '../db/schema/notices.ts'
import type { Deps } from '../deps.ts'
import { SWEPT_WORDS } from '../services/letters.ts'

const DAY = 24 * 60
/** What a letter said is kept for a month, that it was written for a little over a year. */
const TEXT_DAYS = 30
const ROW_DAYS = 400

/** Forgets the words of old letters, then the letters, and links to stop letters that are as old. */
export function sweepLetters(deps: Deps) {
  const now = deps.clock.now()
  const done = ['sent', 'failed', 'dropped'] as const
  deps.db
    .update(letters)
    .set({ text: SWEPT_WORDS, html: '' })
    .where(
      and(
        inArray(letters.status, done),
        lt(letters.queuedAt, addMinutes(now, -TEXT_DAYS * DAY)),
        ne(letters.text, SWEPT_WORDS),
      ),
    )
    .run()
  const before = addMinutes(now, -ROW_DAYS * DAY)
  deps.db
    .delete(letters)
    .where(and(inArray(letters.status, done), lt(letters.queuedAt, before)))
    .run()
  deps.db.delete(noticeRounds).where(lt(noticeRounds.doneAt, before)).run()
  deps.db.delete(unsubscribeTokens).where(lt(unsubscribeTokens.createdAt, before)).run()
}
