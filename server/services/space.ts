import { and, eq } from 'drizzle-orm'
import type { z } from 'zod'
import type { SpaceBrief } from '#shared/session/contract'
import type { Space, SpaceChange } from '#shared/space/contract'
import { space } from '../db/schema/space.ts'
import type { Db, Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'

function spaceRow(db: Db | Tx) {
  const row = db.select().from(space).where(eq(space.id, 1)).get()
  if (!row) throw new Error('the space has no row')
  return row
}

/** How the space is set up. */
export const getSpace = (deps: Deps, db: Db | Tx = deps.db): Space => ({
  ...spaceRow(db),
  timeZone: deps.clock.timeZone,
})

/** What the app needs before it draws anything. */
export function spaceBrief(deps: Deps, db: Db | Tx = deps.db): SpaceBrief {
  const { name, currency, demo } = spaceRow(db)
  return { name, currency, demo, timeZone: deps.clock.timeZone, today: deps.clock.today() }
}

export function editSpace(deps: Deps, version: number, change: z.output<typeof SpaceChange>): Space {
  const { changes } = deps.db
    .update(space)
    .set({ ...change, version: version + 1, updatedAt: deps.clock.now() })
    .where(and(eq(space.id, 1), eq(space.version, version)))
    .run()
  if (changes === 0)
    throw new AppError(
      'stale',
      'Somebody changed the settings meanwhile. Load them again, then make your change.',
    )
  return getSpace(deps)
}

/** The zone an admin set, else the environment's. Read each time, so that a change counts at once in every process. */
export function zoneReader(db: Db, fallback: string): () => string {
  const read = db.$client.prepare('SELECT time_zone FROM space WHERE id = 1').pluck()
  return () => (read.get() as string | null) ?? fallback
}
