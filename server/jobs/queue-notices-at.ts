import { eq, inArray } from 'drizzle-orm'
import { addMinutes, type Instant } from '#shared/time/instant'
import { letters } from '../db/schema/notices.ts'
import { members } from '../db/schema/people.ts'
import { write, type Db } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { queueNotices } from './queue-notices.ts'

class DryRun extends Error {}

/** Queues what is due at the moment of the clock; a dry run takes it back, so that what is shown is what would really be written. */
export function queueAt(deps: Deps, { dryRun, leaveAt }: { dryRun: boolean; leaveAt: Instant }) {
  let notices: QueuedNotice[] = []
  try {
    write(deps.db, () => {
      const ids = queueNotices(deps)
      notices = describe(deps.db, ids)
      if (dryRun) throw new DryRun()
      sendFrom(deps.db, ids, leaveAt)
    })
  } catch (error) {
    if (!(error instanceof DryRun)) throw error
  }
  return notices
}

type QueuedNotice = ReturnType<typeof describe>[number]

const describe = (db: Db, ids: string[]) =>
  db
    .select({
      kind: letters.kind,
      memberId: letters.memberId,
      to: members.email,
      subject: letters.subject,
      aboutType: letters.aboutType,
      aboutId: letters.aboutId,
      dedupeKey: letters.dedupeKey,
    })
    .from(letters)
    .leftJoin(members, eq(members.id, letters.memberId))
    .where(inArray(letters.id, ids))
    .orderBy(letters.dedupeKey)
    .all()

/** The moment asked about decides which letters; they leave by the clock on the wall, whichever side of it that moment lies. */
function sendFrom(db: Db, ids: string[], at: Instant) {
  const set = { queuedAt: at, sendAfter: at, usefulUntil: addMinutes(at, 24 * 60) }
  db.update(letters).set(set).where(inArray(letters.id, ids)).run()
}
