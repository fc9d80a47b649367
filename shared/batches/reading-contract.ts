import { z } from 'zod'
import { FERMENT_STATUSES } from '../brewing/index.ts'
import { endpoint } from '../http/endpoint.ts'
import { Id, line, numberIn } from '../http/fields.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant, InstantInput } from '../time/instant.ts'
import { RawGravity } from './gravity.ts'
import { STUCK_CAUSES } from './stuck.ts'
import { READING_CHANGES } from './vocabulary.ts'

const params = z.object({ id: Id })
const readingParams = z.object({ id: Id, readingId: Id })

const readingFacts = {
  at: InstantInput,
  /** As read. */
  gravity: RawGravity,
  /** Of the liquid; outside 5 to 40 °C no correction holds. */
  temperatureC: numberIn(5, 40),
  hydrometerItemId: Id.nullable(),
  ph: numberIn(2, 8).nullable(),
  note: line(500).nullable(),
}
const { hydrometerItemId, ph, note, ...needed } = readingFacts

export const ReadingRequest = z.strictObject({
  ...needed,
  hydrometerItemId: hydrometerItemId.optional(),
  ph: ph.optional(),
  note: note.optional(),
})
export type ReadingRequest = z.output<typeof ReadingRequest>

export const ReadingPatch = z.strictObject(z.object(readingFacts).partial().shape)
export type ReadingPatch = z.output<typeof ReadingPatch>

/** What a reading said before a change. */
export const ReadingBefore = z.object({
  at: Instant,
  gravity: z.number(),
  temperatureC: z.number(),
  correctedGravity: z.number(),
  hydrometerItemId: Id.nullable(),
  ph: z.number().nullable(),
})
export type ReadingBefore = z.output<typeof ReadingBefore>

export const Reading = z.object({
  ...ReadingBefore.shape,
  id: Id,
  hydrometerTag: z.string().nullable(),
  /** What the instrument's own check added. */
  offsetSg: z.number(),
  note: z.string().nullable(),
  edited: z.boolean(),
  version: z.int(),
})
export type Reading = z.output<typeof Reading>

export const ReadingTrace = z.object({
  readingId: Id,
  change: z.enum(READING_CHANGES),
  changedAt: Instant,
  changedByName: z.string(),
  before: ReadingBefore,
})
export type ReadingTrace = z.output<typeof ReadingTrace>

/** Keep a vessel longer, because the ferment is likely to outlast its loan. */
export const ExtensionOffer = z.object({
  loanId: Id,
  kindName: z.string(),
  tag: z.string().nullable(),
  returnBy: CalendarDay,
  /** Days by which the likely end passes the return-by day. */
  byDays: z.int(),
  keepTo: CalendarDay,
  /** Granted at once; otherwise it goes to the desk. */
  atOnce: z.boolean(),
  /** How many bookings it would leave without an item. */
  delays: z.int(),
  /** The first day somebody else is waiting for one, if it would be delayed. */
  neededOn: CalendarDay.nullable(),
  /** An extension was asked for already, to this day. */
  askedTo: CalendarDay.nullable(),
})
export type ExtensionOffer = z.output<typeof ExtensionOffer>

export const Forecast = z.object({
  status: z.enum(FERMENT_STATUSES),
  word: z.string(),
  sentence: z.string(),
  reasons: z.array(z.string()),
  og: z.number().nullable(),
  expectedFg: z.number().nullable(),
  finalGravity: z.number().nullable(),
  finalGravityBand: z.object({ low: z.number(), high: z.number() }).nullable(),
  finishOn: z.object({ early: CalendarDay, likely: CalendarDay, late: CalendarDay }).nullable(),
  /** The fitted curve, a point a day from pitching to the end of the picture. */
  curve: z.array(z.object({ on: CalendarDay, gravity: z.number(), low: z.number(), high: z.number() })),
  residual: z.number().nullable(),
  offers: z.array(ExtensionOffer),
  /** Only when it is stuck. */
  triage: z.array(
    z.object({
      cause: z.enum(STUCK_CAUSES),
      fact: z.string(),
      act: z.string(),
      odds: z.enum(['likely', 'look', 'unlikely']),
    }),
  ),
})
export type Forecast = z.output<typeof Forecast>

/** A hydrometer of the space, and what its own check adds. */
export const Hydrometer = z.object({
  itemId: Id,
  tag: z.string(),
  kindName: z.string(),
  offsetSg: z.number(),
  markedForTemperatureC: z.number(),
  calibratedOn: CalendarDay.nullable(),
  /** Out to you just now. */
  inHand: z.boolean(),
})
export type Hydrometer = z.output<typeof Hydrometer>

export const readingEndpoints = {
  hydrometers: endpoint({
    method: 'GET',
    path: '/hydrometers',
    access: 'member',
    summary: 'Hydrometers of the space with what each adds to a reading; those in your hands first.',
    reply: z.object({ items: z.array(Hydrometer), nextCursor: z.null() }),
  }),
  addReading: endpoint({
    method: 'POST',
    path: '/batches/:id/readings',
    access: 'member',
    summary: 'Log a gravity: kept as read, and corrected for temperature and the instrument’s own offset.',
    creates: 'sync',
    status: 201,
    params,
    body: ReadingRequest,
    reply: Reading,
  }),
  changeReading: endpoint({
    method: 'PATCH',
    path: '/batches/:id/readings/:readingId',
    access: 'member',
    summary: 'Correct a reading; what it said before is kept.',
    versioned: true,
    params: readingParams,
    body: ReadingPatch,
    reply: Reading,
  }),
  deleteReading: endpoint({
    method: 'DELETE',
    path: '/batches/:id/readings/:readingId',
    access: 'member',
    summary: 'Take a reading out; a trace of it stays.',
    status: 204,
    params: readingParams,
    reply: null,
  }),
  readingTrace: endpoint({
    method: 'GET',
    path: '/batches/:id/readings/trace',
    access: 'member',
    summary: 'What was edited and deleted, newest first (at most 200).',
    params,
    reply: z.object({ items: z.array(ReadingTrace), nextCursor: z.null() }),
  }),
  forecast: endpoint({
    method: 'GET',
    path: '/batches/:id/forecast',
    access: 'member',
    summary: 'Where the ferment stands, where it will end and when, and which loans that outlasts.',
    params,
    reply: Forecast,
  }),
}
