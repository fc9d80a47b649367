import { inArray } from 'drizzle-orm'
import type { RoomLoad } from '#shared/batches/contract'
import { roomCo2 } from '#shared/brewing/index'
import { addMinutes } from '#shared/time/instant'
import { batches } from '../../db/schema/batches.ts'
import type { Deps } from '../../deps.ts'
import { getSpace } from '../space.ts'
import { fitOf } from './forecast.ts'
import { loadFacts } from './facts.ts'

/** A shut cellar of a small house, where nobody has measured the room. */
const UNMEASURED = { roomM3: 30, airChangesPerHour: 0.5 }
/** Hardly a bubble a minute; less is not worth adding up. */
const WORKING_POINTS_PER_DAY = 0.1

/** How much CO2 the batches that ferment now give off, against the room they stand in. Names nobody. */
export function roomLoad(deps: Deps): RoomLoad {
  const rows = deps.db
    .select()
    .from(batches)
    .where(inArray(batches.status, ['fermenting', 'conditioning']))
    .all()
  const factsOf = loadFacts(
    deps.db,
    rows.map(({ id }) => id),
  )
  const now = deps.clock.now()
  const tomorrow = addMinutes(now, 24 * 60)
  const working = rows.flatMap((batch) => {
    const fit = fitOf(deps, batch, factsOf(batch.id))
    if (!fit || fit.status === 'finished' || fit.status === 'stuck') return []
    const pointsPerDay = Math.min(200, Math.max(0, (fit.curve(now) - fit.curve(tomorrow)) * 1000))
    return pointsPerDay > WORKING_POINTS_PER_DAY ? [{ volumeLitres: batch.volumeLitres, pointsPerDay }] : []
  })
  const space = getSpace(deps)
  const room = {
    roomM3: space.roomM3 ?? UNMEASURED.roomM3,
    airChangesPerHour: space.airChangesPerHour ?? UNMEASURED.airChangesPerHour,
  }
  return { ...roomCo2({ batches: working, ...room }), batches: working.length, ...room }
}
