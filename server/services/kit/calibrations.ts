import { eq, sql } from 'drizzle-orm'
import { hydrometerOffset } from '#shared/brewing/hydrometer'
import type { Calibration, CalibrationRequest } from '#shared/kit/care-contract'
import { calibrations, items, kinds } from '../../db/schema/kit.ts'
import { write } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { addItemEvent } from './item-events.ts'
import { itemRow } from './item-rows.ts'

/**
 * Checks a hydrometer in plain water. The offset is kept on the item, to five decimals, and counts from now on.
 * @throws AppError `not-found`, `wrong-state` for what is not a hydrometer
 */
export function calibrateItem(
  deps: Deps,
  user: Pick<SignedIn, 'id' | 'name'>,
  idOrTag: string,
  check: CalibrationRequest,
): Calibration {
  const id = newId()
  const now = deps.clock.now()
  return write(deps.db, (tx) => {
    const item = itemRow(tx, idOrTag)
    const kind = tx.select().from(kinds).where(eq(kinds.id, item.kindId)).get()
    if (kind?.markedForTemperatureC == null)
      throw new AppError(
        'wrong-state',
        `${item.tag} is no hydrometer: its kind has no temperature it is marked for.`,
      )
    const exact = hydrometerOffset({
      waterReading: check.waterReadingSg,
      waterTemperatureC: check.waterTemperatureC,
      calibrationTemperatureC: kind.markedForTemperatureC,
    })
    const offsetSg = Math.round(exact * 1e5) / 1e5
    tx.insert(calibrations)
      .values({ ...check, id, itemId: item.id, offsetSg, calibratedBy: user.id, calibratedAt: now })
      .run()
    tx.update(items)
      .set({
        calibrationOffsetSg: offsetSg,
        calibrationTemperatureC: check.waterTemperatureC,
        calibratedOn: deps.clock.today(),
        calibratedBy: user.id,
        updatedAt: now,
        version: sql`${items.version} + 1`,
      })
      .where(eq(items.id, item.id))
      .run()
    addItemEvent(tx, {
      itemId: item.id,
      event: 'calibrated',
      actorId: user.id,
      happenedAt: now,
      aboutId: id,
      detail: { ...check, offsetSg },
    })
    return { ...check, id, itemId: item.id, offsetSg, calibratedByName: user.name, calibratedAt: now }
  })
}
