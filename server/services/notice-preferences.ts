import { and, eq } from 'drizzle-orm'
import type { NoticePreferences, PreferencesChange } from '#shared/notices/contract'
import {
  isOptional,
  NOTICE_KINDS,
  NOTICE_NAMES,
  OPTIONAL_NOTICES,
  type OptionalNotice,
} from '#shared/notices/vocabulary'
import { roleCovers, type Role } from '#shared/people/vocabulary'
import { noticePreferences, unsubscribeTokens } from '../db/schema/notices.ts'
import { members } from '../db/schema/people.ts'
import { write, type Db, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError, notFound } from '../errors.ts'
import { digest } from '../ids.ts'

interface Reader {
  id: string
  role: Role
}

/** What a member has chosen; members are not asked about letters that only stewards get. */
export function preferencesOf(db: Db | Tx, reader: Reader): NoticePreferences {
  const row = db.select().from(noticePreferences).where(eq(noticePreferences.memberId, reader.id)).get()
  const off = row?.off ?? []
  return {
    choices: OPTIONAL_NOTICES.filter((kind) => isFor(kind, reader.role)).map((kind) => ({
      kind,
      name: NOTICE_NAMES[kind],
      on: !off.includes(kind),
    })),
    always: NOTICE_KINDS.filter((kind) => !isOptional(kind)).map((kind) => NOTICE_NAMES[kind]),
    version: row?.version ?? 1,
  }
}

const isFor = (kind: OptionalNotice, role: Role) => kind !== 'steward-digest' || roleCovers(role, 'steward')

export function choosePreferences(deps: Deps, reader: Reader, version: number, change: PreferencesChange) {
  return write(deps.db, (tx) => {
    if (preferencesOf(tx, reader).version !== version)
      throw new AppError('stale', 'Your choices were changed elsewhere meanwhile. Load them again.')
    const wanted = (kind: OptionalNotice, offNow: boolean) => (change[kind] ?? !offNow) === false
    setOff(tx, deps, reader.id, (off) => OPTIONAL_NOTICES.filter((kind) => wanted(kind, off.includes(kind))))
    return preferencesOf(tx, reader)
  })
}

function setOff(
  tx: Tx,
  deps: Deps,
  memberId: string,
  change: (off: readonly OptionalNotice[]) => OptionalNotice[],
) {
  const row = tx.select().from(noticePreferences).where(eq(noticePreferences.memberId, memberId)).get()
  const values = {
    off: change(row?.off ?? []),
    updatedAt: deps.clock.now(),
    version: (row?.version ?? 1) + 1,
  }
  tx.insert(noticePreferences)
    .values({ memberId, ...values })
    .onConflictDoUpdate({ target: noticePreferences.memberId, set: values })
    .run()
}

/** What a link would stop, and whether it is still on. @throws AppError `not-found` */
export function stopInfo(db: Db | Tx, token: string) {
  const row = db
    .select({
      memberId: unsubscribeTokens.memberId,
      kind: unsubscribeTokens.kind,
      off: noticePreferences.off,
    })
    .from(unsubscribeTokens)
    .innerJoin(members, and(eq(members.id, unsubscribeTokens.memberId), eq(members.status, 'active')))
    .leftJoin(noticePreferences, eq(noticePreferences.memberId, unsubscribeTokens.memberId))
    .where(eq(unsubscribeTokens.tokenDigest, digest(token)))
    .get()
  if (!row) throw notFound('That link')
  const { kind, memberId } = row
  return { memberId, kind, name: NOTICE_NAMES[kind], on: !(row.off ?? []).includes(kind) }
}

/** Stops the kind of letter a link is for. Doing it again changes nothing. @throws AppError `not-found` */
export function stopByLink(deps: Deps, token: string) {
  return write(deps.db, (tx) => {
    const { memberId, kind, on } = stopInfo(tx, token)
    if (on) setOff(tx, deps, memberId, (off) => [...off, kind])
    return stopInfo(tx, token)
  })
}
