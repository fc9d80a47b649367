import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, line, numberIn } from '../http/fields.ts'
import { Instant } from '../time/instant.ts'
import { HYGIENE_WARNINGS } from './hygiene.ts'
import { ItemDetail } from './item-contract.ts'
import { HYGIENE_STATES } from './vocabulary.ts'

export const HygieneRequest = z.strictObject({
  state: z.enum(HYGIENE_STATES),
  /** A code of the list of agents, or the name on the bottle. */
  agent: line(60).optional(),
  /** As the label gives it, with its unit: "25 mg/L". */
  concentration: line(60).optional(),
  contactMinutes: numberIn(0, 10_080).optional(),
  note: line(500).optional(),
})
export type HygieneRequest = z.output<typeof HygieneRequest>

export const HygieneWarning = z.object({ code: z.enum(HYGIENE_WARNINGS), message: z.string() })

/** The item after it, and what deserves a second look. */
export const HygieneResult = ItemDetail.extend({ warnings: z.array(HygieneWarning) })
export type HygieneResult = z.output<typeof HygieneResult>

export const CalibrationRequest = z.strictObject({
  /** What it shows in plain water. */
  waterReadingSg: numberIn(0.98, 1.02),
  waterTemperatureC: numberIn(5, 40),
})
export type CalibrationRequest = z.output<typeof CalibrationRequest>

export const Calibration = z.object({
  id: Id,
  itemId: Id,
  waterReadingSg: z.number(),
  waterTemperatureC: z.number(),
  offsetSg: z.number(),
  calibratedByName: z.string(),
  calibratedAt: Instant,
})
export type Calibration = z.output<typeof Calibration>

const params = z.object({ id: Id })

export const careEndpoints = {
  recordHygiene: endpoint({
    method: 'POST',
    path: '/items/:id/hygiene',
    access: 'steward',
    summary: 'Records that an item is dirty, cleaned, or sanitised: how, for how long, by you, now.',
    params,
    body: HygieneRequest,
    status: 201,
    reply: HygieneResult,
    creates: 'sync',
  }),
  calibrate: endpoint({
    method: 'POST',
    path: '/items/:id/calibrations',
    access: 'steward',
    summary: 'Checks a hydrometer in plain water; its offset counts for readings from now on.',
    params,
    body: CalibrationRequest,
    status: 201,
    reply: Calibration,
    creates: 'sync',
  }),
}
