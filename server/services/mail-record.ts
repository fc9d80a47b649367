import { and, desc, eq, lt, or, sql, type SQL } from 'drizzle-orm'
import type { LetterInFull, LetterRow } from '#shared/notices/contract'
import { NOTICE_NAMES, type LetterStatus, type NoticeKind } from '#shared/notices/vocabulary'
import { addMinutes, type Instant } from '#shared/time/instant'
import { caughtLetters, letters } from '../db/schema/notices.ts'
import { members } from '../db/schema/people.ts'
import { write, type Db, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError, notFound } from '../errors.ts'
import { decodeCursor, pageFrom } from '../http/cursor.ts'
import { isPrivate, PRIVATE_WORDS, SWEPT_WORDS } from './letters.ts'

interface Query {
  status?: LetterStatus | undefined
  q?: string | undefined
  limit: number
  cursor?: string | undefined
}

/** Newest first. `q` is looked for in the subject, the address and the member's name; it is text, never a pattern. */
export function listLetters(deps: Deps, { status, q, limit, cursor }: Query) {
  const where: (SQL | undefined)[] = [status && eq(letters.status, status)]
  if (q) {
    const words = `%${q.replace(/[\\%_]/g, (char) => `\\${char}`)}%`
    const has = (column: SQL) => sql`${column} LIKE ${words} ESCAPE '\\'`
    where.push(or(has(sql`${letters.subject}`), has(TO), has(sql`${members.name}`)))
  }
  if (cursor) {
    const [at, id] = decodeCursor(cursor, 2) as [Instant, string]
    where.push(or(lt(letters.queuedAt, at), and(eq(letters.queuedAt, at), lt(letters.id, id))))
  }
  const rows = rowsOf(deps.db)
    .where(and(...where))
    .orderBy(desc(letters.queuedAt), desc(letters.id))
    .limit(limit + 1)
    .all()
  const page = pageFrom(rows, limit, ({ letter }) => [letter.queuedAt, letter.id])
  return { ...page, items: page.items.map(shown) }
}

/** @throws AppError `not-found` */
export function getLetter(db: Db | Tx, id: string): LetterInFull {
  const row = rowsOf(db).where(eq(letters.id, id)).get()
  if (!row) throw notFound('That letter')
  const { kind, text, html, messageId, usefulUntil } = row.letter
  const words = isPrivate(kind) ? { text: PRIVATE_WORDS, html: '' } : { text, html }
  return { ...shown(row), ...words, messageId, usefulUntil }
}

/** Puts a letter at the head of the queue again, with a day in which to arrive. @throws AppError `not-found`, `wrong-state` */
export function retryLetter(deps: Deps, id: string): LetterInFull {
  return write(deps.db, (tx) => {
    const row = tx.select().from(letters).where(eq(letters.id, id)).get()
    if (!row) throw notFound('That letter')
    if (row.status === 'sent')
      throw new AppError('wrong-state', 'That letter has gone. There is nothing to try again.')
    if (row.text === PRIVATE_WORDS || row.text === SWEPT_WORDS)
      throw new AppError('wrong-state', 'What that letter said is no longer kept, so it cannot go again.')
    const now = deps.clock.now()
    const aDay = addMinutes(now, 24 * 60)
    const usefulUntil = row.usefulUntil > aDay ? row.usefulUntil : aDay
    tx.update(letters)
      .set({ status: 'queued', sendAfter: now, usefulUntil, tries: 0, failure: null, leasedUntil: null })
      .where(eq(letters.id, id))
      .run()
    return getLetter(tx, id)
  })
}

const TO = sql<string>`coalesce(${letters.toAddress}, ${members.email}, '')`

const rowsOf = (db: Db | Tx) =>
  db
    .select({ letter: letters, memberName: members.name, to: TO })
    .from(letters)
    .leftJoin(members, eq(members.id, letters.memberId))

type Row = { letter: typeof letters.$inferSelect; memberName: string | null; to: string }

function shown({ letter, memberName, to }: Row): LetterRow {
  const { id, kind, memberId, subject, status, queuedAt, sendAfter, sentAt, tries, lastError } = letter
  return {
    id,
    kind,
    name: NOTICE_NAMES[kind as NoticeKind] ?? 'About an account',
    memberId,
    memberName,
    to,
    subject,
    status,
    queuedAt,
    nextTryAt: status === 'queued' ? sendAfter : null,
    sentAt,
    tries,
    lastError,
  }
}

/** What the catcher took, newest first. @throws AppError `not-found` when a relay is named, so that nothing is caught */
export function listCaught(deps: Deps, { limit, cursor }: { limit: number; cursor?: string | undefined }) {
  onlyWhileCatching(deps)
  let before: SQL | undefined
  if (cursor) {
    const [at, id] = decodeCursor(cursor, 2) as [Instant, string]
    before = or(
      lt(caughtLetters.receivedAt, at),
      and(eq(caughtLetters.receivedAt, at), lt(caughtLetters.id, id)),
    )
  }
  const rows = deps.db
    .select({
      id: caughtLetters.id,
      receivedAt: caughtLetters.receivedAt,
      to: caughtLetters.envelopeTo,
      subject: caughtLetters.subject,
    })
    .from(caughtLetters)
    .where(before)
    .orderBy(desc(caughtLetters.receivedAt), desc(caughtLetters.id))
    .limit(limit + 1)
    .all()
  return pageFrom(rows, limit, ({ receivedAt, id }) => [receivedAt, id])
}

/** @throws AppError `not-found` */
export function getCaught(deps: Deps, id: string) {
  onlyWhileCatching(deps)
  const row = deps.db.select().from(caughtLetters).where(eq(caughtLetters.id, id)).get()
  if (!row) throw notFound('That letter')
  const { envelopeFrom: from, envelopeTo: to, ...rest } = row
  return { ...rest, from, to }
}

function onlyWhileCatching({ mailCaught }: Deps) {
  if (!mailCaught) throw notFound('The mail catcher')
}
