import { and, desc, eq } from 'drizzle-orm'
import { sessions } from '../db/schema/people.ts'
import type { Deps } from '../deps.ts'
import { notFound } from '../errors.ts'
import { digest } from '../ids.ts'

/** What a list of sessions shows in place of the digest: enough to name one, no use for anything else. */
const shown = (sidDigest: string) => digest(sidDigest).slice(0, 16)

export function ownSessions(deps: Deps, memberId: string, currentDigest: string) {
  const items = deps.db
    .select()
    .from(sessions)
    .where(eq(sessions.memberId, memberId))
    .orderBy(desc(sessions.seenAt))
    .all()
    .map((row) => ({
      id: shown(row.sidDigest),
      startedAt: row.createdAt,
      seenAt: row.seenAt,
      device: row.device,
      current: row.sidDigest === currentDigest,
    }))
  return { items }
}

export function endOwnSession(deps: Deps, memberId: string, id: string) {
  const row = deps.db
    .select({ sidDigest: sessions.sidDigest })
    .from(sessions)
    .where(eq(sessions.memberId, memberId))
    .all()
    .find(({ sidDigest }) => shown(sidDigest) === id)
  if (!row) throw notFound('That session')
  deps.db
    .delete(sessions)
    .where(and(eq(sessions.sidDigest, row.sidDigest), eq(sessions.memberId, memberId)))
    .run()
}

export const endSessionsOf = (deps: Deps, memberId: string) =>
  deps.db.delete(sessions).where(eq(sessions.memberId, memberId)).run()

const BROWSERS: [RegExp, string][] = [
  [/Edg\//, 'Edge'],
  [/Firefox\//, 'Firefox'],
  [/Chrom(e|ium)\//, 'Chromium'],
  [/Safari\//, 'Safari'],
]
const SYSTEMS: [RegExp, string][] = [
  [/iPhone|iPad/, 'iOS'],
  [/Android/, 'Android'],
  [/Windows/, 'Windows'],
  [/Mac OS X/, 'macOS'],
  [/Linux/, 'Linux'],
]

/** A browser's long name for itself, in two words. */
export function deviceInWords(userAgent = ''): string {
  const pick = (list: [RegExp, string][]) => list.find(([pattern]) => pattern.test(userAgent))?.[1]
  const words = [pick(BROWSERS), pick(SYSTEMS)].filter(Boolean)
  return words.length > 0 ? words.join(' on ') : 'Unknown browser'
}
