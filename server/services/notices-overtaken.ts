import type { letters } from '../db/schema/notices.ts'
import type { Tx } from '../db/open.ts'

/** Why a letter that waited is no longer true, in words for the mail record; undefined while it still is. */
export function overtaken(_tx: Tx, _letter: typeof letters.$inferSelect): string | undefined {
  return undefined
}
